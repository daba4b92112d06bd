import Delaunator from 'delaunator';
import { graphMatrix } from './graph-matrix';

/** Rings of 4 k points around the centre of the unit disc, triangulated: 1 + 2 N (N + 1) nodes. */
export function ringMesh(rings: number): { points: Float64Array; triangles: Int32Array } {
  const points = new Float64Array(2 * (1 + 2 * rings * (rings + 1)));
  let at = 2;
  for (let k = 1; k <= rings; k++)
    for (let i = 0; i < 4 * k; i++) {
      const angle = (2 * Math.PI * i) / (4 * k);
      points[at++] = (k / rings) * Math.cos(angle);
      points[at++] = (k / rings) * Math.sin(angle);
    }
  return { points, triangles: Int32Array.from(new Delaunator(points).triangles) };
}

/** Linear elements: stiffness of a conductivity that varies, plus a mass term on the whole disc that makes it definite. */
export function ringMatrix(rings: number): ReturnType<typeof graphMatrix> {
  const { points, triangles } = ringMesh(rings);
  const entries: [number, number, number][] = [];
  for (let t = 0; t < triangles.length; t += 3) {
    const corner = [triangles[t], triangles[t + 1], triangles[t + 2]];
    const x = corner.map((v) => points[2 * v]);
    const y = corner.map((v) => points[2 * v + 1]);
    const bx = [y[1] - y[2], y[2] - y[0], y[0] - y[1]];
    const by = [x[2] - x[1], x[0] - x[2], x[1] - x[0]];
    const twice = Math.abs(bx[0] * by[1] - bx[1] * by[0]);
    // Points on one straight line give a triangle without area.
    if (twice < 1e-14) continue;
    const sigma = 1 + 0.5 * Math.cos(3 * x[0]) * Math.sin(2 * y[0]);
    for (let i = 0; i < 3; i++) for (let j = 0; j <= i; j++) entries.push([corner[i], corner[j], (sigma * (bx[i] * bx[j] + by[i] * by[j])) / (2 * twice) + (twice / 24) * (i === j ? 2 : 1)]);
  }
  return graphMatrix(points.length / 2, entries, points);
}
