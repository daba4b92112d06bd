import { pow } from '../core/math';
import type { ForwardProblem, Method } from '../core/types';
import { explicitLimit } from './explicit-limit';
import { filterReconstructor } from './filter-reconstructor';
import { iteratedTikhonovFilter } from './iterated-tikhonov';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { filterRules } from './spectral-filter';
import { spectralSystemOf, type SpectralSystem } from './spectral-system';

const specs = {
  exponent: { kind: 'number', label: 'Exponent', symbol: 'p', default: 1, minimum: 0, maximum: 1, scale: 'linear', help: 'Power of the diagonal. 1 is the published prior, 0.5 pulls less towards the middle, 0 weighs all cells the same.' },
  smallestAlpha: {
    kind: 'number', label: 'Smallest alpha', symbol: '\\alpha_{\\min}/\\sigma_1', default: 1e-7, minimum: 1e-12, maximum: 1, scale: 'log',
    help: 'No rule goes below this share of the largest singular value. It guards against a model error that no alpha can fit.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** A cell that no datum sees would have weight 0: no weight is below this share of the largest. */
const smallestWeight = 1e-12;

/** Standard form with the penalty diag(J^T J)^p. */
export function sensitivitySystem(problem: ForwardProblem, exponent: number): SpectralSystem {
  return spectralSystemOf(problem, `sensitivity ${exponent}`, (jacobian) => {
    const { dataSize: m, unknowns: n } = problem;
    const diagonal = new Float64Array(n);
    for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) diagonal[j] += jacobian[i * n + j] * jacobian[i * n + j];
    let largest = 0;
    for (let j = 0; j < n; j++) largest = Math.max(largest, diagonal[j]);
    if (largest === 0) return null;
    const root = new Float64Array(n);
    for (let j = 0; j < n; j++) root[j] = Math.sqrt(pow(Math.max(diagonal[j], smallestWeight * largest), exponent));
    return {
      halfSolveMany(b, count) {
        for (let i = 0; i < count; i++) for (let j = 0; j < n; j++) b[i * n + j] /= root[j];
      },
    };
  });
}

/** One step with a diagonal penalty made of the sensitivities. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'sensitivity-prior',
  name: 'One step with the sensitivity-weighted prior',
  class: 'spectral',
  summary: 'One linear step at the background whose penalty on each cell is the sensitivity of the data to it, so that cells near the electrodes do not take all of the change.',
  formula: '\\hat x = x_b + \\bigl(J^{\\mathsf T} J + \\alpha^2 \\operatorname{diag}(J^{\\mathsf T} J)^p\\bigr)^{-1} J^{\\mathsf T} (y - F(x_b))',
  sources: [{ short: 'Cheney et al. 1990', full: 'M. Cheney, D. Isaacson, J. C. Newell, S. Simske, J. Goble. International Journal of Imaging Systems and Technology 2 (1990) 66-75 (published with p = 1; other powers are common practice).', fromMemory: true }],
  parameters: schema,
  fields,
  // Not equations: where a causal kernel does not see the end of the interval the prior vanishes with the sensitivity, and nothing holds the image there.
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: ['electrical-impedance', 'x-ray', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: filterRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Alpha', symbol: '\\alpha/\\sigma_1', default: 0.01, minimum: 1e-10, maximum: 10, scale: 'log', help: 'As a share of the largest singular value of the problem in standard form.' }),
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { exponent, smallestAlpha } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    return filterReconstructor(sensitivitySystem(problem, exponent), iteratedTikhonovFilter(1), setting, smallestAlpha);
  },
};
export const sensitivityPriorMethod = defineMethod(method);
