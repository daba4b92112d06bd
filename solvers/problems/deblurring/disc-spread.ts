import { asin } from '../../core/math';
import { collectTaps } from './collect-taps';
import type { PointSpread } from './point-spread';

/** Samples a side in each pixel, for the inversion. */
const samples = 8;

/** Area of the part of the unit disc with coordinates at most x and y. */
function cornerArea(x: number, y: number): number {
  if (x <= -1 || y <= -1) return 0;
  const right = Math.min(1, x);
  const top = Math.min(1, y);
  // Below `top` lies the whole column where it is higher than the circle, nothing where it is lower, else sqrt(1 - t^2) + top.
  const turn = Math.sqrt(1 - top * top);
  const halfDisc = (t: number): number => 0.5 * (t * Math.sqrt(1 - t * t) + asin(t));
  const middle = Math.min(right, turn);
  let area = middle > -turn ? halfDisc(middle) - halfDisc(-turn) + top * (middle + turn) : 0;
  if (top > 0) {
    area += 2 * (halfDisc(Math.min(right, -turn)) - halfDisc(-1));
    if (right > turn) area += 2 * (halfDisc(right) - halfDisc(turn));
  }
  return area;
}

/** Area of the unit disc inside a rectangle. */
export function discInRectangle(x0: number, x1: number, y0: number, y1: number): number {
  return Math.max(0, cornerArea(x1, y1) - cornerArea(x0, y1) - cornerArea(x1, y0) + cornerArea(x0, y0));
}

/** A uniform disc of a radius in m, as of a lens out of focus. The inversion weighs a pixel by its share of 64 samples in the disc. */
export function discSpread(radius: number): PointSpread {
  return {
    reachX: radius,
    reachY: radius,
    taps: (dx, dy) =>
      collectTaps(Math.ceil(radius / dx + 0.5), Math.ceil(radius / dy + 0.5), (row, column) => {
        let count = 0;
        for (let a = 0; a < samples; a++) {
          const y = (row + (a + 0.5) / samples - 0.5) * dy;
          for (let b = 0; b < samples; b++) {
            const x = (column + (b + 0.5) / samples - 0.5) * dx;
            if (x * x + y * y < radius * radius) count++;
          }
        }
        return count;
      }),
    response: (x, y, dx, dy) => discInRectangle((-dx / 2 - x) / radius, (dx / 2 - x) / radius, (-dy / 2 - y) / radius, (dy / 2 - y) / radius),
    edgeIntegral(x) {
      const t = x / radius;
      if (t <= -1) return 0;
      if (t >= 1) return x;
      const q = 1 - t * t;
      const root = Math.sqrt(q);
      return radius * (t / 2 + (t * asin(t) + root - (q * root) / 3) / Math.PI);
    },
    formula: 'p(x, y) = \\frac{1}{\\pi r^2} \\text{ for } x^2 + y^2 < r^2, \\text{ else } 0',
  };
}
