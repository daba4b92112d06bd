import { familyKeys } from '../../shared/domain/families';
import { exp, expm1 } from '../core/math';
import type { Method } from '../core/types';
import { explicitLimit } from './explicit-limit';
import { filterReconstructor } from './filter-reconstructor';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { filterRules, type SpectralFilter } from './spectral-filter';
import { spectralSystem } from './spectral-system';

const specs = {
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'gradient', choices: penaltyChoices, help: 'The inner product of the flow: the size of the change, its gradient, or its Laplacian.' },
  smallestAlpha: {
    kind: 'number', label: 'Smallest alpha', symbol: '\\alpha_{\\min}/\\sigma_1', default: 1e-7, minimum: 1e-12, maximum: 1, scale: 'log',
    help: 'No rule goes below this share of the largest singular value. It guards against a model error that no alpha can fit.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** phi = 1 - exp(-s^2 / alpha^2): the flow z' = A^T (y - A z) from 0, stopped at the time 1 / alpha^2. */
export const exponentialSpectralFilter: SpectralFilter = {
  complement: (s, alpha) => exp(-(s / alpha) * (s / alpha)),
  filter: (s, alpha) => -expm1(-(s / alpha) * (s / alpha)),
};

/** Showalter's method. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'exponential-filter',
  name: 'Exponential (Showalter) filter',
  class: 'spectral',
  summary: 'Follows the gradient flow of the data misfit from the background for the time 1/alpha^2, in closed form: steepest descent with infinitely small steps.',
  formula: '\\hat x = x_b + \\sum_i \\bigl(1 - e^{-\\sigma_i^2/\\alpha^2}\\bigr) \\frac{u_i^{\\mathsf T}(y - F(x_b))}{\\sigma_i}\\, v_i',
  sources: [
    { short: 'Showalter 1967', full: 'D. W. Showalter: Representation and computation of the pseudoinverse. Proceedings of the AMS 18 (1967) 584-586.', fromMemory: true },
    { short: 'Engl, Hanke, Neubauer 1996', full: 'H. W. Engl, M. Hanke, A. Neubauer: Regularization of Inverse Problems. Kluwer, 1996 (section 4.1).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: filterRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Alpha', symbol: '\\alpha/\\sigma_1', default: 0.003, minimum: 1e-10, maximum: 10, scale: 'log', help: 'As a share of the largest singular value of the problem in standard form.' }),
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { penalty, smallestAlpha } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    return filterReconstructor(spectralSystem(problem, penalty), exponentialSpectralFilter, setting, smallestAlpha);
  },
};
export const exponentialFilterMethod = defineMethod(method);
