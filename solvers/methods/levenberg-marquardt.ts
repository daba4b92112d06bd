import type { Method, Reconstruction, StopReason } from '../core/types';
import { norm2, requireVector } from '../core/vector';
import { denseCholesky } from '../linear-algebra/dense-cholesky';
import { dampedStep, largestSingularValue, lineariseAt, regularisedStep, type Linearised } from './nonlinear/linearisation';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { factorPenalty, penaltyChoices } from './penalty';
import { makeReconstructor } from './reconstructor';

const specs = {
  penalty: { kind: 'choice', label: 'Norm of a step', symbol: 'L', default: 'gradient', choices: penaltyChoices, help: 'What is kept small in each step: its size, its gradient, or its Laplacian.' },
  contraction: { kind: 'number', label: 'Linear residual', symbol: '\\rho', default: 0.7, minimum: 0.1, maximum: 0.99, scale: 'linear', help: 'Each step is damped so that its linearised residual is this share of the last one. Near 1 the steps are small and safe.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 20, minimum: 1, maximum: 100, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Halvings of ln mu between 1e-10 and 1e10 sigma_1: the weight is found to a share of 1e-4. */
const bisections = 20;

/** mu with ||mu^2 (B B^T + mu^2)^{-1} r|| = share ||r||; the norm grows with mu. Geometric bisection. */
function dampingFor(at: Linearised, residual: Float64Array, share: number, scale: number): number {
  const m = residual.length;
  const target = share * norm2(residual);
  let low = 1e-10 * scale;
  let high = 1e10 * scale;
  const w = new Float64Array(m);
  for (let step = 0; step < bisections; step++) {
    const mu = Math.sqrt(low * high);
    const system = Float64Array.from(at.gram);
    for (let i = 0; i < m; i++) system[i * m + i] += mu * mu;
    w.set(residual);
    denseCholesky(system, m).solveMany(w, 1);
    if (mu * mu * norm2(w) < target) low = mu;
    else high = mu;
  }
  return Math.sqrt(low * high);
}

/** Regularising Levenberg-Marquardt method. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'levenberg-marquardt',
  name: 'Levenberg-Marquardt',
  class: 'nonlinear',
  summary: 'Solves the nonlinear problem by damped steps from the last image, each so large that the linearised residual falls by a given share. Stopped at the discrepancy; the number of steps regularises.',
  formula: 'x_{k+1} = x_k + \\operatorname*{arg\\,min}_h\\; \\|F\'(x_k) h - r_k\\|^2 + \\mu_k^2 \\|L h\\|^2, \\quad \\|F\'(x_k) h_k - r_k\\| = \\rho \\|r_k\\|, \\quad r_k = y - F(x_k)',
  sources: [
    { short: 'Hanke 1997', full: 'M. Hanke: A regularizing Levenberg-Marquardt scheme, with applications to inverse groundwater filtration problems. Inverse Problems 13 (1997) 79-95.', fromMemory: true },
    { short: 'Marquardt 1963', full: 'D. W. Marquardt: An algorithm for least-squares estimation of nonlinear parameters. SIAM Journal on Applied Mathematics 11 (1963) 431-441.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: true, direct: false, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.1 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Steps', symbol: 'k', default: 6, minimum: 1, maximum: 100, help: 'Number of steps.' }),
  prepare(problem, parameters, rule) {
    const { penalty, contraction, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const { dataSize: m, unknowns: n, lowerBound } = problem;
    const factor = factorPenalty(problem, penalty);
    const background = problem.background();
    requireVector(background, n, 'The background');
    const firstModel = problem.evaluate(background);
    const first = lineariseAt(problem, factor, background);
    requireVector(first.jacobian, m * n, 'The derivative');
    const scale = largestSingularValue(first.gram, m);
    if (scale === 0) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');
    const limit = setting.key === 'fixed' ? setting.value : largestIteration;

    return makeReconstructor((data, noise, context): Reconstruction => {
      requireVector(data, m, 'The data frame');
      const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
      let x: Float64Array = Float64Array.from(background);
      const residual = new Float64Array(m);
      for (let i = 0; i < m; i++) residual[i] = data[i] - firstModel[i];
      let size = norm2(residual);
      if (size <= target || size === 0)
        return { x, parameter: 0, iterations: 0, forwardSolves: 0, stop: size === 0 ? 'converged' : 'discrepancy', residualNorm: size };
      let at = first;
      let forwardSolves = 0;
      let iterations = 0;
      let stop: StopReason = 'maxIterations';
      const candidate = new Float64Array(n);
      while (iterations < limit) {
        if (iterations > 0) {
          at = lineariseAt(problem, factor, x);
          forwardSolves++;
        }
        regularisedStep(at, factor, Float64Array.from(residual), dampingFor(at, residual, contraction, scale), x, lowerBound, candidate);
        iterations++;
        const moved = dampedStep(problem, data, x, candidate, size);
        forwardSolves += moved.forwardSolves;
        if (moved.x === null) {
          stop = 'diverged';
          break;
        }
        // Where nothing more is gained the data ask for something that the model cannot give.
        const stalled = moved.size > (1 - 1e-4) * size;
        if (moved.size >= size) {
          stop = 'converged';
          break;
        }
        x = moved.x;
        size = moved.size;
        for (let i = 0; i < m; i++) residual[i] = data[i] - moved.model[i];
        if (target > 0 && size <= target) {
          stop = 'discrepancy';
          break;
        }
        if (stalled) {
          stop = 'converged';
          break;
        }
        if (context?.aborted?.()) break;
      }
      return { x, parameter: iterations, iterations, forwardSolves, stop, residualNorm: size };
    });
  },
};
export const levenbergMarquardtMethod = defineMethod(method);
