/**
 * A linearised problem in standard form by its action alone: A = J R^{-1}, h = R^{-1} z with L^T L (+ a small mass) = R^T R, where singular
 * vectors would cost too much. The same A as that of `spectralSystem`, so that iterations agree with those on its coefficients up to rounding.
 */
import type { Derivative, ForwardProblem, NoiseInfo, ReconstructContext, Reconstruction, Reconstructor, RuleSetting, StopReason } from '../core/types';
import { dot, norm2, requireVector, sumOfSquares } from '../core/vector';
import { thinSvd } from '../linear-algebra/thin-svd';
import { explicitLimit } from './explicit-limit';
import { factorPenalty } from './penalty';
import { makeReconstructor } from './reconstructor';
import type { StandardForm } from './spectral-system';

export interface OperatorSystem {
  readonly dataSize: number;
  readonly unknowns: number;
  readonly derivative: Derivative;
  /** out = A z; `out` has `dataSize` values. */
  apply(z: Float64Array, out: Float64Array): void;
  /** out = A^T y; `out` has `unknowns` values. */
  applyAdjoint(y: Float64Array, out: Float64Array): void;
  /** background + R^{-1} z, a fresh array. */
  expand(z: Float64Array): Float64Array;
  readonly background: Float64Array;
  /** Model of the background in the data kind; zero for difference data. */
  readonly offset: Float64Array;
}

/** Entries of the derivative from which iterations go by its action, where the problem does not hold it as an explicit matrix. */
const smallestSparse = 20_000;

/** Whether iterations on this problem use the action of the derivative rather than its singular vectors. */
export function goesByAction(problem: ForwardProblem): boolean {
  const { dataSize, unknowns } = problem;
  if (dataSize * unknowns < smallestSparse) return false;
  return explicitLimit(problem) !== null || problem.linearise(problem.background()).values === undefined;
}

const cache = new WeakMap<ForwardProblem, Map<StandardForm, OperatorSystem>>();

/** The system of a problem, made once a problem object and form. @throws RangeError where the derivative has another shape than the problem */
export function operatorSystem(problem: ForwardProblem, form: StandardForm): OperatorSystem {
  let forms = cache.get(problem);
  if (!forms) cache.set(problem, (forms = new Map()));
  let system = forms.get(form);
  if (!system) forms.set(form, (system = makeSystem(problem, form)));
  return system;
}

function makeSystem(problem: ForwardProblem, form: StandardForm): OperatorSystem {
  const { dataSize, unknowns } = problem;
  const background = problem.background();
  requireVector(background, unknowns, 'The background');
  const derivative = problem.linearise(background);
  if (derivative.rows !== dataSize || derivative.cols !== unknowns)
    throw new RangeError(`The derivative is ${derivative.rows} x ${derivative.cols}, the problem ${dataSize} x ${unknowns}.`);
  const offset = problem.dataKind === 'difference' ? new Float64Array(dataSize) : problem.evaluate(background);
  const add = (h: Float64Array): Float64Array => {
    for (let j = 0; j < unknowns; j++) h[j] += background[j];
    return h;
  };
  const common = { dataSize, unknowns, derivative, background, offset };
  if (form === 'none') return { ...common, apply: derivative.apply, applyAdjoint: derivative.applyAdjoint, expand: (z) => add(Float64Array.from(z)) };
  const factor = factorPenalty(problem, form);
  const change = new Float64Array(unknowns);
  return {
    ...common,
    apply(z, out) {
      change.set(z);
      factor.halfSolveMany(change, 1, 'backward');
      derivative.apply(change, out);
    },
    applyAdjoint(y, out) {
      derivative.applyAdjoint(y, out);
      factor.halfSolveMany(out, 1, 'forward');
    },
    expand(z) {
      const h = Float64Array.from(z);
      factor.halfSolveMany(h, 1, 'backward');
      return add(h);
    },
  };
}

/** Steps of the bidiagonalisation, at most, and how many pass between two looks at what it found. */
const mostSteps = 120;
const stepsBetween = 6;
const sigmas = new WeakMap<OperatorSystem, number>();

/**
 * Largest singular value, by Golub-Kahan bidiagonalisation (Golub and Kahan 1965) with reorthogonalised right vectors from a fixed start
 * until it no longer grows.
 * @throws RangeError where the derivative is zero or not finite
 */
export function largestSingularValue(system: OperatorSystem): number {
  let known = sigmas.get(system);
  if (known === undefined) sigmas.set(system, (known = bidiagonaliseOnce(system)));
  return known;
}

