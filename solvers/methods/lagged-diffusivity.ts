import type { Method, StopReason } from '../core/types';
import { denseMatrix } from '../core/matrix-operator';
import { norm2, requireVector } from '../core/vector';
import { denseCholesky } from '../linear-algebra/dense-cholesky';
import { matmulTransposed } from '../linear-algebra/matrix-product';
import { laggedFactor } from './lagged-weights';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';

const specs = {
  smoothing: { kind: 'number', label: 'Smoothing', symbol: '\\beta/\\bar x_b', default: 0.01, minimum: 1e-5, maximum: 1, scale: 'log', help: 'Jumps smaller than this are penalised by their square, as a share of the mean background (of 1 where the background is zero).' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 10, minimum: 1, maximum: 100, help: 'Steps of the fixed-point iteration. It ends earlier when the image no longer changes.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** More data than this make the dense system of a step too slow. */
const largestData = 700;
const changeShare = 1e-3;

/** Total variation by lagged diffusivity. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'lagged-diffusivity',
  name: 'Total variation, lagged diffusivity',
  class: 'variational',
  summary: 'Total variation with rounded corners on the linearised problem: each step solves a quadratic problem whose diffusivity is taken from the last image. Under the discrepancy principle each step finds its own weight.',
  formula: 'h_{k+1} = \\operatorname*{arg\\,min}_h\\; \\|J h - (y - F(x_b))\\|^2 + \\lambda \\sum_i \\frac{\\ell_i\\, [h]_i^2}{\\sqrt{[h_k]_i^2 + \\beta^2}}',
  sources: [{ short: 'Vogel and Oman 1996', full: 'C. R. Vogel, M. E. Oman: Iterative methods for total variation denoising. SIAM Journal on Scientific Computing 17 (1996) 227-238.', fromMemory: true }],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Lambda', symbol: '\\lambda', default: 1e-6, minimum: 1e-14, maximum: 100, scale: 'log', help: 'Weight of the penalty over the largest eigenvalue of the data term in the first step.' }),
  unfit: ({ dataSize }) => (dataSize > largestData ? `each step solves a dense system in the data, which is too slow for ${dataSize} of them (at most ${largestData}). Total variation by the primal-dual iteration serves it.` : null),
  prepare(problem, parameters, rule) {
    const { smoothing, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const { dataSize: m, unknowns: n } = problem;
    const background = problem.background();
    const jacobian = denseMatrix(problem.linearise(background));
    requireVector(jacobian, m * n, 'The derivative');
    const factorOf = laggedFactor(problem, smoothing);
    const offset = problem.dataKind === 'difference' ? new Float64Array(m) : problem.evaluate(background);
    /** J P^{-1} J^T for the weights of a change. */
    const stepAt = (change: Float64Array) => {
      const factor = factorOf(change);
      const standard = Float64Array.from(jacobian);
      factor.halfSolveMany(standard, m, 'forward');
      return { factor, standard, gram: matmulTransposed(standard, standard, m, n, m) };
    };
    const first = stepAt(new Float64Array(n));
    let trace = 0;
    for (let i = 0; i < m; i++) trace += first.gram[i * m + i];
    if (!(trace > 0)) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');
    const dual = (gram: Float64Array, y: Float64Array, lambda: number): Float64Array => {
      const system = Float64Array.from(gram);
      for (let i = 0; i < m; i++) system[i * m + i] += lambda;
      const w = Float64Array.from(y);
      denseCholesky(system, m).solveMany(w, 1);
      return w;
    };
    return makeReconstructor((data, noise, context) => {
      requireVector(data, m, 'The data frame');
      const y = data.map((value, i) => value - offset[i]);
      const size = norm2(y);
      const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
      if (size === 0 || size <= target)
        return { x: Float64Array.from(background), parameter: null, iterations: 0, forwardSolves: 0, stop: target > 0 ? 'discrepancy' : 'converged', residualNorm: size };
      let h: Float64Array = new Float64Array(n);
      let at = first;
      let lambda = setting.key === 'fixed' ? setting.value * trace : 1e-3 * trace;
      let w: Float64Array = new Float64Array(m);
      let stop: StopReason = 'maxIterations';
      let iterations = 0;
      while (iterations < largestIteration) {
        if (iterations > 0) at = stepAt(h);
        if (target > 0) {
          // The residual lambda w grows with lambda: bisection of its logarithm over twelve decades, ended at 1 %.
          let low = 1e-12 * trace;
          let high = 1e3 * trace;
          for (let k = 0; k < 40 && high > 1.01 * low; k++) {
            lambda = Math.sqrt(low * high);
            w = dual(at.gram, y, lambda);
            if (lambda * norm2(w) > target) high = lambda;
            else low = lambda;
          }
          lambda = low;
        }
        w = dual(at.gram, y, lambda);
        const next = new Float64Array(n);
        for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) next[j] += w[i] * at.standard[i * n + j];
        at.factor.halfSolveMany(next, 1, 'backward');
        iterations++;
        let change = 0;
        let whole = 0;
        for (let j = 0; j < n; j++) {
          change += (next[j] - h[j]) * (next[j] - h[j]);
          whole += next[j] * next[j];
        }
        h = next;
        if (change <= changeShare * changeShare * whole) {
          stop = 'converged';
          break;
        }
        if (context?.aborted?.()) break;
      }
      const x = h.map((value, j) => value + background[j]);
      return { x, parameter: lambda / trace, iterations, forwardSolves: 0, stop, residualNorm: lambda * norm2(w) };
    });
  },
};
export const laggedDiffusivityMethod = defineMethod(method);
