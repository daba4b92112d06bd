import { familyKeys } from '../../shared/domain/families';
import { applySparse } from '../core/sparse';
import type { ForwardProblem, Method, PenaltyKey, Reconstructor, RuleSetting } from '../core/types';
import { denseMatrix } from '../core/matrix-operator';
import { constraintChoices, lowestChange, raiseTo, type ConstraintKey } from './constraint';
import { largestMatrix } from './explicit-limit';
import { goesByAction, operatorSystem, stoppedByAction, type OperatorSystem } from './operator-system';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { factorPenalty, penaltyChoices } from './penalty';
import { denseRows, sparseRows } from './row-action';
import { spectralSystem } from './spectral-system';
import { stoppedReconstructor, stoppingRules } from './stopped-iteration';

const specs = {
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'identity', choices: penaltyChoices, help: 'The inner product of the iteration: the size of the change, its gradient, or its Laplacian.' },
  relaxation: { kind: 'number', label: 'Relaxation', symbol: '\\omega', default: 0.5, minimum: 0.01, maximum: 1.99, scale: 'linear', help: 'Share of the way to each hyperplane. Below 1 the noise of single data weighs less.' },
  constraint: { kind: 'choice', label: 'Constraint', default: 'none', choices: constraintChoices, help: 'What is known of the values: raised to 0 after every sweep where they are not to be negative. Goes with the first smoothing norm.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 300, minimum: 1, maximum: 20000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** A datum whose squared row is below this share of the largest depends on nothing and says nothing. */
const smallestRow = 1e-24;
/**
 * The same outside electrical impedance: a ray that only grazes the body, or a point that a causal kernel hardly reaches, carries its noise over
 * its small norm into a few cells.
 */
const grazingRow = 0.01;
const leastRow = (problem: ForwardProblem): number => (problem.family === 'electrical-impedance' ? smallestRow : grazingRow);

/** Sweeps over the rows of the derivative itself: sparse ones where the norm is that of the unknowns, else rows of J R^{-1}. */
function kaczmarzByRows(problem: ForwardProblem, options: { penalty: PenaltyKey; constraint: ConstraintKey; relaxation: number; largestIteration: number }, setting: RuleSetting): Reconstructor {
  const { penalty, constraint, relaxation, largestIteration } = options;
  const { dataSize: m, unknowns: n, unknownWeights } = problem;
  const plain = penalty === 'identity';
  if (constraint !== 'none' && !plain) throw new RangeError('Kaczmarz iteration keeps values from being negative in the norm of their size only: choose that smoothing norm.');
  if (!plain && m * n > largestMatrix) throw new RangeError(`Kaczmarz iteration in this smoothing norm needs an explicit matrix of ${m} x ${n}, at most ${largestMatrix / 1e6} million entries: choose the norm of the size.`);
  // Of the unknowns' own norm only the scaling of the columns is left, so that sparse rows stay sparse.
  const root = unknownWeights.map((w) => Math.sqrt(w));
  let base: Pick<OperatorSystem, 'dataSize' | 'offset' | 'expand' | 'background'> = operatorSystem(problem, plain ? 'none' : penalty);
  const derivative = operatorSystem(problem, 'none').derivative;
  let rows = sparseRows(derivative);
  if (plain) {
    rows = { ...rows, values: rows.values.map((value, k) => value / root[rows.columns[k]]) };
    const { background } = base;
    base = { ...base, expand: (z) => z.map((value, j) => background[j] + value / root[j]) };
  } else {
    const standard = Float64Array.from(denseMatrix(derivative));
    factorPenalty(problem, penalty).halfSolveMany(standard, m, 'forward');
    rows = denseRows(standard, m, n);
  }
  const { rowStart, columns, values } = rows;
  const squares = new Float64Array(m);
  let largest = 0;
  for (let i = 0; i < m; i++) {
    for (let k = rowStart[i]; k < rowStart[i + 1]; k++) squares[i] += values[k] * values[k];
    largest = Math.max(largest, squares[i]);
  }
  const least = leastRow(problem);
  const lowest = lowestChange(problem, constraint)?.map((value, j) => value * root[j]) ?? null;
  return stoppedByAction(base, setting, largestIteration, (y) => {
    const z = new Float64Array(n);
    const residual = Float64Array.from(y);
    const model = new Float64Array(m);
    return {
      z,
      residual,
      advance() {
        let moved = false;
        for (let i = 0; i < m; i++) {
          if (!(squares[i] > least * largest)) continue;
          let rest = y[i];
          for (let k = rowStart[i]; k < rowStart[i + 1]; k++) rest -= values[k] * z[columns[k]];
          const step = (relaxation * rest) / squares[i];
          if (step === 0) continue;
          moved = true;
          for (let k = rowStart[i]; k < rowStart[i + 1]; k++) z[columns[k]] += step * values[k];
        }
        raiseTo(z, lowest);
        applySparse(rows, z, model);
        for (let i = 0; i < m; i++) residual[i] = y[i] - model[i];
        return moved;
      },
    };
  });
}

/** Row action in a fixed order; a step of the count is one sweep over all data. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'kaczmarz',
  name: 'Kaczmarz iteration',
  class: 'iterative',
  summary: 'Projects onto one equation of the linearised problem after the other, in the order of the data, sweep after sweep; the number of sweeps regularises.',
  formula: 'h \\leftarrow h + \\omega\\, \\frac{y_i - F_i(x_b) - \\langle a_i, h\\rangle}{\\|a_i\\|^2}\\, a_i, \\quad i = 1, \\dots, m, \\quad a_i = J^{\\mathsf T} e_i',
  sources: [
    { short: 'Kaczmarz 1937', full: 'S. Kaczmarz. Bulletin International de l\'Academie Polonaise des Sciences et des Lettres A 35 (1937) 355-357.', fromMemory: true },
    { short: 'Gordon, Bender, Herman 1970', full: 'R. Gordon, R. Bender, G. T. Herman. Journal of Theoretical Biology 29 (1970) 471-481.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: stoppingRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Sweeps', symbol: 'k', default: 20, minimum: 1, maximum: 20000, help: 'Number of sweeps over all data.' }),
  unfit: ({ family, dataSize, unknowns }) =>
    family === 'x-ray' || dataSize * unknowns <= largestMatrix ? null : `it needs the rows of a ${dataSize} x ${unknowns} matrix one by one (at most ${largestMatrix / 1e6} million entries). SIRT does not.`,
  prepare(problem, parameters, rule) {
    const { penalty, constraint, relaxation, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (constraint !== 'none' || goesByAction(problem)) return kaczmarzByRows(problem, { penalty, constraint, relaxation, largestIteration }, setting);
    const system = spectralSystem(problem, penalty);
    const { rank, dataSize: m, left, leftColumns, singularValues: s, offset } = system;
    const least = leastRow(problem);
    // Rows of A in the coordinates of the right singular vectors, which hold every iterate that starts at 0.
    const rows = new Float64Array(m * rank);
    const squares = new Float64Array(m);
    let largest = 0;
    for (let i = 0; i < m; i++) {
      for (let k = 0; k < rank; k++) {
        const value = left[i * leftColumns + k] * s[k];
        rows[i * rank + k] = value;
        squares[i] += value * value;
      }
      largest = Math.max(largest, squares[i]);
    }
    return stoppedReconstructor(system, setting, largestIteration, (_frame, data) => {
      const z = new Float64Array(rank);
      return {
        z,
        advance() {
          let moved = false;
          for (let i = 0; i < m; i++) {
            if (!(squares[i] > least * largest)) continue;
            const row = i * rank;
            let rest = data[i] - offset[i];
            for (let k = 0; k < rank; k++) rest -= rows[row + k] * z[k];
            const step = (relaxation * rest) / squares[i];
            if (step === 0) continue;
            moved = true;
            for (let k = 0; k < rank; k++) z[k] += step * rows[row + k];
          }
          return moved;
        },
      };
    });
  },
};
export const kaczmarzMethod = defineMethod(method);
