import { describe, expect, it } from 'vitest';
import { bisectUntil } from '../../../solvers/mesh/bisection';
import { meshBody, type TriangleMesh } from '../../../solvers/mesh/body-mesh';

const coarse = meshBody({ ends: [0, 0.4, 2, 2.6], grading: 0.5, hMin: 0.15, hMax: 0.25, seed: 3 });
const wanted = (x: number, y: number): number => Math.max(0.01, 0.8 * Math.hypot(x - 1, y));
const { mesh, parent } = bisectUntil(coarse, wanted);

const corner = (m: TriangleMesh, t: number, k: number): [number, number] => [m.vertices[2 * m.triangles[3 * t + k]], m.vertices[2 * m.triangles[3 * t + k] + 1]];
const area = ([ax, ay]: number[], [bx, by]: number[], [cx, cy]: number[]): number => ((bx - ax) * (cy - ay) - (by - ay) * (cx - ax)) / 2;
const count = (m: TriangleMesh): number => m.triangles.length / 3;

describe('bisection towards a point', () => {
  it('meets the wanted size everywhere and refines only where asked', () => {
    for (let t = 0; t < count(mesh); t++) {
      const c = [0, 1, 2].map((k) => corner(mesh, t, k));
      const longest = Math.max(...[0, 1, 2].map((k) => Math.hypot(c[k][0] - c[(k + 1) % 3][0], c[k][1] - c[(k + 1) % 3][1])));
      expect(longest).toBeLessThanOrEqual(wanted((c[0][0] + c[1][0] + c[2][0]) / 3, (c[0][1] + c[1][1] + c[2][1]) / 3) * (1 + 1e-12));
    }
    expect(count(mesh)).toBeGreaterThan(count(coarse));
    expect(count(mesh)).toBeLessThan(4 * count(coarse));
  });

  it('is conforming: inner edges have two sides, boundary edges one, and the boundary runs once around the circle', () => {
    const sides = new Map<string, number>();
    for (let t = 0; t < count(mesh); t++) {
      expect(area(corner(mesh, t, 0), corner(mesh, t, 1), corner(mesh, t, 2))).toBeGreaterThan(0);
      for (let k = 0; k < 3; k++) {
        const [a, b] = [mesh.triangles[3 * t + k], mesh.triangles[3 * t + ((k + 1) % 3)]].sort((p, q) => p - q);
        sides.set(`${a},${b}`, (sides.get(`${a},${b}`) ?? 0) + 1);
      }
    }
    const rim = [...sides].filter(([, n]) => n === 1);
    expect(Math.max(...sides.values())).toBe(2);
    expect(rim.length).toBe(mesh.boundaryCount);
    let turned = 0;
    for (let i = 0; i < mesh.boundaryCount; i++) {
      const j = (i + 1) % mesh.boundaryCount;
      expect(sides.get(`${Math.min(i, j)},${Math.max(i, j)}`)).toBe(1);
      expect(Math.abs(Math.hypot(mesh.vertices[2 * i], mesh.vertices[2 * i + 1]) - 1)).toBeLessThan(1e-14);
      const step = Math.atan2(mesh.vertices[2 * j + 1], mesh.vertices[2 * j]) - Math.atan2(mesh.vertices[2 * i + 1], mesh.vertices[2 * i]);
      turned += step < -Math.PI ? step + 2 * Math.PI : step > Math.PI ? step - 2 * Math.PI : step;
    }
    expect(turned).toBeCloseTo(2 * Math.PI, 12);
  });

  it('every triangle lies in its parent, and the triangles of a parent fill it', () => {
    const filled = new Float64Array(count(coarse));
    for (let t = 0; t < count(mesh); t++) {
      const p = [0, 1, 2].map((k) => corner(coarse, parent[t], k));
      const c = [0, 1, 2].map((k) => corner(mesh, t, k));
      filled[parent[t]] += area(c[0], c[1], c[2]);
      const centre = [0, 1].map((d) => (c[0][d] + c[1][d] + c[2][d]) / 3);
      for (let k = 0; k < 3; k++) expect(area(p[k], p[(k + 1) % 3], centre)).toBeGreaterThan(-1e-3);
    }
    for (let t = 0; t < count(coarse); t++) {
      const whole = area(corner(coarse, t, 0), corner(coarse, t, 1), corner(coarse, t, 2));
      // Equal inside; at the rim new vertices lie on the circle and add the sliver beyond the chord (h^3 / 12).
      expect(filled[t]).toBeGreaterThan(whole * (1 - 1e-12));
      expect(filled[t] - whole).toBeLessThan(0.25 ** 3 / 6);
    }
  });

  it('keeps the shape: longest-edge bisection at most halves the smallest angle (Rivara 1984)', () => {
    const smallestAngle = (m: TriangleMesh): number => {
      let smallest = Math.PI;
      for (let t = 0; t < count(m); t++)
        for (let k = 0; k < 3; k++) {
          const [a, b, c] = [corner(m, t, k), corner(m, t, (k + 1) % 3), corner(m, t, (k + 2) % 3)];
          smallest = Math.min(smallest, Math.abs(Math.atan2(2 * area(a, b, c), (b[0] - a[0]) * (c[0] - a[0]) + (b[1] - a[1]) * (c[1] - a[1]))));
        }
      return smallest;
    };
    // A tenth off the bound for vertices moved on to the circle.
    expect(smallestAngle(mesh)).toBeGreaterThan(0.9 * 0.5 * smallestAngle(coarse));
  });

  it('refuses to grow beyond the limit', () => {
    expect(() => bisectUntil(coarse, () => 1e-3, 500)).toThrow(/more than 500 triangles/);
  });
});
