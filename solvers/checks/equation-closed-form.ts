import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { equationOf } from '../problems/integral-equation/equations';
import { dataPoints } from '../problems/integral-equation/inversion-problem';
import { equationPanels, quadratureData } from '../problems/integral-equation/simulated-phantom';
import { largestGap } from '../verification/check';
import { judge, notApplicable, type Check } from './check';
import type { PhantomCheckContext } from './phantom-check';

export const equationClosedFormCheck: Check<PhantomCheckContext<DefinitionOf<'integral-equation'>>> = {
  key: 'equation-closed-form',
  name: 'Closed form of the right-hand side',
  unit: '',
  // The figures are rounding, but for narrow kernels of the heat equation, about 1e-9.
  bound: 1e-8,
  comparison: 'at-most',
  formula: '\\max_i |g^h(s_i) - g(s_i)| \\,/\\, \\max_i |g(s_i)|',
  summary: 'The quadrature of the simulation against the closed form of the data of the published solution.',
  source: { short: 'the source of the equation', full: 'The closed form printed with each equation on the reference page.' },
  evaluate({ definition: { geometry } }) {
    const equation = equationOf(geometry);
    if (!equation.data) return notApplicable(this, 'The right-hand side of this equation has no closed form.');
    const exact = dataPoints(equation, geometry.points).map(equation.data);
    const figure = largestGap(quadratureData(geometry, equationPanels(geometry, equation.solution)), exact);
    return judge(this, figure, 'Largest difference of the quadrature to the closed form for the published solution, over the largest value.');
  },
};