function bidiagonaliseOnce(system: OperatorSystem): number {
  const { dataSize: m, unknowns: n } = system;
  const limit = Math.min(mostSteps, m, n);
  // The data of a uniform change, which the largest singular vector of a projection or a blur is close to, with something of all others.
  let u = new Float64Array(m);
  system.apply(Float64Array.from({ length: n }, (_, j) => 1 + ((j % 7) - 3) / 50), u);
  if (!scale(u)) u = new Float64Array(m).fill(1 / Math.sqrt(m));
  const right: Float64Array[] = [];
  const v = new Float64Array(n);
  const alphas: number[] = [];
  const betas: number[] = [];
  const product = new Float64Array(m);
  let sigma = 0;
  while (right.length < limit) {
    system.applyAdjoint(u, v);
    for (let pass = 0; pass < 2; pass++)
      for (const earlier of right) {
        const share = dot(earlier, v);
        for (let j = 0; j < n; j++) v[j] -= share * earlier[j];
      }
    const alpha = norm2(v);
    if (!Number.isFinite(alpha)) throw new RangeError('The derivative at the background is not finite.');
    if (alpha <= 1e-15 * sigma || alpha === 0) break;
    right.push(v.map((value) => value / alpha));
    alphas.push(alpha);
    system.apply(right[right.length - 1], product);
    for (let i = 0; i < m; i++) u[i] = product[i] - alpha * u[i];
    const beta = norm2(u);
    betas.push(beta);
    if (beta > 0) for (let i = 0; i < m; i++) u[i] /= beta;
    if (right.length % stepsBetween === 0 || right.length === limit || beta === 0) {
      const now = bidiagonalNorm(alphas, betas);
      const settled = now - sigma <= 1e-15 * now;
      sigma = now;
      if (settled || beta === 0) break;
    }
  }
  if (alphas.length > 0) sigma = bidiagonalNorm(alphas, betas);
  if (sigma === 0) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');
  return sigma;
}

function scale(a: Float64Array): boolean {
  const size = norm2(a);
  if (!(size > 0 && size < Infinity)) return false;
  for (let i = 0; i < a.length; i++) a[i] /= size;
  return true;
}

/** Largest singular value of the lower bidiagonal matrix with these columns. */
function bidiagonalNorm(alphas: readonly number[], betas: readonly number[]): number {
  const k = alphas.length;
  const values = new Float64Array((k + 1) * k);
  for (let i = 0; i < k; i++) {
    values[i * k + i] = alphas[i];
    values[(i + 1) * k + i] = betas[i];
  }
  return thinSvd(values, k + 1, k).s[0];
}

/** One iteration by the action of A on data y, started at z = 0. */
export interface ActionIteration {
  /** Current z, in whatever form `expand` of the caller takes. */
  readonly z: Float64Array;
  /** Does step k = 1, 2, ... and leaves the residual y - A z in `residual`; false where nothing is left to gain. */
  advance(k: number): boolean;
  readonly residual: Float64Array;
}

/** A method with early stopping as a reconstructor; `begin` gets the data less the offset, which it may keep. */
export function stoppedByAction(
  system: Pick<OperatorSystem, 'dataSize' | 'offset' | 'expand' | 'background'>, setting: RuleSetting, largestIteration: number, begin: (y: Float64Array) => ActionIteration,
): Reconstructor {
  const { dataSize, offset, background } = system;
  const limit = setting.key === 'fixed' ? setting.value : largestIteration;
  return makeReconstructor((data: Float64Array, noise: NoiseInfo, context?: ReconstructContext): Reconstruction => {
    requireVector(data, dataSize, 'The data frame');
    const y = new Float64Array(dataSize);
    for (let i = 0; i < dataSize; i++) y[i] = data[i] - offset[i];
    const bound = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
    const target = bound * bound;
    let residual = sumOfSquares(y);
    let iterations = 0;
    let stop: StopReason = residual === 0 ? 'converged' : target > 0 && residual <= target ? 'discrepancy' : 'maxIterations';
    if (stop !== 'maxIterations') return { x: Float64Array.from(background), parameter: 0, iterations, forwardSolves: 0, stop, residualNorm: Math.sqrt(residual) };
    const iteration = begin(y);
    while (iterations < limit) {
      iterations++;
      const moved = iteration.advance(iterations);
      residual = sumOfSquares(iteration.residual);
      if (target > 0 && residual <= target) stop = 'discrepancy';
      else if (!moved || residual === 0) stop = 'converged';
      if (stop !== 'maxIterations' || context?.aborted?.()) break;
    }
    return { x: system.expand(iteration.z), parameter: iterations, iterations, forwardSolves: 0, stop, residualNorm: Math.sqrt(residual) };
  });
}
