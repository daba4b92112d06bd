import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { norm2 } from '../core/vector';
import { blurField, simulateBlur } from '../problems/deblurring/simulation';
import { judge, type Check } from './check';
import { commonPractice, type PhantomCheckContext } from './phantom-check';

export const samplingConvergenceCheck: Check<PhantomCheckContext<DefinitionOf<'deblurring'>>> = {
  key: 'sampling-convergence',
  name: 'Samples of the field fine enough',
  unit: '',
  bound: 2e-3,
  comparison: 'at-most',
  formula: '\\lVert b^{2h} - b^{h} \\rVert \\,/\\, \\lVert b^{h} \\rVert',
  summary: 'What the blurred picture changes by when the field has half the samples a side. The error of the data themselves is about a quarter of that.',
  source: commonPractice,
  evaluate({ definition: { geometry }, truth, simulated }) {
    const coarse = simulateBlur(truth, geometry, blurField(geometry, 2));
    const gap = norm2(coarse.map((value, i) => value - simulated.clean[i])) / simulated.noiseScale;
    return judge(this, gap, 'Change of the blurred picture with half the samples a side, over its norm.');
  },
};
