import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { norm2 } from '../core/vector';
import { goesByAction, operatorSystem, stoppedByAction, type ActionIteration, type OperatorSystem } from './operator-system';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { spectralSystem } from './spectral-system';
import { stoppedReconstructor, stoppingRules, type CoefficientIteration } from './stopped-iteration';

const specs = {
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'identity', choices: penaltyChoices, help: 'The inner product of the iteration: the size of the change, its gradient, or its Laplacian.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 200, minimum: 1, maximum: 20000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Golub-Kahan steps on S z = c; the part of the data outside the range is one more entry that S does not reach. */
function bidiagonalisation(s: Float64Array, c: Float64Array, outside: number): CoefficientIteration {
  const r = s.length;
  const z = new Float64Array(r);
  const u = new Float64Array(r + 1);
  const v = new Float64Array(r);
  for (let k = 0; k < r; k++) u[k] = c[k];
  u[r] = Math.sqrt(outside);
  let beta = normalise(u);
  for (let k = 0; k < r; k++) v[k] = s[k] * u[k];
  let alpha = normalise(v);
  const w = Float64Array.from(v);
  const first = alpha * beta;
  let phi = beta;
  let rho = alpha;
  return {
    z,
    advance() {
      if (alpha === 0) return false;
      for (let k = 0; k < r; k++) u[k] = s[k] * v[k] - alpha * u[k];
      u[r] *= -alpha;
      beta = normalise(u);
      for (let k = 0; k < r; k++) v[k] = s[k] * u[k] - beta * v[k];
      alpha = normalise(v);
      const whole = Math.sqrt(rho * rho + beta * beta);
      const cosine = rho / whole;
      const sine = beta / whole;
      const theta = sine * alpha;
      const step = (cosine * phi) / whole;
      for (let k = 0; k < r; k++) {
        z[k] += step * w[k];
        w[k] = v[k] - (theta / whole) * w[k];
      }
      rho = -cosine * alpha;
      phi *= sine;
      // phi alpha |cosine| is the norm of the gradient: at rounding level nothing is left to gain.
      return phi * alpha * Math.abs(cosine) > 1e-14 * first;
    },
  };
}

/** The same by the action of A on data y; the residual is that of the recursion. */
export function lsqrByAction(system: OperatorSystem, y: Float64Array): ActionIteration {
  const { dataSize: m, unknowns: n } = system;
  const z = new Float64Array(n);
  const u = Float64Array.from(y);
  const v = new Float64Array(n);
  const product = new Float64Array(m);
  const back = new Float64Array(n);
  const residual = Float64Array.from(y);
  // A w, so that the residual follows every step of z.
  const image = new Float64Array(m);
  let beta = normalise(u);
  system.applyAdjoint(u, v);
  let alpha = normalise(v);
  const w = Float64Array.from(v);
  const first = alpha * beta;
  let phi = beta;
  let rho = alpha;
  system.apply(v, product);
  image.set(product);
  return {
    z,
    residual,
    advance() {
      if (alpha === 0) return false;
      for (let i = 0; i < m; i++) u[i] = product[i] - alpha * u[i];
      beta = normalise(u);
      system.applyAdjoint(u, back);
      for (let j = 0; j < n; j++) v[j] = back[j] - beta * v[j];
      alpha = normalise(v);
      const whole = Math.sqrt(rho * rho + beta * beta);
      const cosine = rho / whole;
      const sine = beta / whole;
      const theta = sine * alpha;
      const step = (cosine * phi) / whole;
      system.apply(v, product);
      for (let j = 0; j < n; j++) {
        z[j] += step * w[j];
        w[j] = v[j] - (theta / whole) * w[j];
      }
      for (let i = 0; i < m; i++) {
        residual[i] -= step * image[i];
        image[i] = product[i] - (theta / whole) * image[i];
      }
      rho = -cosine * alpha;
      phi *= sine;
      return phi * alpha * Math.abs(cosine) > 1e-14 * first;
    },
  };
}

/** Scales to norm 1 in place and returns the norm; a zero vector stays. */
function normalise(a: Float64Array): number {
  const size = norm2(a);
  if (size > 0) for (let i = 0; i < a.length; i++) a[i] /= size;
  return size;
}

/** Golub-Kahan bidiagonalisation with the QR recursion of Paige and Saunders, regularised by stopping early. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'lsqr',
  name: 'LSQR with early stopping',
  class: 'iterative',
  summary: 'Least squares by bidiagonalisation of the linearised problem; the number of steps regularises. In exact arithmetic the iterates of CGLS, more steady in rounding.',
  formula: '\\hat x_k = x_b + V_k \\operatorname*{arg\\,min}_t \\|B_k t - \\beta_1 e_1\\|, \\quad J V_k = U_{k+1} B_k, \\; \\beta_1 u_1 = y - F(x_b)',
  sources: [
    { short: 'Paige and Saunders 1982', full: 'C. C. Paige, M. A. Saunders. ACM Transactions on Mathematical Software 8 (1982) 43-71.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: stoppingRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Steps', symbol: 'k', default: 8, minimum: 1, maximum: 20000, help: 'Number of steps.' }),
  prepare(problem, parameters, rule) {
    const { penalty, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (goesByAction(problem)) {
      const byAction = operatorSystem(problem, penalty);
      return stoppedByAction(byAction, setting, largestIteration, (y) => lsqrByAction(byAction, y));
    }
    const system = spectralSystem(problem, penalty);
    return stoppedReconstructor(system, setting, largestIteration, (frame) => bidiagonalisation(system.singularValues, frame.coefficients, frame.outside));
  },
};
export const lsqrMethod = defineMethod(method);
