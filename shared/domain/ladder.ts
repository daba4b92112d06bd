/** The default noise ladder: relative L2 levels as fractions (common practice for a log-spaced ladder, no source). */
export const defaultLadder: readonly number[] = [1e-4, 3e-4, 1e-3, 2e-3, 5e-3, 1e-2, 2e-2, 5e-2, 0.1, 0.3];
export const defaultDraws = 24;

/** Signal-to-noise ratio in dB of a relative noise level: 20 log10(1 / level). */
export function levelToDecibel(level: number): number {
  return -20 * Math.log10(level);
}
