import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { meshBody, type TriangleMesh } from '../../../solvers/mesh/body-mesh';
import { quadraticMesh } from '../../../solvers/mesh/quadratic-mesh';
import { ellipse, shapesTruth, unitGeometry } from '../../support/impedance-case';
import { electrodeFrame } from '../../../solvers/problems/electrical-impedance/electrodes';
import { inFrame } from '../../../solvers/problems/electrical-impedance/simulation-mesh';

const frame = electrodeFrame(unitGeometry());
const sizes = { ends: frame.ends, grading: 0.4, hMin: 2e-3, hMax: 0.2 };

function signedArea(mesh: TriangleMesh, t: number): number {
  const [a, b, c] = mesh.triangles.subarray(3 * t, 3 * t + 3);
  const v = mesh.vertices;
  return 0.5 * ((v[2 * b] - v[2 * a]) * (v[2 * c + 1] - v[2 * a + 1]) - (v[2 * b + 1] - v[2 * a + 1]) * (v[2 * c] - v[2 * a]));
}

/** Positive triangles that fill the boundary polygon, every inner edge shared by two, Euler's formula. */
function expectValid(mesh: TriangleMesh): void {
  const count = mesh.triangles.length / 3;
  const edges = new Map<string, number>();
  let area = 0;
  for (let t = 0; t < count; t++) {
    const part = signedArea(mesh, t);
    expect(part).toBeGreaterThan(0);
    area += part;
    for (let k = 0; k < 3; k++) {
      const a = mesh.triangles[3 * t + k];
      const b = mesh.triangles[3 * t + ((k + 1) % 3)];
      const key = a < b ? `${a} ${b}` : `${b} ${a}`;
      edges.set(key, (edges.get(key) ?? 0) + 1);
    }
  }
  let polygon = 0;
  for (let i = 0; i < mesh.boundaryCount; i++) {
    const j = (i + 1) % mesh.boundaryCount;
    polygon += 0.5 * (mesh.vertices[2 * i] * mesh.vertices[2 * j + 1] - mesh.vertices[2 * i + 1] * mesh.vertices[2 * j]);
  }
  // Rounding of some thousand sums.
  expect(Math.abs(area - polygon)).toBeLessThan(1e-12);
  expect([...edges.values()].filter((n) => n === 1).length).toBe(mesh.boundaryCount);
  expect(mesh.vertices.length / 2 - edges.size + count).toBe(1);
}

