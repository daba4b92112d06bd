import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { equationPanels, quadratureData, simulationPanels } from '../problems/integral-equation/simulated-phantom';
import { euclideanGap } from '../verification/check';
import { judge, type Check } from './check';
import { commonPractice, type PhantomCheckContext } from './phantom-check';

export const quadratureConvergenceCheck: Check<PhantomCheckContext<DefinitionOf<'integral-equation'>>> = {
  key: 'quadrature-convergence',
  name: 'Quadrature converged',
  unit: '',
  // A hundredth of the lowest noise of the default ladder.
  bound: 1e-6,
  comparison: 'at-most',
  formula: '\\lVert g^{2h} - g^{h} \\rVert \\,/\\, \\lVert g^{h} \\rVert',
  summary: 'What the data of this ground truth change by when the panels of the quadrature are made half as wide.',
  source: commonPractice,
  evaluate({ definition: { geometry }, truth }) {
    const at = (t: number): number => truth.valueAt(t, 0);
    const panels = simulationPanels(geometry);
    const fine = quadratureData(geometry, equationPanels(geometry, at, 2 * panels));
    const coarse = quadratureData(geometry, equationPanels(geometry, at, panels));
    return judge(this, euclideanGap(coarse, fine), 'Change of the data when the panels are made half as wide, over their norm.');
  },
};
