import { denseMatrix } from '../core/matrix-operator';
import type { Method, Reconstruction, StopReason } from '../core/types';
import { norm2, requireVector } from '../core/vector';
import { denseCholesky } from '../linear-algebra/dense-cholesky';
import { matmul, matmulTransposed, transpose } from '../linear-algebra/matrix-product';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';
import { smoothnessFactor } from './smoothness-prior';
import { methodStream, noiseDeviation } from './statistical/prior';
import { unknownScale } from './unknown-scale';

const specs = {
  members: { kind: 'integer', label: 'Members', symbol: 'N', default: 80, minimum: 10, maximum: 1000, help: 'Size of the ensemble. The image stays in the span of its first draws.' },
  deviation: { kind: 'number', label: 'Prior deviation', symbol: 's/\\bar x_b', default: 0.5, minimum: 1e-3, maximum: 100, scale: 'log', help: 'Standard deviation of the first draws, as a share of the mean background (of 1 where the background is zero).' },
  correlationLength: { kind: 'number', label: 'Correlation length', symbol: '\\ell/R', unit: 'body radius', default: 0.3, minimum: 0.01, maximum: 5, scale: 'log', help: 'Over this distance the values of the first draws hang together, as a share of the body radius.' },
  model: {
    kind: 'choice', label: 'Model', default: 'linearised', choices: [{ value: 'linearised', label: 'Linearised at the background' }, { value: 'full', label: 'Full: one forward solve a member and step' }],
    help: 'The full model needs no derivative but a forward solve of every member at every step: slow.',
  },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 15, minimum: 1, maximum: 200, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** More data than this make the dense system of a step too slow. */
const largestData = 700;

/** Ensemble Kalman inversion. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'ensemble-kalman',
  name: 'Ensemble Kalman inversion',
  class: 'statistical',
  summary: 'Moves an ensemble of draws from a smoothness prior towards the data by their own covariances, without a derivative, until the mean fits the data within the noise. The image is the mean of the ensemble.',
  formula: 'x_j \\leftarrow x_j + C^{xw} \\bigl(C^{ww} + \\sigma^2 I\\bigr)^{-1} \\bigl(y + \\xi_j - F(x_j)\\bigr), \\quad \\xi_j \\sim N(0, \\sigma^2 I), \\; \\sigma = \\|e\\|/\\sqrt m',
  sources: [{ short: 'Iglesias, Law, Stuart 2013', full: 'M. A. Iglesias, K. J. H. Law, A. M. Stuart: Ensemble Kalman methods for inverse problems. Inverse Problems 29 (2013) 045001.', fromMemory: true }],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: true, families: ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.1 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Steps', symbol: 'k', default: 3, minimum: 1, maximum: 200, help: 'Number of steps.' }),
  unfit: ({ dataSize, unknowns }) => (dataSize > largestData || dataSize * unknowns > 8e6 ? `each step solves a dense system in the data; at most ${largestData} data and 8 million entries of the derivative, not ${dataSize} x ${unknowns}.` : null),
  prepare(problem, parameters, rule) {
    const { members: N, deviation, correlationLength, model, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const { dataSize: m, unknowns: n, lowerBound } = problem;
    const background = problem.background();
    const factor = smoothnessFactor(problem, deviation * unknownScale(problem), correlationLength * problem.grid.bodyRadius);
    const first = new Float64Array(N * n);
    methodStream('ensemble').fillNormal(first);
    factor.halfSolveMany(first, N, 'backward');
    const full = model === 'full' && !problem.linear;
    const jacobian = full ? null : denseMatrix(problem.linearise(background));
    const offset = problem.evaluate(background);
    /** Models of all members (changes from the background, N x n), N x m. */
    const models = (changes: Float64Array): Float64Array => {
      if (jacobian) {
        const out = matmulTransposed(changes, jacobian, N, n, m);
        for (let j = 0; j < N; j++) for (let i = 0; i < m; i++) out[j * m + i] += offset[i];
        return out;
      }
      const out = new Float64Array(N * m);
      for (let j = 0; j < N; j++) {
        const x = background.map((value, k) => Math.max(lowerBound, value + changes[j * n + k]));
        out.set(problem.evaluate(x), j * m);
      }
      return out;
    };
    const firstModels = models(first);

    return makeReconstructor((data, noise, context): Reconstruction => {
      requireVector(data, m, 'The data frame');
      const y = data.map((value, i) => value - offset[i]);
      const size = norm2(y);
      const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
      if (size === 0 || (target > 0 && size <= target))
        return { x: Float64Array.from(background), parameter: 0, iterations: 0, forwardSolves: 0, stop: target > 0 ? 'discrepancy' : 'converged', residualNorm: size };
      const sigma = noiseDeviation(noise.norm, size, m);
      const limit = setting.key === 'fixed' ? setting.value : largestIteration;
      const changes = Float64Array.from(first);
      let w = firstModels;
      const random = methodStream('perturbed data');
      const perturbed = new Float64Array(N * m);
      let residualNorm = size;
      let iterations = 0;
      let forwardSolves = 0;
      let stop: StopReason = 'maxIterations';
      while (iterations < limit) {
        const w0 = columnMeans(w, N, m);
        const x0 = columnMeans(changes, N, n);
        const dw = centred(w, w0, N, m);
        const dx = centred(changes, x0, N, n);
        // (C^ww + sigma^2 I) (N - 1) = dW^T dW + (N - 1) sigma^2 I.
        const dwT = transpose(dw, N, m);
        const system = matmulTransposed(dwT, dwT, m, N, m);
        for (let i = 0; i < m; i++) system[i * m + i] += (N - 1) * sigma * sigma;
        random.fillNormal(perturbed);
        for (let j = 0; j < N; j++) for (let i = 0; i < m; i++) perturbed[j * m + i] = data[i] + sigma * perturbed[j * m + i] - w[j * m + i];
        denseCholesky(system, m).solveMany(perturbed, N);
        // Row j: sum over members l of <dw_l, q_j> dx_l.
        const gains = matmulTransposed(perturbed, dw, N, m, N);
        const moves = matmul(gains, dx, N, N, n);
        for (let k = 0; k < changes.length; k++) changes[k] += moves[k];
        w = models(changes);
        if (full) forwardSolves += N;
        iterations++;
        const mean = columnMeans(w, N, m);
        let sum = 0;
        for (let i = 0; i < m; i++) sum += (data[i] - mean[i]) * (data[i] - mean[i]);
        residualNorm = Math.sqrt(sum);
        if (target > 0 && residualNorm <= target) {
          stop = 'discrepancy';
          break;
        }
        if (context?.aborted?.()) break;
      }
      const x = columnMeans(changes, N, n);
      for (let k = 0; k < n; k++) x[k] += background[k];
      const samples = Array.from({ length: N }, (_, j) => background.map((value, k) => value + changes[j * n + k]));
      return { x, parameter: iterations, iterations, forwardSolves, stop, residualNorm, samples };
    });
  },
};

function columnMeans(a: Float64Array, rows: number, cols: number): Float64Array {
  const mean = new Float64Array(cols);
  for (let i = 0; i < rows; i++) for (let j = 0; j < cols; j++) mean[j] += a[i * cols + j];
  for (let j = 0; j < cols; j++) mean[j] /= rows;
  return mean;
}

function centred(a: Float64Array, mean: Float64Array, rows: number, cols: number): Float64Array {
  const out = new Float64Array(a.length);
  for (let i = 0; i < rows; i++) for (let j = 0; j < cols; j++) out[i * cols + j] = a[i * cols + j] - mean[j];
  return out;
}

export const ensembleKalmanMethod = defineMethod(method);
