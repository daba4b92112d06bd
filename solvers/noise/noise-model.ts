import type { FamilyKey } from '../../shared/domain/families';
import type { DrawKey } from '../core/random';
import type { Source } from '../core/types';

/** One noisy frame. */
export interface NoisyData {
  /** clean + e, the length of `clean`. */
  readonly data: Float64Array;
  /** Euclidean norm of e as drawn, in the unit of the data. */
  readonly noiseNorm: number;
}

/** How noise is added. One file in `solvers/noise`, one line in its registry. */
export interface NoiseModel {
  readonly key: string;
  readonly name: string;
  readonly summary: string;
  /** LaTeX. */
  readonly formula: string;
  readonly sources: readonly Source[];
  /** True where ||e|| equals level * noiseScale in every draw, not only on average. */
  readonly exact: boolean;
  /** True where the noise values are normal. */
  readonly normal: boolean;
  /** Families whose data have such noise. */
  readonly families: readonly FamilyKey[];
  /**
   * @param clean data without noise; not changed
   * @param level relative level, a fraction >= 0
   * @param noiseScale norm that the level is relative to (of the raw voltages or of the difference signal), > 0
   * @throws RangeError for a negative or non-finite level or scale, or data that are not finite
   */
  draw(clean: Float64Array, level: number, noiseScale: number, key: DrawKey): NoisyData;
}

/** Common refusals. */
export function requireNoiseInput(clean: Float64Array, level: number, noiseScale: number): void {
  if (!(level >= 0) || !Number.isFinite(level)) throw new RangeError(`A noise level must be a fraction from 0, not ${level}.`);
  if (!(noiseScale > 0) || !Number.isFinite(noiseScale))
    throw new RangeError(`The norm that the noise level refers to must be positive, not ${noiseScale}: there is no signal.`);
  for (let i = 0; i < clean.length; i++)
    if (!Number.isFinite(clean[i])) throw new RangeError(`Clean data are not finite at index ${i} (${clean[i]}).`);
}
