import type { Method } from '../core/types';
import { newtonReconstructor } from './nonlinear/newton';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { factorPenalty, penaltyChoices } from './penalty';

const specs = {
  penalty: { kind: 'choice', label: 'Penalty', symbol: 'L', default: 'gradient', choices: penaltyChoices, help: 'What is kept small: the size of the change from the background, its gradient, or its Laplacian.' },
  firstAlpha: { kind: 'number', label: 'First alpha', symbol: '\\alpha_0/\\sigma_1', default: 0.3, minimum: 1e-6, maximum: 10, scale: 'log', help: 'Penalty weight of the first step, as a share of the largest singular value at the background.' },
  decay: { kind: 'number', label: 'Decay', symbol: 'q', default: 0.3, minimum: 0.05, maximum: 0.95, scale: 'linear', help: 'The weight is multiplied by this after every step.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 10, minimum: 1, maximum: 60, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

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
    const factor = factorPenalty(problem, penalty);
    return newtonReconstructor(problem, setting, { firstAlpha, decay, largestIteration, factorAt: () => factor });
  },
};

export const gaussNewtonMethod = defineMethod(method);
