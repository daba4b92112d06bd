import type { PhantomVersion } from '../../entities/phantom.ts';

const patternNames = { adjacent: 'adjacent pairs', trigonometric: 'trigonometric patterns' } as const;

/** '16 electrodes, adjacent pairs, difference data'. */
export function phantomLine({ definition: { geometry, dataKind } }: Pick<PhantomVersion, 'definition'>): string {
  return `${geometry.electrodes} electrodes, ${patternNames[geometry.pattern]}, ${dataKind} data`;
}
