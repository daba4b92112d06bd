import { familyKeys } from '../../shared/domain/families';
import type { Method, StopReason } from '../core/types';
import { sumOfSquares } from '../core/vector';
import { goesByAction, operatorSystem, stoppedByAction, type ActionIteration, type OperatorSystem } from './operator-system';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { makeSpectralReconstructor } from './spectral-batch';
import { spectralSystem } from './spectral-system';

const specs = {
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'identity', choices: penaltyChoices, help: 'The inner product of the iteration: the size of the change, its gradient, or its Laplacian.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 200, minimum: 1, maximum: 2000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

export interface CglsOutcome {
  /** Standard-form coefficients z, length r. */
  readonly z: Float64Array;
  readonly iterations: number;
  readonly stop: StopReason;
  /** Squared residual of the coefficients, `outside` included. */
  readonly residual: number;
}

/**
 * Conjugate gradients on S^2 z = S c, that is CGLS on A = U S V^T seen in the coordinates of the singular vectors: there the iterates
 * are the same and a step costs r operations instead of 2 m n.
 * @param target squared residual at which to stop; 0 for a fixed number of steps
 */
export function cglsInCoefficients(s: Float64Array, c: Float64Array, outside: number, target: number, limit: number, aborted?: () => boolean): CglsOutcome {
  const r = s.length;
  const z = new Float64Array(r);
  const rest = new Float64Array(r);
  const gradient = new Float64Array(r);
  const direction = new Float64Array(r);
  let residual = outside;
  let gamma = 0;
  for (let k = 0; k < r; k++) {
    rest[k] = c[k];
    residual += c[k] * c[k];
    gradient[k] = s[k] * c[k];
    direction[k] = gradient[k];
    gamma += gradient[k] * gradient[k];
  }
  const start = gamma;
  if (residual <= target && target > 0) return { z, iterations: 0, stop: 'discrepancy', residual };
  if (gamma === 0) return { z, iterations: 0, stop: 'converged', residual };
  for (let iteration = 1; iteration <= limit; iteration++) {
    let curvature = 0;
    for (let k = 0; k < r; k++) {
      const q = s[k] * direction[k];
      curvature += q * q;
    }
    const step = gamma / curvature;
    residual = outside;
    let nextGamma = 0;
    for (let k = 0; k < r; k++) {
      z[k] += step * direction[k];
      rest[k] -= step * (s[k] * direction[k]);
      residual += rest[k] * rest[k];
      gradient[k] = s[k] * rest[k];
      nextGamma += gradient[k] * gradient[k];
    }
    if (target > 0 && residual <= target) return { z, iterations: iteration, stop: 'discrepancy', residual };
    // The gradient is at rounding level: nothing is left to gain.
    if (nextGamma <= 1e-28 * start) return { z, iterations: iteration, stop: 'converged', residual };
    if (aborted?.()) return { z, iterations: iteration, stop: 'maxIterations', residual };
    const ratio = nextGamma / gamma;
    for (let k = 0; k < r; k++) direction[k] = gradient[k] + ratio * direction[k];
    gamma = nextGamma;
  }
  return { z, iterations: limit, stop: 'maxIterations', residual };
}

/** The same by the action of A on data y. */
export function cglsByAction(system: OperatorSystem, y: Float64Array): ActionIteration {
  const z = new Float64Array(system.unknowns);
  const residual = Float64Array.from(y);
  const product = new Float64Array(y.length);
  const gradient = new Float64Array(z.length);
  system.applyAdjoint(residual, gradient);
  const direction = Float64Array.from(gradient);
  let gamma = sumOfSquares(gradient);
  const start = gamma;
  return {
    z,
    residual,
    advance() {
      if (gamma === 0) return false;
      system.apply(direction, product);
      const step = gamma / sumOfSquares(product);
      for (let j = 0; j < z.length; j++) z[j] += step * direction[j];
      for (let i = 0; i < y.length; i++) residual[i] -= step * product[i];
      system.applyAdjoint(residual, gradient);
      const nextGamma = sumOfSquares(gradient);
      const ratio = nextGamma / gamma;
      for (let j = 0; j < z.length; j++) direction[j] = gradient[j] + ratio * direction[j];
      gamma = nextGamma;
      return nextGamma > 1e-28 * start;
    },
  };
}

/** Conjugate gradients for least squares, regularised by stopping early. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'cgls',
  name: 'CGLS with early stopping',
  class: 'iterative',
  summary: 'Conjugate gradients on the normal equations of the linearised problem; the number of steps regularises. Stops at the discrepancy or after a given number of steps.',
  formula: '\\hat x_k = x_b + \\operatorname*{arg\\,min}_{h \\in \\mathcal{K}_k}\\; \\|J h - (y - F(x_b))\\|, \\quad \\mathcal{K}_k = \\operatorname{span}\\{(J^* J)^j J^* (y - F(x_b))\\}_{j<k}',
  sources: [
    { short: 'Hestenes and Stiefel 1952', full: 'M. R. Hestenes, E. Stiefel: Methods of conjugate gradients for solving linear systems. Journal of Research of the NBS 49 (1952) 409-436.', fromMemory: true },
    { short: 'Hanke 1995', full: 'M. Hanke: Conjugate Gradient Type Methods for Ill-Posed Problems. Longman, 1995 (stopping by the discrepancy).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Steps', symbol: 'k', default: 8, minimum: 1, maximum: 1000, help: 'Number of steps.' }),
  prepare(problem, parameters, rule) {
    const { penalty, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (goesByAction(problem)) {
      const byAction = operatorSystem(problem, penalty);
      return stoppedByAction(byAction, setting, largestIteration, (y) => cglsByAction(byAction, y));
    }
    const system = spectralSystem(problem, penalty);
    return makeSpectralReconstructor(system, (frame, noise, _data, context) => {
      const bound = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
      const limit = setting.key === 'fixed' ? setting.value : largestIteration;
      const { z, iterations, stop, residual } = cglsInCoefficients(system.singularValues, frame.coefficients, frame.outside, bound * bound, limit, context?.aborted);
      return { d: z, count: system.rank, report: { parameter: iterations, iterations, forwardSolves: 0, stop, residualNorm: Math.sqrt(residual) } };
    });
  },
};
export const cglsMethod = defineMethod(method);
