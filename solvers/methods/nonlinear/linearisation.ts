/** What the nonlinear methods share: one linearisation in the space of the data, and the regularised step from it. */
import { denseMatrix } from '../../core/matrix-operator';
import type { ForwardProblem } from '../../core/types';
import { dot, norm2 } from '../../core/vector';
import { denseCholesky } from '../../linear-algebra/dense-cholesky';
import { matmulTransposed } from '../../linear-algebra/matrix-product';
import type { StandardFactor } from '../spectral-system';

/** Data-space form of one linearisation, P = R^T R the penalty matrix. */
export interface Linearised {
  readonly jacobian: Float64Array;
  /** B = J R^{-1}, dataSize x unknowns. */
  readonly standard: Float64Array;
  /** B B^T = J P^{-1} J^T, dataSize x dataSize, lower triangle. */
  readonly gram: Float64Array;
}

export function lineariseAt(problem: ForwardProblem, factor: StandardFactor, x: Float64Array): Linearised {
  const jacobian = denseMatrix(problem.linearise(x));
  const standard = Float64Array.from(jacobian);
  factor.halfSolveMany(standard, problem.dataSize, 'forward');
  return { jacobian, standard, gram: lowerGram(standard, problem.dataSize, problem.unknowns) };
}

/** Rows per block of the symmetric product. */
const gramBlock = 48;

/** Lower triangle of B B^T, by blocks of rows against all rows up to the block: half the work of the full product. */
function lowerGram(b: Float64Array, m: number, n: number): Float64Array {
  const gram = new Float64Array(m * m);
  for (let from = 0; from < m; from += gramBlock) {
    const to = Math.min(m, from + gramBlock);
    const block = matmulTransposed(b.subarray(from * n, to * n), b.subarray(0, to * n), to - from, n, to);
    for (let i = from; i < to; i++) for (let j = 0; j <= i; j++) gram[i * m + j] = block[(i - from) * to + j];
  }
  return gram;
}

/** Square root of the largest eigenvalue of a positive semidefinite matrix given by its lower triangle, by 60 power steps from a fixed start; a lower bound, close. */
export function largestSingularValue(gram: Float64Array, m: number): number {
  let v = new Float64Array(m);
  for (let i = 0; i < m; i++) v[i] = 1 + (i % 7) / 7 - (i % 3) / 3;
  let value = 0;
  for (let step = 0; step < 60; step++) {
    const size = norm2(v);
    if (size === 0) return 0;
    for (let i = 0; i < m; i++) v[i] /= size;
    const w = new Float64Array(m);
    for (let i = 0; i < m; i++) {
      for (let j = 0; j < i; j++) {
        w[i] += gram[i * m + j] * v[j];
        w[j] += gram[i * m + j] * v[i];
      }
      w[i] += gram[i * m + i] * v[i];
    }
    value = dot(v, w);
    v = w;
  }
  return Math.sqrt(Math.max(0, value));
}

/**
 * The minimiser of ||J h - w||^2 + weight^2 ||R h||^2, added to `centre`: h = P^{-1} J^T (J P^{-1} J^T + weight^2 I)^{-1} w. Values stay
 * above `lowerBound`.
 * @param w length m; overwritten
 * @param out length n
 */
export function regularisedStep(at: Linearised, factor: StandardFactor, w: Float64Array, weight: number, centre: Float64Array, lowerBound: number, out: Float64Array): void {
  const m = w.length;
  const n = out.length;
  const system = Float64Array.from(at.gram);
  for (let i = 0; i < m; i++) system[i * m + i] += weight * weight;
  denseCholesky(system, m).solveMany(w, 1);
  // h = P^{-1} J^T w = R^{-1} B^T w.
  out.fill(0);
  for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) out[j] += w[i] * at.standard[i * n + j];
  factor.halfSolveMany(out, 1, 'backward');
  for (let j = 0; j < n; j++) {
    out[j] += centre[j];
    if (out[j] < lowerBound) out[j] = lowerBound;
  }
}

/** residual + J (x - centre): the right-hand side of a step that is penalised about `centre`. */
export function shiftedResidual(at: Linearised, residual: Float64Array, x: Float64Array, centre: Float64Array): Float64Array {
  const m = residual.length;
  const n = x.length;
  const w = new Float64Array(m);
  for (let i = 0; i < m; i++) {
    let sum = residual[i];
    for (let j = 0; j < n; j++) sum += at.jacobian[i * n + j] * (x[j] - centre[j]);
    w[i] = sum;
  }
  return w;
}

export function distance(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += (a[i] - b[i]) * (a[i] - b[i]);
  return Math.sqrt(sum);
}

export interface DampedStep {
  readonly x: Float64Array;
  readonly model: Float64Array;
  readonly size: number;
  readonly forwardSolves: number;
}

/** Largest number of halvings of a step. */
const mostHalvings = 4;

/**
 * Moves from x towards `candidate`; a step that more than doubles the residual is halved, because the linearisation does not carry that far.
 * Null where four halvings do not help.
 */
export function dampedStep(problem: ForwardProblem, data: Float64Array, x: Float64Array, candidate: Float64Array, size: number): DampedStep | { readonly x: null; readonly forwardSolves: number } {
  const trial = Float64Array.from(candidate);
  let model = problem.evaluate(trial);
  let forwardSolves = 1;
  let trialSize = distance(data, model);
  for (let halving = 0; halving < mostHalvings && !(trialSize <= 2 * size); halving++) {
    for (let j = 0; j < trial.length; j++) trial[j] = 0.5 * (trial[j] + x[j]);
    model = problem.evaluate(trial);
    forwardSolves++;
    trialSize = distance(data, model);
  }
  return trialSize <= 2 * size ? { x: trial, model, size: trialSize, forwardSolves } : { x: null, forwardSolves };
}
