import type { ForwardProblem, NoiseInfo, RuleSetting } from '../../core/types';
import { matmul } from '../../linear-algebra/matrix-product';
import { bornImage, hermitianCoefficients } from './born-image';
import { electrodeData, type ElectrodeData } from './electrode-data';
import { exponentialMatrix, harmonicReader, linearExponentialMatrix, unitCentres, type Traces } from './harmonic-map';
import { ringPowers } from './ring-powers';

/** How the cutoff K of the transform is found. */
export type CutoffChoice = { readonly fixed: number } | { readonly safetyFactor: number; readonly largest: number };

/** A frame as matrices between exponentials, 2 x N x N. */
export interface ReadFrame {
  /** T with the traces asked for (`exponentialMatrix`). */
  readonly exponentials: Float64Array;
  /** T to first order in the data: what the noise is compared with. */
  readonly linear: Float64Array;
}

/** What the methods on the transform of the conductivity share, one a problem object. */
export interface TruncatedTransform {
  readonly data: ElectrodeData;
  readonly harmonics: number;
  /** Centres of the cells on the unit disc with electrode 1 at angle 0: x, y per cell. */
  readonly centres: Float64Array;
  /** Zero for the background's frame. */
  read(data: Float64Array, noise: NoiseInfo, traces: Traces): ReadFrame;
  /** First-order image with the transform cut at K: relative change of conductivity in each cell. */
  image(exponentials: Float64Array, cutoff: number): Float64Array;
  /** The cutoffs among which `choose` decides. */
  cutoffs(choice: CutoffChoice): readonly number[];
  /**
   * The cutoff of a choice. The discrepancy principle sees the transform F on |k| <= K_max, to first order in the data, each ring divided by its expected noise:
   * the smallest K for which the part that is cut, K < |k| < K_max, is within the safety factor times the expected norm of the noise
   * on all of it. K_max is `largest`, at most N + 1 for N harmonics.
   */
  choose(frame: ReadFrame, noise: NoiseInfo, choice: CutoffChoice): number;
}

/** Steps of the cutoff that the discrepancy principle looks at. */
const steps = 16;

/** The choice that a rule makes for a method whose parameter is the cutoff over `unit`. */
export function cutoffChoice(setting: RuleSetting, largest: number, unit: number): CutoffChoice {
  if (setting.key === 'fixed') return { fixed: setting.value * unit };
  if (setting.key === 'discrepancy') return { safetyFactor: setting.safetyFactor, largest: largest * unit };
  throw new RangeError(`The rule '${setting.key}' does not choose a cutoff.`);
}

const cache = new WeakMap<ForwardProblem, TruncatedTransform>();

/** @throws RangeError where the electrodes do not give the map */
export function truncatedTransform(problem: ForwardProblem): TruncatedTransform {
  let entry = cache.get(problem);
  if (!entry) cache.set(problem, (entry = compute(problem)));
  return entry;
}

function compute(problem: ForwardProblem): TruncatedTransform {
  const data = electrodeData(problem);
  const reader = harmonicReader(data);
  const N = reader.harmonics;
  const centres = unitCentres(data);
  const images = new Map<number, Float64Array>();
  const cutoffs = (choice: CutoffChoice): number[] => {
    if ('fixed' in choice) return [choice.fixed];
    const largest = Math.min(choice.largest, N + 1);
    return Array.from({ length: steps }, (_, i) => (largest * (i + 1)) / steps);
  };
  return {
    data,
    harmonics: N,
    centres,
    cutoffs,
    read(values, noise, traces) {
      const relative = reader.read(data.relativeMap(data.change(values), noise));
      return { exponentials: exponentialMatrix(relative, N, traces), linear: linearExponentialMatrix(relative, N) };
    },
    image(exponentials, cutoff) {
      let matrix = images.get(cutoff);
      if (!matrix) images.set(cutoff, (matrix = bornImage(centres, N, cutoff)));
      const coefficients = hermitianCoefficients(exponentials, N);
      return matmul(matrix, coefficients, problem.unknowns, coefficients.length, 1);
    },
    choose(frame, noise, choice) {
      const list = cutoffs(choice);
      if ('fixed' in choice) return list[0];
      const largest = list[list.length - 1];
      const allowed = choice.safetyFactor * choice.safetyFactor * noise.norm * noise.norm * largest * largest;
      const { signal, unitNoise } = ringPowers(frame.linear, reader.exponentialVariances, N, list);
      let cut = 0;
      for (let j = list.length - 1; j > 0; j--) {
        // Area of the ring over pi, times signal power over noise power.
        cut += ((list[j] * list[j] - list[j - 1] * list[j - 1]) * signal[j]) / unitNoise[j];
        if (cut > allowed) return list[j];
      }
      return list[0];
    },
  };
}
