import { exp, ln } from '../core/math';

/** Place of a noise on the ladder. */
export interface LadderPlace {
  /** Nearest level in log distance: pairs and tests are of this level. */
  readonly nearest: number;
  /** Level below and share of the way to the next one; share 0 on a level or past the ends. */
  readonly below: number;
  readonly share: number;
  readonly interpolated: boolean;
}

export function placeOnLadder(ladder: readonly number[], noise: number): LadderPlace {
  if (ladder.length === 0) throw new RangeError('The ladder is empty.');
  if (!(noise > 0)) throw new RangeError(`A noise must be positive, not ${noise}.`);
  const last = ladder.length - 1;
  if (noise <= ladder[0] * (1 + 1e-9)) return { nearest: 0, below: 0, share: 0, interpolated: noise < ladder[0] * (1 - 1e-9) };
  if (noise >= ladder[last] * (1 - 1e-9)) return { nearest: last, below: last, share: 0, interpolated: noise > ladder[last] * (1 + 1e-9) };
  let below = 0;
  while (ladder[below + 1] <= noise * (1 + 1e-9)) below++;
  if (noise <= ladder[below] * (1 + 1e-9)) return { nearest: below, below, share: 0, interpolated: false };
  const share = (ln(noise) - ln(ladder[below])) / (ln(ladder[below + 1]) - ln(ladder[below]));
  return { nearest: share < 0.5 ? below : below + 1, below, share, interpolated: true };
}

/** Between two levels in log-log, or in log-linear where a value is not positive; null where either is. */
export function interpolateLevels(low: number | null, high: number | null, share: number): number | null {
  if (share === 0) return low;
  if (low === null || high === null) return null;
  if (low > 0 && high > 0) return exp(ln(low) + share * (ln(high) - ln(low)));
  return low + share * (high - low);
}
