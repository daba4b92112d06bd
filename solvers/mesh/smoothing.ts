import type Delaunator from 'delaunator';
import type { MeshBoundary } from './mesh-boundary';
import type { SizeField } from './size-field';

/** Share of the wanted length up to which an edge pushes, relative to the mean: Persson and Strang 2004 use 1.2. */
const pressure = 1.2;
const step = 0.2;

/**
 * Moves the free points of a Delaunay triangulation towards edges of the wanted length by repulsive bar forces
 * F = max(0, s h - l), s = 1.2 sqrt(sum l^2 / sum h^2) (Persson and Strang 2004, SIAM Review 46, eq. 2.6 and 2.8), with a new
 * triangulation before every step. Points stay at least 0.4 h inside the body.
 * @param delaunay its `coords` are moved in place; points 0 .. fixed - 1 stay, of which the first `boundaryCount` lie on the boundary
 */
export function relax(boundary: MeshBoundary, boundaryCount: number, delaunay: Delaunator<Float64Array>, fixed: number, size: SizeField, iterations: number): void {
  const coords = delaunay.coords as Float64Array;
  const n = coords.length / 2;
  const wanted = new Float64Array(n);
  const force = new Float64Array(2 * n);
  /** Bars across a bay of the boundary, outside the body. */
  const outside = (i: number, j: number): boolean =>
    !boundary.convex && i < boundaryCount && j < boundaryCount && !boundary.inside(0.5 * (coords[2 * i] + coords[2 * j]), 0.5 * (coords[2 * i + 1] + coords[2 * j + 1]));
  for (let i = 0; i < fixed; i++) wanted[i] = size.at(coords[2 * i], coords[2 * i + 1]);
  for (let iteration = 0; iteration < iterations; iteration++) {
    if (iteration > 0) delaunay.update();
    for (let i = fixed; i < n; i++) wanted[i] = size.at(coords[2 * i], coords[2 * i + 1]);
    const { triangles, halfedges } = delaunay;
    let lengths = 0;
    let sizes = 0;
    for (let e = 0; e < triangles.length; e++) {
      if (halfedges[e] > e) continue;
      const i = triangles[e];
      const j = triangles[e % 3 === 2 ? e - 2 : e + 1];
      if (outside(i, j)) continue;
      const dx = coords[2 * i] - coords[2 * j];
      const dy = coords[2 * i + 1] - coords[2 * j + 1];
      const h = 0.5 * (wanted[i] + wanted[j]);
      // Relative lengths, so that the few large edges do not set the scale of the many small ones.
      lengths += (dx * dx + dy * dy) / (h * h);
      sizes += 1;
    }
    const scale = pressure * Math.sqrt(lengths / sizes);
    force.fill(0);
    for (let e = 0; e < triangles.length; e++) {
      if (halfedges[e] > e) continue;
      const i = triangles[e];
      const j = triangles[e % 3 === 2 ? e - 2 : e + 1];
      if (outside(i, j)) continue;
      const dx = coords[2 * i] - coords[2 * j];
      const dy = coords[2 * i + 1] - coords[2 * j + 1];
      const l = Math.sqrt(dx * dx + dy * dy);
      const push = scale * 0.5 * (wanted[i] + wanted[j]) - l;
      if (push <= 0 || l === 0) continue;
      const fx = (push * dx) / l;
      const fy = (push * dy) / l;
      force[2 * i] += fx;
      force[2 * i + 1] += fy;
      force[2 * j] -= fx;
      force[2 * j + 1] -= fy;
    }
    for (let i = fixed; i < n; i++) {
      let dx = step * force[2 * i];
      let dy = step * force[2 * i + 1];
      const d = Math.sqrt(dx * dx + dy * dy);
      const most = 0.3 * wanted[i];
      if (d > most) {
        dx *= most / d;
        dy *= most / d;
      }
      coords[2 * i] += dx;
      coords[2 * i + 1] += dy;
      boundary.pullIn(coords, i, 0.4 * wanted[i]);
    }
  }
  delaunay.update();
}
