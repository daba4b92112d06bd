import type { DefinitionOf, PhantomDefinition } from '../../shared/domain/phantom-definition';
import type { Source } from '../core/types';
import type { DataLayout, InversionProblem, SimulatedData } from '../problems/problem-family';
import type { TruthField } from '../truth/truth-field';

/** A simulated phantom as the checks see it. */
export interface PhantomCheckContext<D extends PhantomDefinition = PhantomDefinition> {
  readonly definition: D;
  readonly truth: TruthField;
  /** Simulated data with the target and of the background, group after group. */
  readonly frame: Float64Array;
  readonly reference: Float64Array;
  readonly layout: DataLayout;
  readonly simulated: SimulatedData;
  /** The model that inverts. */
  readonly problem: InversionProblem;
}
export type ImpedanceCheckContext = PhantomCheckContext<DefinitionOf<'electrical-impedance'>>;

export const commonPractice: Source = { short: 'common practice, no source', full: 'Common practice, no source.' };
