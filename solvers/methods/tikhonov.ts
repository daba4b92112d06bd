import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { getParameterRule } from '../parameter-choice/registry';
import { tikhonovResidual } from '../parameter-choice/spectral-data';
import { explicitLimit } from './explicit-limit';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { makeSpectralReconstructor } from './spectral-batch';
import { isZeroFrame, spectralSystem } from './spectral-system';

const specs = {
  penalty: { kind: 'choice', label: 'Penalty', symbol: 'L', default: 'gradient', choices: penaltyChoices, help: 'What is kept small: the size of the change, its gradient, or its Laplacian.' },
  smallestAlpha: {
    kind: 'number', label: 'Smallest alpha', symbol: '\\alpha_{\\min}/\\sigma_1', default: 1e-7, minimum: 1e-12, maximum: 1, scale: 'log',
    help: 'No rule goes below this share of the largest singular value. It guards against a model error that no alpha can fit.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** One linear step, penalised by ||L h||^2. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'tikhonov',
  name: 'Tikhonov regularisation',
  class: 'variational',
  summary: 'One linear step at the background, penalised by the size, the gradient or the Laplacian of the change. Direct: one factorisation, then one product for each frame.',
  formula: '\\hat x = x_b + \\operatorname*{arg\\,min}_h\\; \\|J h - (y - F(x_b))\\|^2 + \\alpha^2 \\|L h\\|^2',
  sources: [
    { short: 'Tikhonov 1963', full: 'A. N. Tikhonov: Solution of incorrectly formulated problems and the regularization method. Soviet Mathematics Doklady 4 (1963) 1035-1038.', fromMemory: true },
    { short: 'Elden 1977', full: 'L. Elden: Algorithms for the regularization of ill-conditioned least squares problems. BIT 17 (1977) 134-145 (standard form).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'gcv', 'l-curve', 'quasi-optimality', 'cumulative-periodogram', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Alpha', symbol: '\\alpha/\\sigma_1', default: 0.001, minimum: 1e-10, maximum: 10, scale: 'log', help: 'As a share of the largest singular value of the problem in standard form.' }),
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { penalty, smallestAlpha } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const chooser = getParameterRule(setting.key);
    const system = spectralSystem(problem, penalty);
    const s = system.singularValues;
    const floor = setting.key === 'fixed' ? 0 : smallestAlpha * s[0];
    return makeSpectralReconstructor(system, (frame, noise) => {
      const d = new Float64Array(system.rank);
      const chosen = isZeroFrame(frame) ? null : chooser.chooseAlpha(frame, noise, setting).alpha;
      let residual = frame.outside;
      let alpha: number | null = null;
      if (chosen === null) for (let k = 0; k < s.length; k++) residual += frame.coefficients[k] * frame.coefficients[k];
      else {
        alpha = Math.max(chosen, floor);
        for (let k = 0; k < s.length; k++) d[k] = (s[k] / (s[k] * s[k] + alpha * alpha)) * frame.coefficients[k];
        residual = tikhonovResidual(frame, alpha);
      }
      return {
        d, count: alpha === null ? 0 : s.length,
        report: { parameter: alpha === null ? null : alpha / s[0], iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: Math.sqrt(residual) },
      };
    });
  },
};
export const tikhonovMethod = defineMethod(method);
