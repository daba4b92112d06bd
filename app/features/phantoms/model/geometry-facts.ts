import type { EitGeometry, MeasurementKey, PatternKey } from '../../../../shared/domain/geometry/electrical-impedance';
import { channels, patternCount, type PatternGeometry } from '../../../../solvers/problems/electrical-impedance/patterns';

export const patternNames: Record<PatternKey, string> = { adjacent: 'Adjacent pairs', skip: 'Pairs that skip electrodes', opposite: 'Opposite pairs', trigonometric: 'Trigonometric', listed: 'Listed currents' };
export const measurementNames: Record<MeasurementKey, string> = {
  'adjacent-undriven': 'Adjacent pairs, drive left out',
  'adjacent-all': 'All adjacent pairs',
  'electrode-voltages': 'All electrode voltages',
};

/** The current pattern in words: 'pairs 1–4, 2–5 and so on'. */
export function patternWords(g: Pick<EitGeometry, 'pattern' | 'skip' | 'electrodes' | 'currents'>): string {
  switch (g.pattern) {
    case 'adjacent':
      return 'adjacent pairs';
    case 'skip':
      return `pairs that skip ${g.skip ?? 1}`;
    case 'opposite':
      return 'opposite pairs';
    case 'trigonometric':
      return 'trigonometric';
    case 'listed':
      return `${g.currents?.length ?? 0} listed patterns`;
  }
}

export interface FrameFacts {
  readonly patterns: number;
  /** Values of the first pattern; the others have as many but for listed currents. */
  readonly valuesPerPattern: number;
  readonly values: number;
  /** Values that reciprocity and the zero sum leave independent; null where the pattern says nothing simple. */
  readonly independent: number | null;
}

/**
 * Sizes of one frame of L electrodes. With adjacent drive and no driven electrodes half of the values are independent; a full set of
 * adjacent or trigonometric patterns is a symmetric matrix with zero row sums, of L (L - 1) / 2 independent entries.
 */
export function frameFacts(geometry: PatternGeometry): FrameFacts {
  const { electrodes: L, pattern, measurement } = geometry;
  const all = channels(geometry);
  const full = pattern === 'adjacent' || pattern === 'trigonometric';
  const independent = measurement === 'adjacent-undriven' ? (pattern === 'adjacent' ? (L * (L - 3)) / 2 : null) : full ? (L * (L - 1)) / 2 : null;
  return { patterns: patternCount(geometry), valuesPerPattern: all.filter((c) => c.pattern === 0).length, values: all.length, independent };
}

/** Width of one electrode along the boundary, in the unit of the perimeter. */
export const electrodeWidth = (perimeter: number, electrodes: number, coverage: number): number => (perimeter * coverage) / electrodes;
