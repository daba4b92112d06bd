import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { goesByAction, largestSingularValue, operatorSystem, stoppedByAction, type ActionIteration, type OperatorSystem } from './operator-system';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { spectralSystem } from './spectral-system';
import { stoppedReconstructor, stoppingRules } from './stopped-iteration';

const specs = {
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'identity', choices: penaltyChoices, help: 'The inner product of the iteration: the size of the change, its gradient, or its Laplacian.' },
  relaxation: { kind: 'number', label: 'Relaxation', symbol: '\\omega', default: 1, minimum: 0.01, maximum: 1.99, scale: 'linear', help: 'Step as a multiple of 1 over the square of the largest singular value. It converges below 2.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 5000, minimum: 1, maximum: 20000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** By the action of A on data y. */
export function landweberByAction(system: OperatorSystem, relaxation: number, y: Float64Array): ActionIteration {
  const sigma = largestSingularValue(system);
  const step = relaxation / (sigma * sigma);
  const z = new Float64Array(system.unknowns);
  const residual = Float64Array.from(y);
  const gradient = new Float64Array(z.length);
  const model = new Float64Array(y.length);
  return {
    z,
    residual,
    advance() {
      let moved = false;
      system.applyAdjoint(residual, gradient);
      for (let j = 0; j < z.length; j++) {
        const next = z[j] + step * gradient[j];
        if (next !== z[j]) moved = true;
        z[j] = next;
      }
      system.apply(z, model);
      for (let i = 0; i < y.length; i++) residual[i] = y[i] - model[i];
      return moved;
    },
  };
}

/** Richardson iteration on the normal equations, in the coordinates of the singular vectors or by the action of the derivative. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'landweber',
  name: 'Landweber iteration',
  class: 'iterative',
  summary: 'Steepest descent with a constant step on the linearised problem; the number of steps regularises. Slow and simple.',
  formula: 'h_{k} = h_{k-1} + \\frac{\\omega}{\\sigma_1^2}\\, J^* \\bigl(y - F(x_b) - J h_{k-1}\\bigr), \\quad h_0 = 0',
  sources: [
    { short: 'Landweber 1951', full: 'L. Landweber. American Journal of Mathematics 73 (1951) 615-624.', fromMemory: true },
    { short: 'Engl, Hanke, Neubauer 1996', full: 'H. W. Engl, M. Hanke, A. Neubauer: Regularization of Inverse Problems. Kluwer, 1996 (section 6.1).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: stoppingRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Steps', symbol: 'k', default: 500, minimum: 1, maximum: 20000, help: 'Number of steps.' }),
  prepare(problem, parameters, rule) {
    const { penalty, relaxation, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (goesByAction(problem)) {
      const byAction = operatorSystem(problem, penalty);
      return stoppedByAction(byAction, setting, largestIteration, (y) => landweberByAction(byAction, relaxation, y));
    }
    const system = spectralSystem(problem, penalty);
    const s = system.singularValues;
    const step = relaxation / (s[0] * s[0]);
    return stoppedReconstructor(system, setting, largestIteration, ({ coefficients: c }) => {
      const z = new Float64Array(s.length);
      return {
        z,
        advance() {
          let moved = false;
          for (let k = 0; k < s.length; k++) {
            const next = z[k] + step * s[k] * (c[k] - s[k] * z[k]);
            if (next !== z[k]) moved = true;
            z[k] = next;
          }
          return moved;
        },
      };
    });
  },
};
export const landweberMethod = defineMethod(method);
