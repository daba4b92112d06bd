import { bisectUntil } from '../../mesh/bisection';
import { meshBody, type TriangleMesh } from '../../mesh/body-mesh';
import { quadraticMesh, type QuadraticMesh } from '../../mesh/quadratic-mesh';
import type { ElectrodeFrame } from './electrodes';

/** Sizes of the inversion's meshes, in radii. */
export interface InversionDetail {
  /** Smallest and largest wanted edge of a conductivity cell. */
  readonly cellMin: number;
  readonly cellMax: number;
  /** Longest edge of an element over the distance to the nearest electrode end, and its lower bound. */
  readonly grading: number;
  readonly elementMin: number;
}

export interface InversionMesh {
  readonly cells: TriangleMesh;
  readonly elements: QuadraticMesh;
  /** Cell of each element. */
  readonly cellOf: Int32Array;
}

/**
 * Detail for a contact impedance, z sigma / R, a pure number, and a number of electrodes. About 1,600 cells, finer towards the boundary where the data
 * resolve more.
 */
export function inversionDetail(contact: number, electrodes: number): InversionDetail {
  return { cellMin: 0.055, cellMax: 0.084, grading: electrodes > 16 ? 0.8 : 1, elementMin: Math.min(2e-3, Math.max(5e-5, 1.2 * contact)) };
}

/**
 * Meshes of the inversion, which the simulation never uses: a coarse triangulation gives the conductivity cells, and the same
 * triangles, bisected towards the electrode ends, are the quadratic elements of the potential.
 */
export function inversionMesh(frame: ElectrodeFrame, detail: InversionDetail): InversionMesh {
  const cells = meshBody({ boundary: frame.boundary, ends: frame.ends, grading: 0.3, hMin: detail.cellMin, hMax: detail.cellMax, seed: 11 });
  const ends = frame.ends.map((s) => frame.boundary.pointAt(s));
  const ex = ends.map(([x]) => x);
  const ey = ends.map(([, y]) => y);
  const { mesh, parent } = bisectUntil(cells, (x, y) => {
    let nearest = Infinity;
    for (let i = 0; i < ex.length; i++) {
      const d = (x - ex[i]) * (x - ex[i]) + (y - ey[i]) * (y - ey[i]);
      if (d < nearest) nearest = d;
    }
    return Math.max(detail.elementMin, detail.grading * Math.sqrt(nearest));
  });
  return { cells, elements: quadraticMesh(mesh), cellOf: parent };
}
