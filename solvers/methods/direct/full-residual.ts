import type { ForwardProblem } from '../../core/types';

/**
 * Keeps the values above the problem's lower bound, in place.
 * @returns the Euclidean norm of data - model(x), the full model
 */
export function boundedResidual(problem: ForwardProblem, x: Float64Array, data: Float64Array): number {
  for (let j = 0; j < x.length; j++) if (!(x[j] >= problem.lowerBound)) x[j] = problem.lowerBound;
  const model = problem.evaluate(x);
  let square = 0;
  for (let i = 0; i < data.length; i++) square += (data[i] - model[i]) * (data[i] - model[i]);
  return Math.sqrt(square);
}
