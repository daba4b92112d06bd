import { describe, expect, it } from 'vitest';
import { meshBody } from '../../../solvers/mesh/body-mesh';
import { quadraticMesh } from '../../../solvers/mesh/quadratic-mesh';
import { assembleStiffness, meshPattern, quadraturePoints } from '../../../solvers/problems/electrical-impedance/assembly';
import { degreeFour, degreeFourShapes, edgeShapes, gaussPoints, gaussWeights } from '../../../solvers/problems/electrical-impedance/elements';

const factorial = (n: number): number => (n < 2 ? 1 : n * factorial(n - 1));

describe('quadratic elements', () => {
  it('integrates r^a s^b over the triangle exactly to degree 4: a! b! / (a + b + 2)!', () => {
    for (let a = 0; a <= 4; a++)
      for (let b = 0; a + b <= 4; b++) {
        const sum = degreeFour.weight.reduce((s, w, p) => s + w * degreeFour.r[p] ** a * degreeFour.s[p] ** b, 0);
        // Rounding of the tabulated points.
        expect(Math.abs(sum - (factorial(a) * factorial(b)) / factorial(a + b + 2))).toBeLessThan(1e-15);
      }
  });

  it('integrates edges exactly to degree 7', () => {
    for (let k = 0; k <= 7; k++) {
      const sum = gaussPoints.reduce((s, t, g) => s + gaussWeights[g] * t ** k, 0);
      expect(Math.abs(sum - (k % 2 === 0 ? 2 / (k + 1) : 0))).toBeLessThan(1e-15);
    }
  });

  it('has shape functions that sum to one and derivatives that sum to zero', () => {
    for (let p = 0; p < degreeFourShapes.points; p++) {
      const sum = (values: Float64Array): number => values.subarray(6 * p, 6 * p + 6).reduce((s, v) => s + v, 0);
      expect(sum(degreeFourShapes.value)).toBeCloseTo(1, 14);
      expect(sum(degreeFourShapes.dr)).toBeCloseTo(0, 14);
      expect(sum(degreeFourShapes.ds)).toBeCloseTo(0, 14);
    }
    expect(edgeShapes(0.3).reduce((s, v) => s + v, 0)).toBeCloseTo(1, 15);
  });

  it('gives the energy of x exactly, that of x^2 - y^2 to the order of the curved boundary, and none to constants', () => {
    const mesh = quadraticMesh(meshBody({ ends: [], grading: 1, hMin: 0.15, hMax: 0.15 }));
    const pattern = meshPattern(mesh);
    const values = new Float64Array(pattern.rows.length);
    const energy = (u: (x: number, y: number) => number, sigma: number | Float64Array): number => {
      assembleStiffness(mesh, pattern, sigma, values);
      const v = Float64Array.from({ length: pattern.n }, (_, i) => u(mesh.nodes[2 * i], mesh.nodes[2 * i + 1]));
      let sum = 0;
      for (let j = 0; j < pattern.n; j++)
        for (let k = pattern.colStart[j]; k < pattern.colStart[j + 1]; k++) sum += (pattern.rows[k] === j ? 1 : 2) * values[k] * v[j] * v[pattern.rows[k]];
      return sum;
    };
    // Isoparametric elements hold linear functions; the area of the curved domain is pi to O(h^4).
    expect(Math.abs(energy((x) => x, 1) - Math.PI)).toBeLessThan(1e-5);
    // Quadratic functions are interpolated, not held, where edges are curved.
    expect(Math.abs(energy((x, y) => x * x - y * y, 1) - 2 * Math.PI)).toBeLessThan(3e-4);
    expect(Math.abs(energy(() => 3, 1))).toBeLessThan(1e-11);
    // sigma = 2 + x at the quadrature points: integral over the disc of (2 + x) |grad x|^2 = 2 pi.
    const places = quadraturePoints(mesh);
    expect(Math.abs(energy((x) => x, Float64Array.from({ length: places.length / 2 }, (_, i) => 2 + places[2 * i])) - 2 * Math.PI)).toBeLessThan(2e-5);
  });
});
