import type { DefinitionOf } from '../../../shared/domain/phantom-definition';
import { limits } from '../../../shared/domain/limits';
import { compileExpression } from '../../core/expression';
import { TruthError } from '../../truth/truth-error';
import type { TruthField } from '../../truth/truth-field';
import { equationOf } from './equations';

const path = ['truth', 'expression'] as const;

/**
 * The ground truth of an equation: its published solution, or an expression in x, its variable.
 * @throws TruthError where the expression uses more than the safe subset, or x alone
 */
export function lineTruth({ truth, geometry }: Pick<DefinitionOf<'integral-equation'>, 'truth' | 'geometry'>): TruthField {
  const common = { background: truth.background, interfaces: [], piecewiseConstant: false, targets: [] };
  if (truth.kind === 'standard') {
    const { solution } = equationOf(geometry);
    return { ...common, valueAt: solution };
  }
  const variables = new Float64Array(1);
  let evaluate: (variables: Float64Array) => number;
  try {
    evaluate = compileExpression(truth.expression, ['x']);
  } catch (cause) {
    throw new TruthError(cause instanceof Error ? cause.message : String(cause), path, { cause });
  }
  return {
    ...common,
    valueAt(x) {
      variables[0] = x;
      const value = evaluate(variables);
      if (!(Math.abs(value) <= limits.plainValueMax))
        throw new TruthError(`The expression gives ${value} at x = ${Number(x.toPrecision(6))}: a value must lie between ${-limits.plainValueMax} and ${limits.plainValueMax}.`, path);
      return value;
    },
  };
}
