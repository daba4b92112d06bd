import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { explicitLimit } from './explicit-limit';
import { filterReconstructor } from './filter-reconstructor';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { filterRules, type SpectralFilter } from './spectral-filter';
import { spectralSystem } from './spectral-system';

const specs = {
  penalty: { kind: 'choice', label: 'Penalty', symbol: 'L', default: 'gradient', choices: penaltyChoices, help: 'What is kept small in every pass: the size of the step, its gradient, or its Laplacian.' },
  passes: { kind: 'integer', label: 'Passes', symbol: 'n', default: 3, minimum: 1, maximum: 50, help: 'Each pass penalises the distance to the result of the last one. 1 is plain Tikhonov.' },
  smallestAlpha: {
    kind: 'number', label: 'Smallest alpha', symbol: '\\alpha_{\\min}/\\sigma_1', default: 1e-7, minimum: 1e-12, maximum: 1, scale: 'log',
    help: 'No rule goes below this share of the largest singular value. It guards against a model error that no alpha can fit.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** phi = 1 - (alpha^2 / (s^2 + alpha^2))^n. */
export function iteratedTikhonovFilter(passes: number): SpectralFilter {
  const power = (g: number, count: number): number => {
    let value = 1;
    for (let i = 0; i < count; i++) value *= g;
    return value;
  };
  return {
    complement: (s, alpha) => power((alpha * alpha) / (s * s + alpha * alpha), passes),
    filter(s, alpha) {
      // 1 - g^n = (1 - g) (1 + g + ... + g^(n-1)), all terms positive.
      const q = s * s + alpha * alpha;
      const g = (alpha * alpha) / q;
      let sum = 1;
      for (let i = 1; i < passes; i++) sum = 1 + g * sum;
      return ((s * s) / q) * sum;
    },
  };
}

/** Tikhonov's step, repeated from its own result. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'iterated-tikhonov',
  name: 'Iterated Tikhonov',
  class: 'spectral',
  summary: 'Tikhonov regularisation repeated a few times, each pass penalising the distance to the last result. Well determined components are damped less than by one pass.',
  formula: '\\hat x = x_b + \\sum_i \\Bigl(1 - \\Bigl(\\frac{\\alpha^2}{\\sigma_i^2 + \\alpha^2}\\Bigr)^{n}\\Bigr) \\frac{u_i^{\\mathsf T}(y - F(x_b))}{\\sigma_i}\\, v_i',
  sources: [
    { short: 'Krjanev 1974', full: 'A. V. Krjanev: An iterative method for solving incorrectly posed problems. USSR Computational Mathematics and Mathematical Physics 14 (1974) 24-35.', fromMemory: true },
    { short: 'King and Chillingworth 1979', full: 'J. T. King, D. Chillingworth: Approximation of generalized inverses by iterated regularization. Numerical Functional Analysis and Optimization 1 (1979) 499-513.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: filterRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Alpha', symbol: '\\alpha/\\sigma_1', default: 0.003, minimum: 1e-10, maximum: 10, scale: 'log', help: 'As a share of the largest singular value of the problem in standard form.' }),
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { penalty, passes, smallestAlpha } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    return filterReconstructor(spectralSystem(problem, penalty), iteratedTikhonovFilter(passes), setting, smallestAlpha);
  },
};
export const iteratedTikhonovMethod = defineMethod(method);
