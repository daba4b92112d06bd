import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { denseMatrix } from '../core/matrix-operator';
import { sumOfSquares } from '../core/vector';
import type { IntegralEquation } from '../problems/integral-equation/equation';
import { equationOf } from '../problems/integral-equation/equations';
import { fitPanels, integrate } from '../problems/integral-equation/quadrature';
import { judge, type Check } from './check';
import type { PhantomCheckContext } from './phantom-check';

const panels = 50;

/** Double integral of K(s, t)^2, which is the sum of the squared singular values of the equation. */
export function squaredKernelNorm(equation: IntegralEquation): number {
  const { from, to, dataFrom, dataTo } = equation;
  const inner = fitPanels(() => 1, from, to, panels);
  const outer = fitPanels(() => 1, dataFrom, dataTo, panels);
  return integrate(outer, (s) => integrate(inner, (t) => {
    const k = equation.kernel(s, t);
    return k * k;
  }, equation.breaks(s)), []);
}

export const kernelSizeCheck: Check<PhantomCheckContext<DefinitionOf<'integral-equation'>>> = {
  key: 'kernel-size',
  name: 'Singular values add up',
  unit: '',
  bound: 0.02,
  comparison: 'at-most',
  formula: '\\left| \\textstyle\\sum_k \\sigma_k^2 - \\iint K(s,t)^2 \\,\\mathrm{d}s\\,\\mathrm{d}t \\right| \\,/\\, \\iint K^2',
  summary: 'The squared singular values of the matrix that inverts, measured in integrals, sum up to the double integral of the squared kernel. Cells too wide for the kernel lose some of it.',
  source: { short: 'Schmidt 1907', full: 'E. Schmidt, Zur Theorie der linearen und nichtlinearen Integralgleichungen, Mathematische Annalen 63 (1907) 433-476 (singular values of a kernel).', fromMemory: true },
  evaluate({ definition: { geometry }, problem }) {
    const equation = equationOf(geometry);
    const step = (equation.dataTo - equation.dataFrom) / geometry.points;
    const sum = (sumOfSquares(denseMatrix(problem.linearise(problem.background()))) * step) / problem.unknownWeights[0];
    const exact = squaredKernelNorm(equation);
    const result = judge(this, Math.abs(sum - exact) / exact, 'Gap of the sum of squared singular values to the double integral of the squared kernel, over the latter.');
    return result.state === 'fail' ? { ...result, state: 'warning' } : result;
  },
};
