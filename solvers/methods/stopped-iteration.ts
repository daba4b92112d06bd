/** What iterations in the coordinates of the singular vectors share: when to stop, and what to report. */
import type { ForwardProblem, Method, ReconstructContext, Reconstructor, RuleSetting, StopReason } from '../core/types';
import { denseMatrix } from '../core/matrix-operator';
import type { SpectralData } from '../parameter-choice/spectral-data';
import { makeSpectralReconstructor } from './spectral-batch';
import type { SpectralSystem } from './spectral-system';

/** One iteration on S z = c, started at z = 0. */
export interface CoefficientIteration {
  /** Current z, length r; changed in place by `advance`. */
  readonly z: Float64Array;
  /** Does step number k = 1, 2, ...; false where nothing is left to gain. */
  advance(k: number): boolean;
}

/** Rules of a method whose parameter is the number of steps. */
export const stoppingRules: Method['capabilities']['rules'] = ['discrepancy', 'fixed'];

/** ||S z - c||^2 with the part outside the range. */
export function coefficientResidual({ singularValues: s, coefficients: c, outside }: SpectralData, z: Float64Array): number {
  let sum = outside;
  for (let k = 0; k < s.length; k++) {
    const r = c[k] - s[k] * z[k];
    sum += r * r;
  }
  return sum;
}

interface StoppedIteration {
  readonly iterations: number;
  readonly stop: StopReason;
  readonly residual: number;
}

/** Runs until the squared residual is at most `target` (0: a fixed number), nothing is left to gain, or `limit` steps are done. */
export function runStopped(frame: SpectralData, iteration: CoefficientIteration, target: number, limit: number, context?: ReconstructContext): StoppedIteration {
  let residual = coefficientResidual(frame, iteration.z);
  if (residual === 0) return { iterations: 0, stop: 'converged', residual };
  if (target > 0 && residual <= target) return { iterations: 0, stop: 'discrepancy', residual };
  for (let k = 1; k <= limit; k++) {
    const moved = iteration.advance(k);
    residual = coefficientResidual(frame, iteration.z);
    if (target > 0 && residual <= target) return { iterations: k, stop: 'discrepancy', residual };
    if (!moved) return { iterations: k, stop: 'converged', residual };
    if (context?.aborted?.()) return { iterations: k, stop: 'maxIterations', residual };
  }
  return { iterations: limit, stop: 'maxIterations', residual };
}

/** A linear iteration with early stopping as a reconstructor. */
export function stoppedReconstructor(
  system: SpectralSystem, setting: RuleSetting, largestIteration: number,
  begin: (frame: SpectralData, data: Float64Array) => CoefficientIteration,
): Reconstructor {
  const limit = setting.key === 'fixed' ? setting.value : largestIteration;
  return makeSpectralReconstructor(system, (frame, noise, data, context) => {
    const bound = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
    const iteration = begin(frame, data);
    const { iterations, stop, residual } = runStopped(frame, iteration, bound * bound, limit, context);
    return {
      d: iteration.z, count: iterations === 0 ? 0 : system.rank,
      report: { parameter: iterations, iterations, forwardSolves: 0, stop, residualNorm: Math.sqrt(residual) },
    };
  });
}

/** Refuses a derivative of the wrong shape. */
export function derivativeAtBackground(problem: ForwardProblem): Float64Array {
  const jacobian = problem.linearise(problem.background());
  if (jacobian.rows !== problem.dataSize || jacobian.cols !== problem.unknowns)
    throw new RangeError(`The derivative is ${jacobian.rows} x ${jacobian.cols}, the problem ${problem.dataSize} x ${problem.unknowns}.`);
  return denseMatrix(jacobian);
}
