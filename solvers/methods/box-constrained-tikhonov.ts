import { applySparse, applySparseTransposed } from '../core/sparse';
import type { Method } from '../core/types';
import { requireVector } from '../core/vector';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { acceleratedGradient, operatorNormSquare } from './proximal/accelerated-gradient';
import { makeReconstructor } from './reconstructor';

const specs = {
  penalty: { kind: 'choice', label: 'Penalty', symbol: 'L', default: 'identity', choices: penaltyChoices, help: 'What is kept small: the size of the change, its gradient, or its Laplacian.' },
  constraint: {
    kind: 'choice', label: 'Constraint', default: 'box',
    choices: [{ value: 'box', label: 'Between the two values' }, { value: 'rise', label: 'Never below the background' }, { value: 'fall', label: 'Never above the background' }],
    help: 'What is known of the values in advance.',
  },
  lowest: { kind: 'number', label: 'Lowest value', symbol: 'x_{\\min}', unit: 'of the unknown', default: 0, minimum: -1e6, maximum: 1e6, scale: 'linear', help: 'Used by the first constraint; 0 keeps the unknown from being negative.' },
  highest: { kind: 'number', label: 'Highest value', symbol: 'x_{\\max}', unit: 'of the unknown', default: 1000, minimum: -1e6, maximum: 1e6, scale: 'linear', help: 'Used by the first constraint.' },
  decay: { kind: 'number', label: 'Decay', symbol: 'q', default: 0.4, minimum: 0.1, maximum: 0.95, scale: 'linear', help: 'Under the discrepancy principle the weight is multiplied by this from stage to stage until the data are fitted.' },
  largestIteration: { kind: 'integer', label: 'Most iterations of a stage', default: 80, minimum: 5, maximum: 5000, help: 'Steps at one weight. A stage ends earlier when the image no longer changes.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Tikhonov regularisation with bounds on the unknown. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'box-constrained-tikhonov',
  name: 'Tikhonov with bounds',
  class: 'variational',
  summary: 'Tikhonov regularisation of the linearised problem among the images that keep given bounds, by accelerated projected gradient steps.',
  formula: '\\hat x = x_b + \\operatorname*{arg\\,min}_{x_{\\min} \\le x_b + h \\le x_{\\max}} \\|J h - (y - F(x_b))\\|^2 + \\alpha^2 \\|L h\\|^2',
  sources: [
    { short: 'Beck and Teboulle 2009', full: 'A. Beck, M. Teboulle: A fast iterative shrinkage-thresholding algorithm for linear inverse problems. SIAM Journal on Imaging Sciences 2 (2009) 183-202 (with the projection as the proximal step).', fromMemory: true },
    { short: 'Tikhonov 1963', full: 'A. N. Tikhonov: Solution of incorrectly formulated problems and the regularization method. Soviet Mathematics Doklady 4 (1963) 1035-1038.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Alpha squared', symbol: '\\alpha^2', default: 1e-4, minimum: 1e-12, maximum: 100, scale: 'log', help: 'Weight of the penalty over the ratio of the largest eigenvalues of the data term and the penalty.' }),
  prepare(problem, parameters, rule) {
    const { penalty, constraint, lowest, highest, decay, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (constraint === 'box' && !(lowest < highest)) throw new RangeError(`The lowest value, ${lowest}, must be below the highest, ${highest}.`);
    const background = problem.background();
    const n = problem.unknowns;
    const operator = problem.linearise(background);
    const normSquare = operatorNormSquare(operator);
    const l = problem.penalty(penalty);
    const penaltyNorm = operatorNormSquare({ rows: l.rows, cols: l.cols, apply: (x, out) => applySparse(l, x, out), applyAdjoint: (y, out) => applySparseTransposed(l, y, out) });
    const offset = problem.dataKind === 'difference' ? new Float64Array(problem.dataSize) : problem.evaluate(background);
    const low = new Float64Array(n);
    const high = new Float64Array(n);
    for (let j = 0; j < n; j++) {
      // Zero change is always allowed: a bound beyond the background ends at it.
      low[j] = constraint === 'rise' ? 0 : constraint === 'fall' ? -Infinity : Math.min(0, lowest - background[j]);
      high[j] = constraint === 'fall' ? 0 : constraint === 'rise' ? Infinity : Math.max(0, highest - background[j]);
    }
    const rows = new Float64Array(l.rows);
    const back = new Float64Array(n);
    const proximal = {
      operator, normSquare, penaltyNorm,
      addPenaltyGradient(z: Float64Array, weight: number, gradient: Float64Array): void {
        applySparse(l, z, rows);
        applySparseTransposed(l, rows, back);
        for (let j = 0; j < n; j++) gradient[j] += weight * back[j];
      },
      prox(z: Float64Array): void {
        for (let j = 0; j < n; j++) z[j] = z[j] < low[j] ? low[j] : z[j] > high[j] ? high[j] : z[j];
      },
    };
    const unit = normSquare / penaltyNorm;
    return makeReconstructor((data, noise, context) => {
      requireVector(data, problem.dataSize, 'The data frame');
      const y = data.map((value, i) => value - offset[i]);
      const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : null;
      const weight = setting.key === 'fixed' ? setting.value * unit : unit;
      const { z: x, weight: last, iterations, stop, residualNorm } = acceleratedGradient(proximal, y, { weight, target, decay, smallestWeight: 1e-7 * unit, limit: largestIteration }, context?.aborted);
      for (let j = 0; j < n; j++) x[j] += background[j];
      return { x, parameter: iterations > 0 ? last / unit : null, iterations, forwardSolves: 0, stop, residualNorm };
    });
  },
};
export const boxConstrainedTikhonovMethod = defineMethod(method);
