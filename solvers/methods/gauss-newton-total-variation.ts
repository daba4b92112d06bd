import type { Method } from '../core/types';
import { laggedFactor } from './lagged-weights';
import { newtonReconstructor } from './nonlinear/newton';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';

const specs = {
  smoothing: { kind: 'number', label: 'Smoothing', symbol: '\\beta/\\bar x_b', default: 0.01, minimum: 1e-5, maximum: 1, scale: 'log', help: 'Jumps smaller than this are penalised by their square, as a share of the mean background (of 1 where the background is zero).' },
  firstAlpha: { kind: 'number', label: 'First alpha', symbol: '\\alpha_0/\\sigma_1', default: 0.3, minimum: 1e-6, maximum: 10, scale: 'log', help: 'Penalty weight of the first step, as a share of the largest singular value at the background.' },
  decay: { kind: 'number', label: 'Decay', symbol: 'q', default: 0.4, minimum: 0.05, maximum: 0.95, scale: 'linear', help: 'The weight is multiplied by this after every step.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 12, minimum: 1, maximum: 60, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Gauss-Newton whose penalty is a total variation with lagged weights. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'gauss-newton-total-variation',
  name: 'Gauss-Newton with total variation',
  class: 'nonlinear',
  summary: 'Solves the nonlinear problem with a penalty on jumps: at every step the model is linearised anew and the total variation replaced by a quadratic form with the weights of the last image.',
  formula: 'x_{k+1} = x_b + \\operatorname*{arg\\,min}_h\\; \\|F\'(x_k)(h - x_k + x_b) + F(x_k) - y\\|^2 + \\alpha_k^2 \\sum_i \\frac{\\ell_i\\, [h]_i^2}{\\sqrt{[x_k - x_b]_i^2 + \\beta^2}}',
  sources: [
    { short: 'Vogel and Oman 1996', full: 'C. R. Vogel, M. E. Oman: Iterative methods for total variation denoising. SIAM Journal on Scientific Computing 17 (1996) 227-238 (lagged weights).', fromMemory: true },
    { short: 'Bakushinskii 1992', full: 'A. B. Bakushinskii: The problem of the convergence of the iteratively regularized Gauss-Newton method. Computational Mathematics and Mathematical Physics 32 (1992) 1353-1359.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: true, direct: false, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.1 },
  fixedValue: defineField('value', { kind: 'number', label: 'Last alpha', symbol: '\\alpha/\\sigma_1', default: 1e-4, minimum: 1e-10, maximum: 10, scale: 'log', help: 'The weight decays to this share of the largest singular value and stays there.' }),
  prepare(problem, parameters, rule) {
    const { smoothing, firstAlpha, decay, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const factorOf = laggedFactor(problem, smoothing);
    const background = problem.background();
    return newtonReconstructor(problem, setting, {
      firstAlpha, decay, largestIteration,
      factorAt: (x) => factorOf(x.map((value, j) => value - background[j])),
    });
  },
};
export const gaussNewtonTotalVariationMethod = defineMethod(method);
