import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { spectralSystem } from '../methods/spectral-system';
import { equationOf } from '../problems/integral-equation/equations';
import { judge, notApplicable, type Check } from './check';
import type { PhantomCheckContext } from './phantom-check';

/** Singular values looked at, at most; a mode needs some cells to be seen. */
const largestIndex = 8;
const cellsPerIndex = 20;

export const singularValueDecayCheck: Check<PhantomCheckContext<DefinitionOf<'integral-equation'>>> = {
  key: 'singular-value-decay',
  name: 'Singular values decay as they should',
  unit: '',
  // A box of width h sees the k-th sine weakened by (k pi h)^2 / 24: 1 % at twenty cells an index.
  bound: 0.02,
  comparison: 'at-most',
  formula: '\\max_{k \\le 8} \\left| (k\\pi)^2 \\sigma_k - 1 \\right|',
  summary: 'The singular values of the second derivative are 1 / (k pi)^2.',
  source: { short: 'Courant and Hilbert 1953', full: "R. Courant, D. Hilbert, Methods of Mathematical Physics, volume I, Interscience, 1953, chapter V (Green's function of the string and its eigenvalues).", fromMemory: true },
  evaluate({ definition: { geometry }, problem }) {
    if (geometry.equation !== 'second-derivative') return notApplicable(this, 'The singular values of this equation have no closed form.');
    const count = Math.min(largestIndex, Math.floor(Math.min(geometry.cells, geometry.points) / cellsPerIndex));
    if (count === 0) return notApplicable(this, `Fewer than ${cellsPerIndex} cells or points show no decay.`);
    const { dataFrom, dataTo } = equationOf(geometry);
    const { singularValues } = spectralSystem(problem, 'identity');
    const scale = Math.sqrt((dataTo - dataFrom) / geometry.points);
    let worst = 0;
    for (let k = 1; k <= count; k++) worst = Math.max(worst, Math.abs(k * Math.PI * (k * Math.PI) * scale * singularValues[k - 1] - 1));
    return judge(this, worst, `Largest relative error of the first ${count} singular values.`);
  },
};
