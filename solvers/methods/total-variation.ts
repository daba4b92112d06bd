import { familyKeys } from '../../shared/domain/families';
import type { ForwardProblem, Method, Reconstructor, RuleSetting, StopReason } from '../core/types';
import { norm2, requireVector } from '../core/vector';
import { constraintChoices, lowestChange, type ConstraintKey } from './constraint';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { ballMultiplier, coordinatesIn, addExpansion } from './data-term';
import { goesByAction, largestSingularValue, operatorSystem } from './operator-system';
import { makeReconstructor } from './reconstructor';
import { frameSpectrum, isZeroFrame, spectralSystem, type SpectralSystem } from './spectral-system';
import { changeShare, primalDualByAction, type Jumps } from './total-variation-by-action';
import { unknownScale } from './unknown-scale';

const specs = {
  largestIteration: { kind: 'integer', label: 'Iterations', default: 250, minimum: 10, maximum: 5000, help: 'Primal-dual steps. The iteration ends earlier when the image no longer changes.' },
  constraint: { kind: 'choice', label: 'Constraint', default: 'none', choices: constraintChoices, help: 'What is known of the values in advance.' },
  smallestLambda: {
    kind: 'number', label: 'Smallest lambda', symbol: '\\lambda_{\\min}', default: 1e-10, minimum: 1e-14, maximum: 1, scale: 'log',
    help: 'The discrepancy principle does not go below this weight (same scale as a fixed lambda). It guards against a model error that no image can fit.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** Share of sigma_1 below which the data term does not act: those components are noise at every level of a ladder. */
const spectrumShare = 1e-5;

function readJumps(problem: ForwardProblem): Jumps {
  const { matrix, lengths } = problem.jumps();
  const plus = new Int32Array(matrix.rows);
  const minus = new Int32Array(matrix.rows);
  const degree = new Int32Array(problem.unknowns);
  for (let i = 0; i < matrix.rows; i++) {
    const k = matrix.rowStart[i];
    if (matrix.rowStart[i + 1] !== k + 2 || matrix.values[k] * matrix.values[k + 1] !== -1)
      throw new RangeError(`Row ${i} of the jump matrix does not hold one +1 and one -1.`);
    const first = matrix.values[k] > 0 ? k : k + 1;
    plus[i] = matrix.columns[first];
    minus[i] = matrix.columns[2 * k + 1 - first];
    degree[plus[i]]++;
    degree[minus[i]]++;
  }
  let largest = 0;
  for (let j = 0; j < degree.length; j++) largest = Math.max(largest, degree[j]);
  return { plus, minus, lengths, normSquare: 2 * Math.max(1, largest) };
}

interface Outcome {
  readonly h: Float64Array;
  /** Weight lambda of the penalised form that has the same minimiser; null where the data ask for nothing. */
  readonly lambda: number | null;
  readonly iterations: number;
  readonly stop: StopReason;
  readonly residual: number;
}

interface Task {
  readonly c: Float64Array;
  /** Squared norm of the data outside the components in use. */
  readonly outside: number;
  readonly used: number;
  /** Penalised form with this lambda, or the constraint ||J h - y||^2 <= bound with lambda at least `lambdaMin`. */
  readonly goal: { readonly lambda: number } | { readonly bound: number; readonly lambdaMin: number };
  readonly limit: number;
  readonly aborted?: () => boolean;
}

/**
 * Algorithm 1 of Chambolle and Pock 2011 with theta = 1 on min over h of TV(h) + data term, dual variable one value an interface. The
 * proximal step of the data term is exact through the SVD of J, so that only the jump operator, which is well conditioned, is split.
 * Cost: 2 r n multiply-adds a step.
 */
function primalDual(system: SpectralSystem, jumps: Jumps, task: Task): Outcome {
  const { unknowns: n, singularValues: s, basis } = system;
  const { plus, minus, lengths, normSquare } = jumps;
  const { c, used, goal, limit } = task;
  const d = new Float64Array(used);
  const a = new Float64Array(used);
  const h = new Float64Array(n);
  // A smooth start, and with it the size of the image: the ratio of the steps should match image and dual variable.
  for (let k = 0; k < used; k++) d[k] = (s[k] * c[k]) / (s[k] * s[k] + 1e-4 * s[0] * s[0]);
  addExpansion(basis, n, d, used, h);
  const ratio = (norm2(h) || 1) / (0.5 * norm2(lengths) || 1);
  const tau = ratio / Math.sqrt(normSquare);
  const sigma = 1 / (ratio * Math.sqrt(normSquare));
  const extrapolated = Float64Array.from(h);
  const next = new Float64Array(n);
  const p = new Float64Array(lengths.length);
  const muMax = 'lambda' in goal ? 0 : tau / goal.lambdaMin;
  let mu = 'lambda' in goal ? tau / goal.lambda : 0;
  let stop: StopReason = 'maxIterations';
  let iterations = 0;
  while (iterations < limit) {
    iterations++;
    next.set(h);
    for (let i = 0; i < p.length; i++) {
      const q = p[i] + sigma * (extrapolated[plus[i]] - extrapolated[minus[i]]);
      const bound = lengths[i];
      const clipped = q > bound ? bound : q < -bound ? -bound : q;
      p[i] = clipped;
      next[plus[i]] -= tau * clipped;
      next[minus[i]] += tau * clipped;
    }
    coordinatesIn(basis, n, next, used, a);
    for (let k = 0; k < used; k++) a[k] = c[k] - s[k] * a[k];
    if (!('lambda' in goal)) mu = Math.min(muMax, ballMultiplier(s, a, used, goal.bound - task.outside, mu));
    for (let k = 0; k < used; k++) d[k] = (mu * s[k] * a[k]) / (1 + mu * s[k] * s[k]);
    addExpansion(basis, n, d, used, next);
    let change = 0;
    let size = 0;
    for (let j = 0; j < n; j++) {
      const step = next[j] - h[j];
      change += step * step;
      size += next[j] * next[j];
      extrapolated[j] = next[j] + step;
      h[j] = next[j];
    }
    if (iterations >= 20 && change <= changeShare * changeShare * size) {
      stop = 'converged';
      break;
    }
    if (task.aborted?.()) break;
  }
  let residual = task.outside;
  for (let k = 0; k < used; k++) {
    const r = a[k] - s[k] * d[k];
    residual += r * r;
  }
  return { h, lambda: mu > 0 ? tau / mu : null, iterations, stop, residual };
}

/** The same minimiser by the action of the derivative. */
function reconstructorByAction(problem: ForwardProblem, options: { largestIteration: number; constraint: ConstraintKey; smallestLambda: number }, setting: RuleSetting): Reconstructor {
  const system = operatorSystem(problem, 'none');
  const { dataSize, offset, background } = system;
  const jumps = readJumps(problem);
  const unit = lambdaUnit(problem, largestSingularValue(operatorSystem(problem, 'identity')));
  const lowest = lowestChange(problem, options.constraint);
  return makeReconstructor((data, noise, context) => {
    requireVector(data, dataSize, 'The data frame');
    const y = data.map((value, i) => value - offset[i]);
    const whole = norm2(y);
    const radius = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
    if (whole === 0 || whole <= radius)
      return { x: Float64Array.from(background), parameter: null, iterations: 0, forwardSolves: 0, stop: radius > 0 ? 'discrepancy' : 'converged', residualNorm: whole };
    const goal = setting.key === 'fixed' ? { lambda: setting.value * unit } : { radius, lambdaMin: options.smallestLambda * unit };
    const { h, lambda, iterations, stop, residualNorm } = primalDualByAction(system, jumps, { y, goal, lowest, limit: options.largestIteration, aborted: context?.aborted });
    for (let j = 0; j < h.length; j++) h[j] += background[j];
    return { x: h, parameter: lambda === null ? null : lambda / unit, iterations, forwardSolves: 0, stop, residualNorm };
  });
}

/** Total variation of the change, on the linearised problem. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'total-variation',
  name: 'Total variation, linearised',
  class: 'variational',
  summary: 'Favours flat regions with sharp edges: penalises the jumps across cell interfaces, weighted by their length. Under the discrepancy principle the residual is a constraint of the same minimisation.',
  formula: '\\hat x = x_b + \\operatorname*{arg\\,min}_h\\; \\tfrac12\\|J h - (y - F(x_b))\\|^2 + \\lambda\\,\\mathrm{TV}(h), \\quad \\mathrm{TV}(h) = \\sum_i \\ell_i\\,|[h]_i|',
  sources: [
    { short: 'Rudin, Osher, Fatemi 1992', full: 'L. I. Rudin, S. Osher, E. Fatemi: Nonlinear total variation based noise removal algorithms. Physica D 60 (1992) 259-268.', fromMemory: true },
    { short: 'Chambolle and Pock 2011', full: 'A. Chambolle, T. Pock: A first-order primal-dual algorithm for convex problems with applications to imaging. Journal of Mathematical Imaging and Vision 40 (2011) 120-145.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', {
    kind: 'number', label: 'Lambda', symbol: '\\lambda', default: 1e-6, minimum: 1e-14, maximum: 100, scale: 'log',
    help: 'Weight of the total variation, as a share of the squared largest singular value (unknowns weighted by area) times the mean background times the body radius.',
  }),
  prepare(problem, parameters, rule) {
    const { largestIteration, constraint, smallestLambda } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (constraint !== 'none' || goesByAction(problem)) return reconstructorByAction(problem, { largestIteration, constraint, smallestLambda }, setting);
    const system = spectralSystem(problem, 'none');
    const jumps = readJumps(problem);
    const s = system.singularValues;
    let used = 0;
    while (used < s.length && s[used] >= spectrumShare * s[0]) used++;
    const unit = lambdaUnit(problem, spectralSystem(problem, 'identity').singularValues[0]);
    return makeReconstructor((data, noise, context) => {
      const frame = frameSpectrum(system, data);
      let outside = frame.outside;
      for (let k = used; k < s.length; k++) outside += frame.coefficients[k] * frame.coefficients[k];
      let whole = outside;
      for (let k = 0; k < used; k++) whole += frame.coefficients[k] * frame.coefficients[k];
      const bound = setting.key === 'discrepancy' ? (setting.safetyFactor * noise.norm) ** 2 : 0;
      if (isZeroFrame(frame) || whole <= bound)
        return { x: Float64Array.from(system.background), parameter: null, iterations: 0, forwardSolves: 0, stop: bound > 0 ? 'discrepancy' : 'converged', residualNorm: Math.sqrt(whole) };
      const goal = setting.key === 'fixed' ? { lambda: setting.value * unit } : { bound, lambdaMin: smallestLambda * unit };
      const { h, lambda, iterations, stop, residual } = primalDual(system, jumps, { c: frame.coefficients, outside, used, goal, limit: largestIteration, aborted: context?.aborted });
      for (let j = 0; j < h.length; j++) h[j] += system.background[j];
      return { x: h, parameter: lambda === null ? null : lambda / unit, iterations, forwardSolves: 0, stop, residualNorm: Math.sqrt(residual) };
    }, s);
  },
};

/** sigma_1^2 (area-weighted) x mean |background| x body radius: makes lambda a pure number, the same for every current and size. */
function lambdaUnit(problem: ForwardProblem, largest: number): number {
  return largest * largest * unknownScale(problem) * problem.grid.bodyRadius;
}

export const totalVariationMethod = defineMethod(method);
