import { cos, sin } from '../core/math';
import { unitHash } from './hash';
import type { MeshBoundary } from './mesh-boundary';
import type { PointBuckets } from './point-buckets';
import type { SizeField } from './size-field';

/** A point accepted when nothing lies nearer than this share of the mean wanted size. */
const spacing = 0.74;

/**
 * Fills the body with points by an advancing front: every point offers six neighbours at 60 degrees, one wanted size away,
 * and those with enough room are taken. First in, first out, so layers grow from the boundary and the interfaces inwards.
 * @param seeds the fixed points are `points` 0 .. count - 1; `directions[i]` is the angle of the first offer of fixed point i.
 */
export function fillBody(boundary: MeshBoundary, points: PointBuckets, directions: ArrayLike<number>, size: SizeField, seed: number, limit: number): void {
  const angle: number[] = Array.from(directions);
  const third = Math.PI / 3;
  for (let p = 0; p < points.count; p++) {
    const px = points.x[p];
    const py = points.y[p];
    const hp = points.size[p];
    for (let k = 0; k < 6; k++) {
      const a = angle[p] + k * third;
      const ux = cos(a);
      const uy = sin(a);
      let d = hp;
      let h = size.at(px + d * ux, py + d * uy);
      d = 0.5 * (hp + h);
      h = size.at(px + d * ux, py + d * uy);
      d = 0.5 * (hp + h);
      const x = px + d * ux;
      const y = py + d * uy;
      if (boundary.depth(x, y) < 0.5 * h) continue;
      if (points.crowded(x, y, h, spacing)) continue;
      if (points.count >= limit) throw new RangeError(`The mesh would need more than ${limit} points: choose larger elements.`);
      const q = points.add(x, y, h);
      // A small turn keeps two meshes with other seeds from sharing vertices; it is too small to harm the pattern.
      angle[q] = a + 0.06 * (unitHash(q, seed) - 0.5);
    }
  }
}
