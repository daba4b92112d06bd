import { problemLine } from '../../../solvers/problems/registry';
import type { PhantomVersion } from '../../entities/phantom.ts';

/** '16 electrodes, adjacent pairs, difference data'. */
export function phantomLine({ definition }: Pick<PhantomVersion, 'definition'>): string {
  return problemLine(definition);
}
