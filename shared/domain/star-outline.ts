/** Figures of the outline r(theta) = 1 + sum_k cosine[k-1] cos k theta + sine[k-1] sin k theta, by samples; lengths in radii. */
export interface StarOutline {
  readonly smallest: number;
  readonly largest: number;
  /** Smallest radius of curvature. */
  readonly sharpest: number;
  readonly length: number;
  /** Length along the outline from angle 0 to an angle (rad), counter-clockwise, within one turn. */
  arcLength(theta: number): number;
}

const samples = 1440;

export function starOutline(cosine: readonly number[], sine: readonly number[]): StarOutline {
  const step = (2 * Math.PI) / samples;
  const speeds: number[] = [];
  let smallest = Infinity;
  let largest = 0;
  let sharpest = Infinity;
  for (let i = 0; i < samples; i++) {
    let r = 1;
    let first = 0;
    let second = 0;
    for (let k = 1; k <= Math.max(cosine.length, sine.length); k++) {
      const a = cosine[k - 1] ?? 0;
      const b = sine[k - 1] ?? 0;
      const c = Math.cos(k * i * step);
      const s = Math.sin(k * i * step);
      r += a * c + b * s;
      first += k * (b * c - a * s);
      second -= k * k * (a * c + b * s);
    }
    const square = r * r + first * first;
    smallest = Math.min(smallest, r);
    largest = Math.max(largest, r);
    sharpest = Math.min(sharpest, (square * Math.sqrt(square)) / Math.abs(square + first * first - r * second));
    speeds.push(Math.sqrt(square));
  }
  const lengths = [0];
  for (let i = 0; i < samples; i++) lengths.push((lengths[i] ?? 0) + 0.5 * step * ((speeds[i] ?? 0) + (speeds[(i + 1) % samples] ?? 0)));
  return {
    smallest,
    largest,
    sharpest,
    length: lengths[samples] ?? 0,
    arcLength(theta) {
      const place = (theta / (2 * Math.PI) - Math.floor(theta / (2 * Math.PI))) * samples;
      const i = Math.min(samples - 1, Math.floor(place));
      const from = lengths[i] ?? 0;
      return from + (place - i) * ((lengths[i + 1] ?? 0) - from);
    },
  };
}
