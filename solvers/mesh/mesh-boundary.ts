import { atan2, cos, sin } from '../core/math';
import type { SizeSource } from './size-field';

/**
 * The closed boundary of a mesh, star-shaped about the origin, counter-clockwise by arc length from the positive x axis.
 * Lengths in radii of the body.
 */
export interface MeshBoundary {
  /** The hull of the boundary's points is the body, so that a triangulation of points needs no cutting. */
  readonly convex: boolean;
  /** Perimeter. */
  readonly length: number;
  /** Half the side of a square about the origin that holds the body with a margin. */
  readonly reach: number;
  pointAt(s: number): [number, number];
  /** Arc length, in [0, length), of the boundary's point on the ray through (x, y). */
  arcLengthOf(x: number, y: number): number;
  /** Direction of the boundary near a point of it, any length. */
  tangent(x: number, y: number): [number, number];
  inside(x: number, y: number): boolean;
  /** Distance to the boundary, right to first order near it; negative outside. */
  depth(x: number, y: number): number;
  /** The point of the boundary nearest to a point near it. */
  nearest(x: number, y: number): [number, number];
  /** Moves point i of the x, y pairs along its ray so that it lies at least `margin` inside. */
  pullIn(coords: Float64Array, i: number, margin: number): void;
  /** Places where the boundary bends more than the unit circle, with an edge of `share` times the radius of curvature, at least `floor`. */
  bends(share: number, floor: number): SizeSource[];
}

const twoPi = 2 * Math.PI;

export const unitCircle: MeshBoundary = {
  convex: true,
  length: twoPi,
  reach: 1.1,
  pointAt: (s) => [cos(s), sin(s)],
  arcLengthOf(x, y) {
    const angle = atan2(y, x);
    return angle < 0 ? angle + twoPi : angle;
  },
  tangent: (x, y) => [-y, x],
  inside: (x, y) => x * x + y * y < 1,
  depth: (x, y) => 1 - Math.sqrt(x * x + y * y),
  nearest(x, y) {
    const r = Math.sqrt(x * x + y * y);
    return [x / r, y / r];
  },
  pullIn(coords, i, margin) {
    const x = coords[2 * i];
    const y = coords[2 * i + 1];
    const r = Math.sqrt(x * x + y * y);
    const inner = 1 - margin;
    if (r > inner) {
      coords[2 * i] = x * (inner / r);
      coords[2 * i + 1] = y * (inner / r);
    }
  },
  bends: () => [],
};

/** Where the segment from a to b (one end inside, one outside or on the boundary) meets the boundary. */
export function boundaryCrossing(boundary: MeshBoundary, ax: number, ay: number, bx: number, by: number): [number, number] {
  let low = 0;
  let high = 1;
  const insideStart = boundary.inside(ax, ay);
  for (let i = 0; i < 50; i++) {
    const t = 0.5 * (low + high);
    if (boundary.inside(ax + t * (bx - ax), ay + t * (by - ay)) === insideStart) low = t;
    else high = t;
  }
  return boundary.nearest(ax + low * (bx - ax), ay + low * (by - ay));
}
