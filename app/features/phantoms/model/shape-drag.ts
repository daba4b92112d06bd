import { decimalText } from '../../../lib/decimal';
import { shapeNumbers, type DraftShape } from './draft-shape';

/** What of a shape is dragged. */
export type Grip = { readonly part: 'body' | 'a' | 'b' | 'angle' } | { readonly part: 'vertex'; readonly index: number };

const whole = (mm: number): string => decimalText(Math.round(mm));

/** Turns a point into the shape's own axes. */
function local(shape: DraftShape, x: number, y: number): [number, number] {
  const n = shapeNumbers(shape);
  const t = (n.angle * Math.PI) / 180;
  const dx = x - n.x;
  const dy = y - n.y;
  return [dx * Math.cos(t) + dy * Math.sin(t), -dx * Math.sin(t) + dy * Math.cos(t)];
}

/**
 * The shape after the pointer went from `from` to `to` (mm, body frame), both measured on the shape as it was when the
 * drag began. Lengths land on whole mm, angles on whole degrees.
 */
export function dragShape(start: DraftShape, grip: Grip, from: readonly [number, number], to: readonly [number, number]): DraftShape {
  const n = shapeNumbers(start);
  if (grip.part === 'body') return { ...start, x: whole(n.x + to[0] - from[0]), y: whole(n.y + to[1] - from[1]) };
  if (grip.part === 'angle') return { ...start, angle: decimalText(Math.round((Math.atan2(to[1] - n.y, to[0] - n.x) * 180) / Math.PI)) };
  const [u, v] = local(start, to[0], to[1]);
  if (grip.part === 'vertex') {
    return { ...start, vertices: start.vertices.map((vertex, i) => (i === grip.index ? ([whole(u), whole(v)] as const) : vertex)) };
  }
  const length = Math.max(1, Math.round(start.kind === 'annulus' ? Math.hypot(u, v) : Math.abs(grip.part === 'a' ? u : v)));
  if (start.kind === 'annulus') {
    const bounded = grip.part === 'a' ? Math.min(length, Math.max(1, Math.round(n.b) - 1)) : Math.max(length, Math.round(n.a) + 1);
    return { ...start, [grip.part]: decimalText(bounded) };
  }
  return { ...start, [grip.part]: decimalText(length) };
}

/** A corner between two others, at the middle of the longest edge. */
export function addVertex(shape: DraftShape): DraftShape {
  const points = shapeNumbers(shape).vertices;
  let longest = 0;
  let length = -1;
  points.forEach((p, i) => {
    const q = points[(i + 1) % points.length]!;
    const d = Math.hypot(p[0] - q[0], p[1] - q[1]);
    if (d > length) {
      length = d;
      longest = i;
    }
  });
  const p = points[longest];
  const q = points[(longest + 1) % points.length];
  if (!p || !q) return shape;
  const vertices = [...shape.vertices];
  vertices.splice(longest + 1, 0, [decimalText(Math.round((p[0] + q[0]) / 2)), decimalText(Math.round((p[1] + q[1]) / 2))]);
  return { ...shape, vertices };
}
