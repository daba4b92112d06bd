/** Total variation as a sequence of quadratic forms (Vogel and Oman 1996): the weights are those of the last image. */
import type { ForwardProblem, SparseMatrix } from '../core/types';
import { analyse, factorise, type CholeskyFactor } from '../linear-algebra/sparse-cholesky';
import { gramLower } from './penalty';
import { unknownScale } from './unknown-scale';

/** Share of the mean weight added as a mass: jumps do not see a constant. */
const massShare = 1e-3;

/**
 * Factor of sum l_i [h]_i^2 / sqrt([h_0]_i^2 + beta^2) + a small mass, for a change h_0; the analysis is made once.
 * @param smoothing beta over the scale of the unknown
 */
export function laggedFactor(problem: ForwardProblem, smoothing: number): (change: Float64Array) => CholeskyFactor {
  const { matrix, lengths } = problem.jumps();
  const beta = smoothing * unknownScale(problem);
  const radius = problem.grid.bodyRadius;
  const weighted: SparseMatrix = { ...matrix, values: matrix.values.slice() };
  let analysis: ReturnType<typeof analyse> | null = null;
  return (change) => {
    for (let i = 0; i < matrix.rows; i++) {
      let jump = 0;
      for (let k = matrix.rowStart[i]; k < matrix.rowStart[i + 1]; k++) jump += matrix.values[k] * change[matrix.columns[k]];
      const weight = Math.sqrt((beta * lengths[i]) / Math.sqrt(jump * jump + beta * beta));
      for (let k = matrix.rowStart[i]; k < matrix.rowStart[i + 1]; k++) weighted.values[k] = weight * matrix.values[k];
    }
    const lower = gramLower(weighted, problem.unknownWeights, massShare / radius);
    analysis ??= analyse(lower);
    return factorise(analysis, lower.values);
  };
}