describe('mesh of the disc', () => {
  it('is a triangulation with the electrode ends as nodes, graded to them', () => {
    const mesh = meshBody(sizes);
    expectValid(mesh);
    for (const end of frame.ends) {
      let nearest = Infinity;
      for (let i = 0; i < mesh.boundaryCount; i++) nearest = Math.min(nearest, Math.hypot(mesh.vertices[2 * i] - Math.cos(end), mesh.vertices[2 * i + 1] - Math.sin(end)));
      expect(nearest).toBeLessThan(1e-15);
    }
    // Two neighbours of an end lie about hMin away.
    const first = Math.hypot(mesh.vertices[2] - mesh.vertices[0], mesh.vertices[3] - mesh.vertices[1]);
    expect(first).toBeGreaterThan(1e-3);
    expect(first).toBeLessThan(4e-3);
    expect(mesh.quality).toBeGreaterThan(0.4);
  });

  it('has the area of the disc once its edges are curved, to fourth order', () => {
    const area = (hMax: number): number => {
      const q = quadraticMesh(meshBody({ ends: [], grading: 1, hMin: hMax, hMax }));
      let sum = 0;
      // Green's formula over the quadratic boundary edges, exact by Simpson's rule for cubics.
      for (let e = 0; e < q.boundaryEdges.length; e += 3) {
        const [a, b, m] = q.boundaryEdges.subarray(e, e + 3);
        const x = (n: number): number => q.nodes[2 * n];
        const y = (n: number): number => q.nodes[2 * n + 1];
        for (const [t, w] of [[-1, 1 / 3], [0, 4 / 3], [1, 1 / 3]]) {
          const N = [0.5 * t * (t - 1), 0.5 * t * (t + 1), 1 - t * t];
          const D = [t - 0.5, t + 0.5, -2 * t];
          const px = N[0] * x(a) + N[1] * x(b) + N[2] * x(m);
          const py = N[0] * y(a) + N[1] * y(b) + N[2] * y(m);
          const dx = D[0] * x(a) + D[1] * x(b) + D[2] * x(m);
          const dy = D[0] * y(a) + D[1] * y(b) + D[2] * y(m);
          sum += 0.5 * w * (px * dy - py * dx);
        }
      }
      return Math.abs(sum - Math.PI);
    };
    // The rate of piecewise quadratic curves; boundary counts are integers, so the sizes are only nearly halved.
    expect(Math.log2(area(0.4) / area(0.2))).toBeGreaterThan(3.3);
  });

  it('follows interfaces with its edges', () => {
    const truth = shapesTruth([ellipse(0.3, 0.2, 0.25, 0.15, 5, 30)]);
    const interfaces = truth.interfaces.map((curve) => inFrame(curve, frame));
    const mesh = meshBody({ ...sizes, interfaces, interfaceSize: 0.06 });
    expectValid(mesh);
    expect(mesh.interfaceEdges.length / 3).toBeGreaterThan(15);
    const edges = new Set<string>();
    for (let t = 0; t < mesh.triangles.length; t += 3)
      for (let k = 0; k < 3; k++) edges.add([mesh.triangles[t + k], mesh.triangles[t + ((k + 1) % 3)]].sort((a, b) => a - b).join(' '));
    for (let k = 0; k < mesh.interfaceEdges.length; k += 3) {
      expect(edges.has([mesh.interfaceEdges[k], mesh.interfaceEdges[k + 1]].sort((a, b) => a - b).join(' '))).toBe(true);
    }
  });

  it('gives the same bits twice, and shares no inner vertex with a mesh of another seed', () => {
    const a = meshBody(sizes);
    const b = meshBody(sizes);
    expect(b.vertices).toEqual(a.vertices);
    expect(b.triangles).toEqual(a.triangles);
    const c = meshBody({ ...sizes, seed: 2 });
    const places = new Set<string>();
    for (let i = a.boundaryCount; i < a.vertices.length / 2; i++) places.add(`${a.vertices[2 * i].toFixed(9)} ${a.vertices[2 * i + 1].toFixed(9)}`);
    for (let i = c.boundaryCount; i < c.vertices.length / 2; i++) expect(places.has(`${c.vertices[2 * i].toFixed(9)} ${c.vertices[2 * i + 1].toFixed(9)}`)).toBe(false);
  });

  it('stays valid for any sizes and electrodes', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(3, 8, 16),
        fc.double({ min: 0.1, max: 0.9, noNaN: true }),
        fc.double({ min: 0.25, max: 0.9, noNaN: true }),
        fc.double({ min: 1e-4, max: 0.05, noNaN: true }),
        (count, coverage, grading, hMin) => {
          const ends = Array.from({ length: count }, (_, k) => [((k - coverage / 2) * 2 * Math.PI) / count, ((k + coverage / 2) * 2 * Math.PI) / count]).flat();
          const mesh = meshBody({ ends, grading, hMin, hMax: 0.25 });
          expectValid(mesh);
          expect(mesh.quality).toBeGreaterThan(0.3);
        },
      ),
      { numRuns: 8, seed: 20 },
    );
  });

  it('refuses nonsense by name', () => {
    expect(() => meshBody({ ...sizes, hMin: 0 })).toThrow(RangeError);
    expect(() => meshBody({ ...sizes, hMax: 2 })).toThrow(RangeError);
    expect(() => meshBody({ ...sizes, grading: 0 })).toThrow(RangeError);
    expect(() => meshBody({ ...sizes, ends: [0, 0] })).toThrow(/ends lie/);
    expect(() => meshBody({ ...sizes, ends: [NaN] })).toThrow(RangeError);
    expect(() => meshBody({ ...sizes, maxVertices: 100 })).toThrow(/more than 100 points/);
  });
});
