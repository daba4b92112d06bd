import { cos, sin } from '../../core/math';
import { collectTaps } from './collect-taps';
import type { PointSpread } from './point-spread';

/** Points of the path a pixel that it crosses, for the inversion. */
const samples = 64;

/** Length of a + s d, -half <= s <= half, inside [-size / 2, size / 2]; as an interval of s. */
function clip(a: number, d: number, size: number, range: { low: number; high: number }): void {
  if (d === 0) {
    if (Math.abs(a) > size / 2) range.high = -Infinity;
    return;
  }
  const s0 = (-size / 2 - a) / d;
  const s1 = (size / 2 - a) / d;
  range.low = Math.max(range.low, Math.min(s0, s1));
  range.high = Math.min(range.high, Math.max(s0, s1));
}

/** Multiples of 90 degrees give exact zeros, so that the path keeps to its row or column of pixels. */
function direction(degrees: number): readonly [number, number] {
  const turn = ((degrees % 360) + 360) % 360;
  if (turn % 90 === 0) return [[1, 0], [0, 1], [-1, 0], [0, -1]][turn / 90] as [number, number];
  const angle = (turn * Math.PI) / 180;
  return [cos(angle), sin(angle)];
}

/** A straight motion at even speed, from -half to half (m) in a direction. The inversion counts evenly spaced points of the path by pixel. */
export function motionSpread(half: number, degrees: number): PointSpread {
  const [c, s] = direction(degrees);
  const across = half * Math.abs(c);
  return {
    reachX: across,
    reachY: half * Math.abs(s),
    taps(dx, dy) {
      const nx = Math.ceil(across / dx + 0.5);
      const ny = Math.ceil((half * Math.abs(s)) / dy + 0.5);
      const width = 2 * nx + 1;
      const counts = new Float64Array(width * (2 * ny + 1));
      const points = samples * (nx + ny);
      // Both halves at once: a point on the border of two pixels counts alike on either side.
      for (let k = 0; k < points; k++) {
        const t = (half * (k + 0.5)) / points;
        const j = Math.round((t * c) / dx);
        const i = Math.round((t * s) / dy);
        counts[(i + ny) * width + j + nx]++;
        counts[(ny - i) * width + nx - j]++;
      }
      return collectTaps(nx, ny, (i, j) => counts[(i + ny) * width + j + nx]);
    },
    response(x, y, dx, dy) {
      const range = { low: -half, high: half };
      clip(x, c, dx, range);
      clip(y, s, dy, range);
      return Math.max(0, range.high - range.low);
    },
    edgeIntegral(x) {
      if (x <= -across) return 0;
      if (x >= across) return x;
      return ((x + across) * (x + across)) / (4 * across);
    },
    formula: 'p(x, y) = \\frac{1}{2 L} \\int_{-L}^{L} \\delta(x - s\\cos\\theta)\\,\\delta(y - s\\sin\\theta)\\,\\mathrm{d}s',
  };
}
