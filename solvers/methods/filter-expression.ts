import { familyKeys } from '../../shared/domain/families';
import { compileExpression, type CompiledExpression } from '../core/expression';
import type { Method } from '../core/types';
import { explicitLimit } from './explicit-limit';
import { filterReconstructor } from './filter-reconstructor';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { filterRules, type SpectralFilter } from './spectral-filter';
import { spectralSystem } from './spectral-system';

/** A filter may overshoot 1, but a value beyond this is a mistake of the formula. */
const largestFactor = 10;
const probes = [1, 0.5, 0.1, 0.01, 1e-4, 1e-6];

/**
 * phi(s, a) of a formula, both as shares of sigma_1.
 * @throws RangeError that says where the formula cannot be read, or has no admissible value
 */
export function expressionFilter(text: string, unit: number): SpectralFilter {
  const compiled = compileExpression(text, ['s', 'a']);
  const value = phi(compiled);
  return { filter: (s, alpha) => value(s / unit, alpha / unit), complement: (s, alpha) => 1 - value(s / unit, alpha / unit) };
}

function phi(compiled: CompiledExpression): (s: number, a: number) => number {
  const variables = new Float64Array(2);
  return (s, a) => {
    variables[0] = s;
    variables[1] = a;
    const value = compiled(variables);
    if (!(Math.abs(value) <= largestFactor)) throw new RangeError(`The filter is ${value} at s = ${s.toPrecision(3)}, a = ${a.toPrecision(3)}: it must lie between -${largestFactor} and ${largestFactor}.`);
    return value;
  };
}

/** What is wrong with a formula, null where nothing is: it is tried at 36 places. */
export function filterFault(text: string): string | null {
  try {
    const value = phi(compileExpression(text, ['s', 'a']));
    for (const s of probes) for (const a of probes) value(s, a);
    return null;
  } catch (cause) {
    return cause instanceof Error ? cause.message : String(cause);
  }
}

const specs = {
  filter: { kind: 'text', label: 'Filter', symbol: '\\varphi(s, a)', default: 's^2/(s^2+a^2)', check: filterFault, help: 'The share of each component that is kept, in s (singular value) and a (parameter), both over the largest singular value. Functions as in expressions of a truth.' },
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'gradient', choices: penaltyChoices, help: 'Which singular vectors: those of the size of the change, its gradient, or its Laplacian.' },
  smallestAlpha: {
    kind: 'number', label: 'Smallest alpha', symbol: '\\alpha_{\\min}/\\sigma_1', default: 1e-7, minimum: 1e-12, maximum: 1, scale: 'log',
    help: 'No rule goes below this share of the largest singular value. It guards against a model error that no alpha can fit.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** A filter of the spectrum as its developer writes it. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'filter-expression',
  name: 'Spectral filter from a formula',
  class: 'spectral',
  summary: 'Multiplies each component of the unregularised solution by a factor that you write as a formula of its singular value and the parameter.',
  formula: '\\hat x = x_b + \\sum_i \\varphi\\!\\left(\\tfrac{\\sigma_i}{\\sigma_1}, \\tfrac{\\alpha}{\\sigma_1}\\right) \\frac{u_i^{\\mathsf T}(y - F(x_b))}{\\sigma_i}\\, v_i',
  sources: [{ short: 'Engl, Hanke, Neubauer 1996', full: 'H. W. Engl, M. Hanke, A. Neubauer: Regularization of Inverse Problems. Kluwer, 1996 (section 4.1: what a filter must satisfy).', fromMemory: true }],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: filterRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Alpha', symbol: '\\alpha/\\sigma_1', default: 0.001, minimum: 1e-10, maximum: 10, scale: 'log', help: 'The a of the formula: a share of the largest singular value.' }),
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { filter, penalty, smallestAlpha } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const system = spectralSystem(problem, penalty);
    return filterReconstructor(system, expressionFilter(filter, system.singularValues[0]), setting, smallestAlpha);
  },
};
export const filterExpressionMethod = defineMethod(method);
