import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { getParameterRule } from '../parameter-choice/registry';
import { truncationResiduals } from '../parameter-choice/spectral-data';
import { explicitLimit } from './explicit-limit';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { makeSpectralReconstructor } from './spectral-batch';
import { isZeroFrame, spectralSystem } from './spectral-system';

const specs = {
  largestIndex: { kind: 'integer', label: 'Largest index', symbol: 'k_{\\max}', default: 200, minimum: 1, maximum: 2000, help: 'No rule keeps more singular values than this, nor more than the numerical rank.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Keeps the k largest singular values and drops the rest. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'truncated-svd',
  name: 'Truncated SVD',
  class: 'spectral',
  summary: 'Keeps the k best determined components of the linearised problem, weighted by cell area, and drops the others.',
  formula: '\\hat x = x_b + \\sum_{i \\le k} \\frac{u_i^{\\mathsf T}(y - F(x_b))}{\\sigma_i}\\, v_i',
  sources: [{ short: 'Hansen 1987', full: 'P. C. Hansen: The truncated SVD as a method for regularization. BIT 27 (1987) 534-553.', fromMemory: true }],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'gcv', 'l-curve', 'quasi-optimality', 'cumulative-periodogram', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Index', symbol: 'k', default: 20, minimum: 1, maximum: 2000, help: 'Number of singular values kept.' }),
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { largestIndex } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const chooser = getParameterRule(setting.key);
    const system = spectralSystem(problem, 'identity');
    const s = system.singularValues;
    const limit = setting.key === 'fixed' ? system.rank : Math.min(largestIndex, system.rank);
    return makeSpectralReconstructor(system, (frame, noise) => {
      const index = isZeroFrame(frame) ? 0 : chooser.chooseIndex(frame, noise, setting, limit).index;
      const d = new Float64Array(index);
      for (let k = 0; k < index; k++) d[k] = frame.coefficients[k] / s[k];
      return {
        d, count: index,
        report: { parameter: index, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: Math.sqrt(truncationResiduals(frame, index)[index]) },
      };
    });
  },
};
export const truncatedSvdMethod = defineMethod(method);
