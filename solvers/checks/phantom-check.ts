import type { PhantomDefinition } from '../../shared/domain/phantom-definition';
import type { Source } from '../core/types';
import type { TruthField } from '../truth/truth-field';

/** A simulated phantom as the checks see it. */
export interface PhantomCheckContext {
  readonly definition: PhantomDefinition;
  readonly truth: TruthField;
  /** Simulated voltages with the target and of the background, V, pattern-major. */
  readonly frame: Float64Array;
  readonly reference: Float64Array;
}

export const commonPractice: Source = { short: 'common practice, no source', full: 'Common practice, no source.' };
