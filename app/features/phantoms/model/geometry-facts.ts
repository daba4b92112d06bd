import type { MeasurementKey, PatternKey } from '../../../../shared/domain/geometry/electrical-impedance';

export const patternNames: Record<PatternKey, string> = { adjacent: 'Adjacent pairs', trigonometric: 'Trigonometric' };
export const measurementNames: Record<MeasurementKey, string> = {
  'adjacent-undriven': 'Adjacent pairs, drive left out',
  'adjacent-all': 'All adjacent pairs',
  'electrode-voltages': 'All electrode voltages',
};

export interface FrameFacts {
  readonly patterns: number;
  readonly valuesPerPattern: number;
  readonly values: number;
  /** Values that reciprocity and the zero sum leave independent. */
  readonly independent: number;
}

/**
 * Sizes of one frame of `electrodes` electrodes L. Adjacent drive has L patterns, trigonometric L - 1. Without the driven
 * electrodes L - 3 pairs remain and half are independent; a full set is a symmetric matrix with zero row sums, of L (L - 1) / 2
 * independent entries.
 */
export function frameFacts(electrodes: number, pattern: PatternKey, measurement: MeasurementKey): FrameFacts {
  const patterns = pattern === 'adjacent' ? electrodes : electrodes - 1;
  const valuesPerPattern = measurement === 'adjacent-undriven' ? electrodes - 3 : electrodes;
  const independent = measurement === 'adjacent-undriven' ? (electrodes * (electrodes - 3)) / 2 : (electrodes * (electrodes - 1)) / 2;
  return { patterns, valuesPerPattern, values: patterns * valuesPerPattern, independent };
}

/** Width of one electrode along the boundary, in the unit of the radius. */
export function electrodeWidth(radius: number, electrodes: number, coverage: number): number {
  return (2 * Math.PI * radius * coverage) / electrodes;
}

/** Centre angle of electrode `index` (from 0), radians counter-clockwise from the x axis. */
export function electrodeAngle(index: number, electrodes: number, firstDeg: number, numbering: 'clockwise' | 'counter-clockwise'): number {
  const turn = (numbering === 'clockwise' ? -1 : 1) * ((2 * Math.PI) / electrodes);
  return (firstDeg * Math.PI) / 180 + index * turn;
}
