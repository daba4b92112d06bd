/** The levels of a run on another axis than the noise: what is simulated at each, and what the inversion has of it. */
import type { AxisKey } from '../../../shared/domain/axes';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';
import type { ForwardProblem } from '../../core/types';
import { norm2 } from '../../core/vector';
import type { InversionProblem } from '../../problems/problem-family';
import { simulate } from '../../problems/registry';
import type { SimulatedPhantom } from '../trial';
import { derivedDefinition } from './derived-definition';
import { keptRows } from './kept-rows';
import { restrictedProblem } from './restricted-problem';

export interface AxisCase {
  /** Clean data of the level's own experiment, truth on the grid of the inversion, noise scale. */
  readonly simulated: SimulatedPhantom;
  /** Indices of the data that are left; null for all. */
  readonly rows: Int32Array | null;
}

/**
 * Simulates one level of an axis for the inversion of the definition. Deterministic: the same definition, axis and level give the same bits.
 * @param problem the model that inverts, of the definition itself
 * @throws RangeError where the axis does not serve the phantom or the level is not admissible
 */
export function axisCase(definition: PhantomDefinition, arrayValues: Float64Array | undefined, problem: InversionProblem, axis: AxisKey, level: number): AxisCase {
  const whole = simulate(derivedDefinition(definition, axis, level), arrayValues, problem);
  const { truthImage, backgroundImage, targets, frame } = whole;
  const rows = keptRows(definition, axis, level);
  if (!rows) return { simulated: { clean: whole.clean, noiseScale: whole.noiseScale, truthImage, backgroundImage, targets }, rows };
  const keep = (values: Float64Array): Float64Array => Float64Array.from(rows, (row) => values[row]);
  const clean = keep(whole.clean);
  // The noise keeps its level relative to the data that are left.
  const noiseScale = norm2(definition.noiseReference === 'voltages' ? keep(frame) : clean);
  return { simulated: { clean, noiseScale, truthImage, backgroundImage, targets }, rows };
}

/** The problem that a level leaves to the inversion. */
export function axisProblem(problem: ForwardProblem, rows: Int32Array | null): ForwardProblem {
  return rows ? restrictedProblem(problem, rows) : problem;
}
