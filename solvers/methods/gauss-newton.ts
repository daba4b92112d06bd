import type { ForwardProblem, Method, Reconstruction, StopReason } from '../core/types';
import { denseMatrix } from '../core/matrix-operator';
import { dot, norm2, requireVector } from '../core/vector';
import { denseCholesky } from '../linear-algebra/dense-cholesky';
import { matmulTransposed } from '../linear-algebra/matrix-product';
import type { CholeskyFactor } from '../linear-algebra/sparse-cholesky';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { factorPenalty, penaltyChoices } from './penalty';
import { makeReconstructor } from './reconstructor';

const specs = {
  penalty: { kind: 'choice', label: 'Penalty', symbol: 'L', default: 'gradient', choices: penaltyChoices, help: 'What is kept small: the size of the change from the background, its gradient, or its Laplacian.' },
  firstAlpha: { kind: 'number', label: 'First alpha', symbol: '\\alpha_0/\\sigma_1', default: 0.3, minimum: 1e-6, maximum: 10, scale: 'log', help: 'Penalty weight of the first step, as a share of the largest singular value at the background.' },
  decay: { kind: 'number', label: 'Decay', symbol: 'q', default: 0.3, minimum: 0.05, maximum: 0.95, scale: 'linear', help: 'The weight is multiplied by this after every step.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 10, minimum: 1, maximum: 60, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Data-space form of one linearisation, P = R^T R the penalty matrix. */
interface Linearised {
  readonly jacobian: Float64Array;
  /** B = J R^{-1}, dataSize x unknowns. */
  readonly standard: Float64Array;
  /** B B^T = J P^{-1} J^T, dataSize x dataSize, lower triangle. */
  readonly gram: Float64Array;
}

function lineariseAt(problem: ForwardProblem, factor: CholeskyFactor, x: Float64Array): Linearised {
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
function largestSingularValue(gram: Float64Array, m: number): number {
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

/** Iteratively regularised Gauss-Newton. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'gauss-newton',
  name: 'Iteratively regularised Gauss-Newton',
  class: 'nonlinear',
  summary: 'Solves the nonlinear problem: linearises anew at every step, penalises the distance from the background with a weight that decays geometrically, and stops at the discrepancy. Values stay above a lower bound.',
  formula: 'x_{k+1} = x_b + \\operatorname*{arg\\,min}_h\\; \\|F\'(x_k)\\,(h - x_k + x_b) + F(x_k) - y\\|^2 + \\alpha_k^2\\|L h\\|^2, \\quad \\alpha_k = \\alpha_0 q^k',
  sources: [
    { short: 'Bakushinskii 1992', full: 'A. B. Bakushinskii: The problem of the convergence of the iteratively regularized Gauss-Newton method. Computational Mathematics and Mathematical Physics 32 (1992) 1353-1359.', fromMemory: true },
    { short: 'Morozov 1966', full: 'V. A. Morozov: On the solution of functional equations by the method of regularization. Soviet Mathematics Doklady 7 (1966) 414-417.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: true, direct: false, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.1 },
  fixedValue: defineField('value', { kind: 'number', label: 'Last alpha', symbol: '\\alpha/\\sigma_1', default: 1e-4, minimum: 1e-10, maximum: 10, scale: 'log', help: 'The weight decays to this share of the largest singular value and stays there.' }),
  prepare(problem, parameters, rule) {
    const { penalty, firstAlpha, decay, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const { dataSize: m, unknowns: n, lowerBound } = problem;
    const factor = factorPenalty(problem, penalty);
    const background = problem.background();
    requireVector(background, n, 'The background');
    // Every draw starts here, so the first linearisation is paid for once.
    const firstModel = problem.evaluate(background);
    const first = lineariseAt(problem, factor, background);
    requireVector(first.jacobian, m * n, 'The derivative');
    const scale = largestSingularValue(first.gram, m);
    if (scale === 0) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');

    /** One regularised step from x; `out` gets the new point, kept above the lower bound. */
    function step(at: Linearised, x: Float64Array, residual: Float64Array, alpha: number, out: Float64Array): void {
      const system = Float64Array.from(at.gram);
      for (let i = 0; i < m; i++) system[i * m + i] += alpha * alpha;
      const w = new Float64Array(m);
      for (let i = 0; i < m; i++) {
        let sum = residual[i];
        for (let j = 0; j < n; j++) sum += at.jacobian[i * n + j] * (x[j] - background[j]);
        w[i] = sum;
      }
      denseCholesky(system, m).solveMany(w, 1);
      // h = P^{-1} J^T w = R^{-1} B^T w.
      out.fill(0);
      for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) out[j] += w[i] * at.standard[i * n + j];
      factor.halfSolveMany(out, 1, 'backward');
      for (let j = 0; j < n; j++) {
        out[j] += background[j];
        if (out[j] < lowerBound) out[j] = lowerBound;
      }
    }

    return makeReconstructor((data, noise, context): Reconstruction => {
      requireVector(data, m, 'The data frame');
      const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
      const lastAlpha = setting.key === 'fixed' ? setting.value : 0;
      let x = Float64Array.from(background);
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
      const candidate = new Float64Array(n);
      while (iterations < largestIteration) {
        alpha = Math.max(lastAlpha, iterations === 0 ? firstAlpha : alpha * decay);
        if (iterations > 0) {
          at = lineariseAt(problem, factor, x);
          forwardSolves++;
        }
        step(at, x, residual, alpha * scale, candidate);
        iterations++;
        // A step that more than doubles the residual is halved: the linearisation does not carry that far.
        const trial = Float64Array.from(candidate);
        let model = problem.evaluate(trial);
        forwardSolves++;
        let trialSize = distance(data, model);
        for (let halving = 0; halving < 4 && !(trialSize <= 2 * size); halving++) {
          for (let j = 0; j < n; j++) trial[j] = 0.5 * (trial[j] + x[j]);
          model = problem.evaluate(trial);
          forwardSolves++;
          trialSize = distance(data, model);
        }
        if (!(trialSize <= 2 * size)) {
          stop = 'diverged';
          break;
        }
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
  },
};

function distance(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += (a[i] - b[i]) * (a[i] - b[i]);
  return Math.sqrt(sum);
}

export const gaussNewtonMethod = defineMethod(method);
