/** Accelerated proximal gradient method (FISTA, Beck and Teboulle 2009) on a linearised problem, with the weight found by continuation. */
import type { LinearOperator, StopReason } from '../../core/types';
import { norm2 } from '../../core/vector';

export interface ProximalProblem {
  /** From the variable of the method to the data. */
  readonly operator: LinearOperator;
  /** A bound of the squared norm of the operator. */
  readonly normSquare: number;
  /** Gradient of what is smooth besides the data term, weight times this added to `gradient`; absent where there is none. */
  addPenaltyGradient?(z: Float64Array, weight: number, gradient: Float64Array): void;
  /** Bound of the norm of that gradient's matrix, over the weight. */
  readonly penaltyNorm?: number;
  /** Proximal step in place: argmin over u of step * weight * R(u) + ||u - z||^2 / 2. */
  prox(z: Float64Array, stepTimesWeight: number): void;
}

export interface ProximalResult {
  readonly z: Float64Array;
  readonly weight: number;
  readonly iterations: number;
  readonly stop: StopReason;
  readonly residualNorm: number;
}

export interface ProximalGoal {
  /** Weight of the first stage; with `target` null also the only one. */
  readonly weight: number;
  /** Residual norm to be reached: the weight falls by `decay` from stage to stage until it is. */
  readonly target: number | null;
  readonly decay: number;
  readonly smallestWeight: number;
  /** Iterations of one stage, at most. */
  readonly limit: number;
}

/** A stage ends when a step changes z by less than this share of it. */
const changeShare = 2e-5;

/**
 * min over z of ||A z - y||^2 / 2 + weight (smooth penalty + R(z)), from z = 0, with the restart of O'Donoghue and Candes 2015 where the momentum
 * points uphill. Cost: two products with the operator an iteration.
 */
export function acceleratedGradient(problem: ProximalProblem, y: Float64Array, goal: ProximalGoal, aborted?: () => boolean): ProximalResult {
  const { operator, normSquare, penaltyNorm = 0 } = problem;
  const n = operator.cols;
  const m = operator.rows;
  const z = new Float64Array(n);
  const last = new Float64Array(n);
  const ahead = new Float64Array(n);
  const gradient = new Float64Array(n);
  const residual = new Float64Array(m);
  const residualOf = (at: Float64Array): number => {
    operator.apply(at, residual);
    for (let i = 0; i < m; i++) residual[i] -= y[i];
    return norm2(residual);
  };
  let size = norm2(y);
  let weight = goal.weight;
  let iterations = 0;
  if (size === 0 || (goal.target !== null && size <= goal.target))
    return { z, weight, iterations, stop: goal.target !== null && goal.target > 0 ? 'discrepancy' : 'converged', residualNorm: size };
  for (;;) {
    const step = 1 / (normSquare + weight * penaltyNorm);
    let t = 1;
    ahead.set(z);
    let converged = false;
    for (let k = 0; k < goal.limit && !converged; k++) {
      residualOf(ahead);
      operator.applyAdjoint(residual, gradient);
      problem.addPenaltyGradient?.(ahead, weight, gradient);
      last.set(z);
      for (let j = 0; j < n; j++) z[j] = ahead[j] - step * gradient[j];
      problem.prox(z, step * weight);
      iterations++;
      let uphill = 0;
      let change = 0;
      let whole = 0;
      for (let j = 0; j < n; j++) {
        const d = z[j] - last[j];
        uphill += (ahead[j] - z[j]) * d;
        change += d * d;
        whole += z[j] * z[j];
      }
      const next = uphill > 0 ? 1 : 0.5 * (1 + Math.sqrt(1 + 4 * t * t));
      const momentum = uphill > 0 ? 0 : (t - 1) / next;
      for (let j = 0; j < n; j++) ahead[j] = z[j] + momentum * (z[j] - last[j]);
      t = next;
      converged = change <= changeShare * changeShare * whole;
      if (aborted?.()) return { z, weight, iterations, stop: 'maxIterations', residualNorm: residualOf(z) };
    }
    size = residualOf(z);
    if (goal.target === null) return { z, weight, iterations, stop: converged ? 'converged' : 'maxIterations', residualNorm: size };
    if (size <= goal.target) return { z, weight, iterations, stop: 'discrepancy', residualNorm: size };
    if (weight <= goal.smallestWeight) return { z, weight, iterations, stop: 'converged', residualNorm: size };
    weight = Math.max(goal.smallestWeight, goal.decay * weight);
  }
}

/** A bound of ||A||^2, about 2 % above it, by 50 power steps from a fixed start. @throws RangeError for an operator of zeros */
export function operatorNormSquare(operator: LinearOperator): number {
  const v = new Float64Array(operator.cols);
  for (let j = 0; j < v.length; j++) v[j] = 1 + (j % 7) / 7 - (j % 3) / 3;
  const w = new Float64Array(operator.rows);
  let value = 0;
  for (let k = 0; k < 50; k++) {
    const size = norm2(v);
    if (size === 0) break;
    for (let j = 0; j < v.length; j++) v[j] /= size;
    operator.apply(v, w);
    operator.applyAdjoint(w, v);
    value = norm2(v);
  }
  if (!(value > 0)) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');
  return 1.02 * value;
}
