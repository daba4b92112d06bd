import type { ForwardProblem, Reconstruction, Reconstructor, RuleSetting, StopReason } from '../../core/types';
import { norm2, requireVector } from '../../core/vector';
import { makeReconstructor } from '../reconstructor';
import type { StandardFactor } from '../spectral-system';
import { dampedStep, largestSingularValue, lineariseAt, regularisedStep, shiftedResidual } from './linearisation';

export interface NewtonOptions {
  /** Weight of the first step over the largest singular value at the background. */
  readonly firstAlpha: number;
  /** The weight is multiplied by this after every step. */
  readonly decay: number;
  readonly largestIteration: number;
  /** Factor of the penalty at a point: the same for a quadratic penalty, another one at every step for a lagged one. */
  factorAt(x: Float64Array): StandardFactor;
}

/**
 * Regularised Gauss-Newton iteration about the background with a weight that decays geometrically, stopped at the discrepancy, or at a fixed last
 * weight once the steps are small. The derivative is computed anew at every step.
 * @throws RangeError where the derivative at the background is zero
 */
export function newtonReconstructor(problem: ForwardProblem, setting: RuleSetting, options: NewtonOptions): Reconstructor {
  const { dataSize: m, unknowns: n, lowerBound } = problem;
  const { firstAlpha, decay, largestIteration, factorAt } = options;
  const background = problem.background();
  requireVector(background, n, 'The background');
  // Every draw starts here, so the first linearisation is paid for once.
  const firstModel = problem.evaluate(background);
  const firstFactor = factorAt(background);
  const first = lineariseAt(problem, firstFactor, background);
  requireVector(first.jacobian, m * n, 'The derivative');
  const scale = largestSingularValue(first.gram, m);
  if (scale === 0) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');

  return makeReconstructor((data, noise, context): Reconstruction => {
    requireVector(data, m, 'The data frame');
    const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
    const lastAlpha = setting.key === 'fixed' ? setting.value : 0;
    let x: Float64Array = Float64Array.from(background);
    const residual = new Float64Array(m);
    for (let i = 0; i < m; i++) residual[i] = data[i] - firstModel[i];
    let size = norm2(residual);
    if (size <= target || size === 0)
      return { x, parameter: null, iterations: 0, forwardSolves: 0, stop: size === 0 ? 'converged' : 'discrepancy', residualNorm: size };
    let best = { x, size, alpha: firstAlpha };
    let alpha = firstAlpha;
    let forwardSolves = 0;
    let stop: StopReason = 'maxIterations';
    let iterations = 0;
    let at = first;
    let factor = firstFactor;
    const candidate = new Float64Array(n);
    while (iterations < largestIteration) {
      alpha = Math.max(lastAlpha, iterations === 0 ? firstAlpha : alpha * decay);
      if (iterations > 0) {
        factor = factorAt(x);
        at = lineariseAt(problem, factor, x);
        forwardSolves++;
      }
      regularisedStep(at, factor, shiftedResidual(at, residual, x, background), alpha * scale, background, lowerBound, candidate);
      iterations++;
      const moved = dampedStep(problem, data, x, candidate, size);
      forwardSolves += moved.forwardSolves;
      if (moved.x === null) {
        stop = 'diverged';
        break;
      }
      const trial = moved.x;
      const { model, size: trialSize } = moved;
      let change = 0;
      let span = 0;
      for (let j = 0; j < n; j++) {
        change += (trial[j] - x[j]) * (trial[j] - x[j]);
        span += (trial[j] - background[j]) * (trial[j] - background[j]);
      }
      x = trial;
      size = trialSize;
      for (let i = 0; i < m; i++) residual[i] = data[i] - model[i];
      if (size < best.size || lastAlpha > 0) best = { x, size, alpha };
      if (target > 0 && size <= target) {
        stop = 'discrepancy';
        break;
      }
      if (lastAlpha > 0 && alpha <= lastAlpha && change <= 1e-6 * span) {
        stop = 'converged';
        break;
      }
      if (context?.aborted?.()) break;
    }
    return { x: best.x, parameter: best.alpha, iterations, forwardSolves, stop, residualNorm: best.size };
  });
}
