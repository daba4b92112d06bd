import { atan2 } from '../core/math';
import { compileExpression, type CompiledExpression } from '../core/expression';
import { TruthError } from './truth-error';
import type { TruthField } from './truth-field';
import { conductivityRange, type ValueRange } from './value-range';

const names = ['x', 'y', 'r', 'theta'] as const;

/** Two figures more than a place in a body needs. */
const place = (metres: number): string => String(Number(metres.toPrecision(6)));

const path = ['truth', 'expression'] as const;

function compiled(expression: string): CompiledExpression {
  try {
    return compileExpression(expression, names);
  } catch (cause) {
    throw new TruthError(cause instanceof Error ? cause.message : String(cause), path, { cause });
  }
}

/**
 * Ground truth by an expression in x, y (m), r (distance from the origin, m) and theta (rad, -pi to pi); its value is that
 * of the unknown. It has no declared interfaces or targets: where it jumps, simulations integrate the jump by quadrature.
 * @throws TruthError when the expression uses more than the safe subset
 */
export function expressionField(expression: string, background: number, range: ValueRange = conductivityRange): TruthField {
  const evaluate = compiled(expression);
  const variables = new Float64Array(names.length);
  const polar = /\b(r|theta)\b/.test(expression);
  return {
    background,
    interfaces: [],
    piecewiseConstant: false,
    targets: [],
    valueAt(x, y) {
      variables[0] = x;
      variables[1] = y;
      if (polar) {
        variables[2] = Math.sqrt(x * x + y * y);
        variables[3] = atan2(y, x);
      }
      const value = evaluate(variables);
      if (!(value >= range.min && value <= range.max))
        throw new TruthError(
          `The expression gives ${value}${range.unit} at x = ${place(x)} m, y = ${place(y)} m: ${range.rule}.`,
          path,
        );
      return value;
    },
  };
}
