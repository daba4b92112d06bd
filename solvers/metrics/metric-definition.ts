import type { Metric, MetricInput, MetricValue, Source } from '../core/types';
import { gridGeometry } from './grid-geometry';
import { quarterAmplitude, type QuarterAmplitude } from './quarter-amplitude';

/** All that the metrics share, from one pass over the pixels. */
export interface ImageSummary {
  readonly input: MetricInput;
  /** Sums and largest value of |estimate - truth|. */
  readonly errorSum: number;
  readonly errorSquares: number;
  readonly errorLargest: number;
  /** Inside pixel where the largest error sits, the first of equals; -1 without pixels. */
  readonly errorPlace: number;
  /** The same of |truth - background|: what there was to find. */
  readonly signalSum: number;
  readonly signalSquares: number;
  readonly signalLargest: number;
  /** Sum, largest and smallest value of estimate - background (0 counts). */
  readonly changeSum: number;
  readonly changeHighest: number;
  readonly changeLowest: number;
  /** Computed when first asked for. */
  quarter(): QuarterAmplitude;
}

export interface MetricDefinition extends Metric {
  fromSummary(summary: ImageSummary): MetricValue;
}

/** @throws RangeError where the images have different lengths, or the estimate is not finite */
export function summarise(input: MetricInput): ImageSummary {
  const { truth, background, estimate, grid } = input;
  const count = grid.inside.length;
  for (const [name, image] of [['truth', truth], ['background', background], ['estimate', estimate]] as const)
    if (image.length !== count) throw new RangeError(`The ${name} has ${image.length} pixels, the body ${count}.`);
  let errorSum = 0;
  let errorSquares = 0;
  let errorLargest = -1;
  let errorPlace = -1;
  let signalSum = 0;
  let signalSquares = 0;
  let signalLargest = 0;
  let changeSum = 0;
  let changeHighest = 0;
  let changeLowest = 0;
  for (let k = 0; k < count; k++) {
    const t = truth[k];
    const value = estimate[k];
    const base = background[k];
    const error = Math.abs(value - t);
    const signal = Math.abs(t - base);
    const change = value - base;
    changeSum += change;
    if (change > changeHighest) changeHighest = change;
    if (change < changeLowest) changeLowest = change;
    errorSum += error;
    errorSquares += error * error;
    if (error > errorLargest) {
      errorLargest = error;
      errorPlace = k;
    }
    signalSum += signal;
    signalSquares += signal * signal;
    if (signal > signalLargest) signalLargest = signal;
  }
  if (!Number.isFinite(errorSquares + signalSquares)) throw new RangeError('An image has values that are not finite.');
  let quarter: QuarterAmplitude | undefined;
  return {
    input, errorSum, errorSquares, errorLargest: Math.max(0, errorLargest), errorPlace, signalSum, signalSquares, signalLargest,
    changeSum, changeHighest, changeLowest, quarter: () => (quarter ??= quarterAmplitude(input, changeHighest, changeLowest)),
  };
}

export const undefinedMetric = (reason: string): MetricValue => ({ value: null, reason });

/** Ratio to what there was to find. */
export function relativeTo(error: number, signal: number): MetricValue {
  return signal > 0 ? { value: error / signal } : undefinedMetric('The truth equals the background: there is nothing to find.');
}

/** Place of an inside pixel in metres. */
export function placeOf(summary: ImageSummary): readonly [number, number] {
  const { x, y } = gridGeometry(summary.input.grid);
  return [x[summary.errorPlace], y[summary.errorPlace]];
}

export function defineMetric(definition: Omit<MetricDefinition, 'evaluate'>): MetricDefinition {
  return { ...definition, evaluate: (input) => definition.fromSummary(summarise(input)) };
}

export const ownDefinition: Source = { short: 'Definition of this registry', full: 'The norm is the discrete form of the integral over the body; dividing by the distance of the truth to the background is the choice of this registry.' };
export const adler2009: Source = {
  short: 'Adler et al. 2009',
  full: 'A. Adler et al., figures of merit for linear image reconstruction, Physiological Measurement 30 (2009) S35-S55.',
  fromMemory: true,
};
export const noTarget = (summary: ImageSummary): MetricValue | null => (summary.input.targets.length === 0 ? undefinedMetric('The phantom declares no target.') : null);
