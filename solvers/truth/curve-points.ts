/** Places points along curves at a wanted spacing. */

/** A curve over 0 <= t <= 1, in metres. */
export type Curve = (t: number, out: Float64Array) => void;
export type Spacing = (x: number, y: number) => number;

/** Nodes of the density integral; a spacing function that asks for more is refused rather than followed for ever. */
const maxNodes = 400_000;

/**
 * Parameters of points along a curve so that neighbours lie at most `maxSpacing` apart and spacings change smoothly: the
 * points divide the integral of ds / maxSpacing into equal parts.
 * @param least fewest parts of the curve
 * @returns ascending parameters, from 0 up to but not including 1
 * @throws RangeError when the spacing is not positive or would need too many points
 */
export function spreadAlong(curve: Curve, maxSpacing: Spacing, least: number): Float64Array {
  const point = new Float64Array(2);
  const ts: number[] = [0];
  const cumulative: number[] = [0];
  // Depth-first refinement until a piece is short against the spacing wanted at both its ends and its middle.
  const seeds = Math.max(16, least);
  const stack: number[] = [];
  for (let k = seeds; k > 0; k--) stack.push((k - 1) / seeds, k / seeds);
  const spacingAt = (t: number): number => {
    curve(t, point);
    const h = maxSpacing(point[0], point[1]);
    if (!(h > 0)) throw new RangeError(`The wanted spacing of points must be positive, not ${h}.`);
    return h;
  };
  while (stack.length > 0) {
    const to = stack.pop() as number;
    const from = stack.pop() as number;
    const middle = (from + to) / 2;
    const h0 = spacingAt(from);
    const x0 = point[0];
    const y0 = point[1];
    const h1 = spacingAt(middle);
    const x1 = point[0];
    const y1 = point[1];
    const h2 = spacingAt(to);
    const length = Math.sqrt((x1 - x0) * (x1 - x0) + (y1 - y0) * (y1 - y0)) + Math.sqrt((point[0] - x1) * (point[0] - x1) + (point[1] - y1) * (point[1] - y1));
    if (length > 0.5 * Math.min(h0, h1, h2) && to - from > 1e-9) {
      if (ts.length + stack.length > maxNodes) throw new RangeError('The wanted spacing is too small for the length of the curve.');
      stack.push(middle, to, from, middle);
      continue;
    }
    ts.push(to);
    // Simpson's rule on 1 / h.
    cumulative.push(cumulative[cumulative.length - 1] + (length * (1 / h0 + 4 / h1 + 1 / h2)) / 6);
  }
  const total = cumulative[cumulative.length - 1];
  let parts = Math.max(least, Math.ceil(total * 1.02));
  for (;;) {
    const result = new Float64Array(parts);
    let k = 0;
    for (let i = 1; i < parts; i++) {
      const wanted = (total * i) / parts;
      while (cumulative[k + 1] < wanted) k++;
      const width = cumulative[k + 1] - cumulative[k];
      result[i] = ts[k] + (width > 0 ? ((wanted - cumulative[k]) / width) * (ts[k + 1] - ts[k]) : 0);
    }
    if (parts > maxNodes || spacingsHold(curve, result, maxSpacing)) return result;
    parts = Math.ceil(parts * 1.05) + 1;
  }
}

function spacingsHold(curve: Curve, ts: Float64Array, maxSpacing: Spacing): boolean {
  const a = new Float64Array(2);
  const b = new Float64Array(2);
  for (let i = 0; i < ts.length; i++) {
    curve(ts[i], a);
    curve(i + 1 < ts.length ? ts[i + 1] : 1, b);
    const chord = Math.sqrt((a[0] - b[0]) * (a[0] - b[0]) + (a[1] - b[1]) * (a[1] - b[1]));
    if (chord > Math.max(maxSpacing(a[0], a[1]), maxSpacing(b[0], b[1]))) return false;
  }
  return true;
}
