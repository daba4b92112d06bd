import { describe, expect, it } from 'vitest';
import { angularFourier } from '../../../../solvers/methods/direct/angular-fourier';
import { cauchyMatrices } from '../../../../solvers/methods/direct/cauchy-transform';
import { radialNodes } from '../../../../solvers/methods/direct/polar-grid';
import { ringInterpolation } from '../../../../solvers/methods/direct/ring-interpolation';

describe('angularFourier', () => {
  it.each([2, 8, 32, 64])('of %d points has the sums of its definition, and backwards the values times n', (n) => {
    const width = 3;
    const re = Float64Array.from({ length: n * width }, (_, a) => Math.sin(1 + a * a));
    const im = Float64Array.from({ length: n * width }, (_, a) => Math.cos(2 + 3 * a));
    const fourier = angularFourier(n, width);
    const cr = re.slice();
    const ci = im.slice();
    fourier.forward(cr, ci);
    for (let p = 0; p < n; p++)
      for (let i = 0; i < width; i++) {
        let x = 0;
        let y = 0;
        for (let j = 0; j < n; j++) {
          const angle = (-2 * Math.PI * p * j) / n;
          x += re[j * width + i] * Math.cos(angle) - im[j * width + i] * Math.sin(angle);
          y += re[j * width + i] * Math.sin(angle) + im[j * width + i] * Math.cos(angle);
        }
        expect(Math.abs(cr[fourier.place[p] * width + i] - x)).toBeLessThan(1e-12);
        expect(Math.abs(ci[fourier.place[p] * width + i] - y)).toBeLessThan(1e-12);
      }
    fourier.backward(cr, ci);
    for (let a = 0; a < n * width; a++) expect(Math.abs(cr[a] / n - re[a])).toBeLessThan(1e-13);
  });
  it('refuses what is no power of two', () => {
    for (const n of [0, 1, 12, 8192]) expect(() => angularFourier(n, 1)).toThrow(RangeError);
  });
});

describe('cauchyMatrices', () => {
  const nodes = radialNodes(8);
  const { matrices, centre } = cauchyMatrices(nodes, 16);
  const n = nodes.length;
  const applied = (p: number, g: (s: number) => number): number[] => {
    const row = (p < 0 ? p + 16 : p) * n;
    return Array.from(nodes, (_, i) => nodes.reduce((sum, s, j) => sum + matrices[(row + i) * n + j] * g(s), 0));
  };
  // d-bar of the right-hand side is the left one, and it is the solution that the disc's outside continues without growing.
  it.each([
    ['1', 0, () => 1, (s: number) => s],
    ['k (p = 1)', 1, (s: number) => s, (s: number) => s * s - 1],
    ['k^3 (p = 3)', 3, (s: number) => s ** 3, (s: number) => s * s * (s * s - 1)],
    ['conj k^2 (p = -2)', -2, (s: number) => s * s, (s: number) => s ** 3 / 3],
    ['k |k|^2 (p = 1)', 1, (s: number) => s ** 3, (s: number) => (s ** 4 - 1) / 2],
  ] as const)('takes %s to its closed form', (_, p, g, h) => {
    applied(p, g).forEach((value, i) => expect(Math.abs(value - h(nodes[i]))).toBeLessThan(1e-13));
  });
  it('has the value at the centre', () => {
    expect(Math.abs(nodes.reduce((sum, s, j) => sum + centre[j] * s, 0) + 1)).toBeLessThan(1e-14);
  });
});

describe('ringInterpolation', () => {
  const rings = Array.from(radialNodes(6), (radius) => ({ radius, count: 16 }));
  it('is exact for harmonic polynomials times powers of r^2', () => {
    const f = (x: number, y: number): number => 1 + x - 2 * y * x + (x ** 3 - 3 * x * y * y) * (x * x + y * y) - (x * x + y * y) ** 3;
    const values = Float64Array.from(rings.flatMap(({ radius, count }) => Array.from({ length: count }, (_, j) => f(radius * Math.cos((2 * Math.PI * j) / count), radius * Math.sin((2 * Math.PI * j) / count)))));
    const points = [[0, 0], [0.3, -0.2], [0.99, 0], [-0.5, 0.8]];
    const out = ringInterpolation(Float64Array.from(points.flat()), rings)(values);
    points.forEach(([x, y], i) => expect(Math.abs(out[i] - f(x, y))).toBeLessThan(1e-12));
  });
});
