import { norm2 } from '../../../../solvers/core/vector';

/**
 * Half-width of the central interval that holds `share` of the draws of one data value when the noise is Gaussian and
 * rescaled to the exact norm: the value is then a coordinate of a uniform point on the sphere of dimension m, whose density is
 * proportional to (1 - t^2)^((m - 3) / 2). Relative to the noise norm; about 1.645 / sqrt(m) for 90 %.
 */
export function sphereQuantile(m: number, share: number): number {
  if (!(m >= 2)) return 1;
  if (m === 2) return Math.sin((Math.PI / 2) * share);
  // t = sin(phi): the density becomes cos(phi)^(m - 2), smooth at both ends.
  const steps = 4000;
  const cumulative = new Float64Array(steps + 1);
  const density = (i: number): number => Math.cos((Math.PI / 2) * (i / steps)) ** (m - 2);
  for (let i = 1; i <= steps; i++) cumulative[i] = cumulative[i - 1]! + (density(i - 1) + 4 * density(i - 0.5) + density(i)) / 6;
  const goal = share * cumulative[steps]!;
  let low = 0;
  let high = steps;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (cumulative[middle]! < goal) low = middle;
    else high = middle;
  }
  const span = cumulative[high]! - cumulative[low]!;
  const at = low + (span > 0 ? (goal - cumulative[low]!) / span : 0);
  return Math.sin((Math.PI / 2) * (at / steps));
}

/** Signal over noise: norm of the change over the norm of the noise. Null without a change. */
export function signalOverNoise(frame: Float64Array, reference: Float64Array, level: number, noiseScale: number): number | null {
  const change = new Float64Array(frame.length);
  for (let i = 0; i < change.length; i++) change[i] = frame[i]! - reference[i]!;
  const noise = level * noiseScale;
  return noise > 0 ? norm2(change) / noise : null;
}
