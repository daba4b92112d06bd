import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { goesByAction, largestSingularValue, operatorSystem, stoppedByAction, type ActionIteration, type OperatorSystem } from './operator-system';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { spectralSystem } from './spectral-system';
import { stoppedReconstructor, stoppingRules } from './stopped-iteration';

const specs = {
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'identity', choices: penaltyChoices, help: 'The inner product of the iteration: the size of the change, its gradient, or its Laplacian.' },
  nu: { kind: 'number', label: 'Smoothness', symbol: '\\nu', default: 1, minimum: 0.25, maximum: 10, scale: 'linear', help: 'The order up to which a smooth solution gains. Larger values damp more at first.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 1000, minimum: 1, maximum: 20000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Factors of step k: of the last change, and of the gradient, with `scale` = 1 / sigma_1^2. At k = 1 the memory term vanishes, and omega is (4 nu + 2) / (4 nu + 1). */
function stepFactors(k: number, nu: number, scale: number): { memory: number; step: number } {
  const common = (k + 2 * nu - 1) * (2 * k + 4 * nu - 1);
  return {
    memory: k === 1 ? 0 : ((k - 1) * (2 * k - 3) * (2 * k + 2 * nu - 1)) / (common * (2 * k + 2 * nu - 3)),
    step: (scale * 4 * (2 * k + 2 * nu - 1) * (k + nu - 1)) / common,
  };
}

/** By the action of A on data y. */
export function nuMethodByAction(system: OperatorSystem, nu: number, y: Float64Array): ActionIteration {
  const sigma = largestSingularValue(system);
  const scale = 1 / (sigma * sigma);
  const z = new Float64Array(system.unknowns);
  const last = new Float64Array(z.length);
  const residual = Float64Array.from(y);
  const gradient = new Float64Array(z.length);
  const model = new Float64Array(y.length);
  return {
    z,
    residual,
    advance(k) {
      const { memory, step } = stepFactors(k, nu, scale);
      let moved = false;
      system.applyAdjoint(residual, gradient);
      for (let j = 0; j < z.length; j++) {
        const next = z[j] + memory * (z[j] - last[j]) + step * gradient[j];
        if (next !== z[j]) moved = true;
        last[j] = z[j];
        z[j] = next;
      }
      system.apply(z, model);
      for (let i = 0; i < y.length; i++) residual[i] = y[i] - model[i];
      return moved;
    },
  };
}

/** Semi-iterative method whose residual polynomials are Jacobi polynomials, in the coordinates of the singular vectors or by the action of the derivative. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'nu-method',
  name: 'Nu-method',
  class: 'iterative',
  summary: 'An accelerated Landweber iteration with two memory terms: about the square root of the number of steps for the same error, for solutions of limited smoothness.',
  formula: 'h_k = h_{k-1} + \\mu_k (h_{k-1} - h_{k-2}) + \\frac{\\omega_k}{\\sigma_1^2} J^* \\bigl(y - F(x_b) - J h_{k-1}\\bigr), \\; \\mu_k = \\tfrac{(k-1)(2k-3)(2k+2\\nu-1)}{(k+2\\nu-1)(2k+4\\nu-1)(2k+2\\nu-3)}, \\; \\omega_k = \\tfrac{4(2k+2\\nu-1)(k+\\nu-1)}{(k+2\\nu-1)(2k+4\\nu-1)}',
  sources: [
    { short: 'Brakhage 1987', full: 'H. Brakhage, in: H. W. Engl, C. W. Groetsch (eds.), Inverse and Ill-Posed Problems. Academic Press, 1987, 165-175.', fromMemory: true },
    { short: 'Hanke 1991', full: 'M. Hanke. Numerische Mathematik 60 (1991) 341-373.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: stoppingRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Steps', symbol: 'k', default: 40, minimum: 1, maximum: 20000, help: 'Number of steps.' }),
  prepare(problem, parameters, rule) {
    const { penalty, nu, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (goesByAction(problem)) {
      const byAction = operatorSystem(problem, penalty);
      return stoppedByAction(byAction, setting, largestIteration, (y) => nuMethodByAction(byAction, nu, y));
    }
    const system = spectralSystem(problem, penalty);
    const s = system.singularValues;
    const scale = 1 / (s[0] * s[0]);
    return stoppedReconstructor(system, setting, largestIteration, ({ coefficients: c }) => {
      const z = new Float64Array(s.length);
      const last = new Float64Array(s.length);
      return {
        z,
        advance(k) {
          const { memory, step } = stepFactors(k, nu, scale);
          let moved = false;
          for (let i = 0; i < s.length; i++) {
            const next = z[i] + memory * (z[i] - last[i]) + step * s[i] * (c[i] - s[i] * z[i]);
            if (next !== z[i]) moved = true;
            last[i] = z[i];
            z[i] = next;
          }
          return moved;
        },
      };
    });
  },
};
export const nuMethod = defineMethod(method);
