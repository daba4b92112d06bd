import { familyKeys } from '../../shared/domain/families';
import type { ForwardProblem, Method, Reconstructor, RuleSetting, StopReason } from '../core/types';
import { constraintChoices, lowestChange, type ConstraintKey } from './constraint';
import { goesByAction, operatorSystem, stoppedByAction } from './operator-system';
import { absoluteSums } from './row-action';
import { requireVector, sumOfSquares } from '../core/vector';
import { matmulTransposed } from '../linear-algebra/matrix-product';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';
import { derivativeAtBackground, stoppingRules } from './stopped-iteration';

const specs = {
  relaxation: { kind: 'number', label: 'Relaxation', symbol: '\\omega', default: 1, minimum: 0.01, maximum: 1.99, scale: 'linear', help: 'Multiple of the weighted step. It converges below 2.' },
  constraint: { kind: 'choice', label: 'Constraint', default: 'none', choices: constraintChoices, help: 'What is known of the values: raised to 0 after every step where they are not to be negative.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 2000, minimum: 1, maximum: 20000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Steps in the unknowns, by the action of the derivative. */
function sirtByAction(problem: ForwardProblem, options: { relaxation: number; constraint: ConstraintKey; largestIteration: number }, setting: RuleSetting): Reconstructor {
  const system = operatorSystem(problem, 'none');
  const { row, column } = absoluteSums(system.derivative);
  const lowest = lowestChange(problem, options.constraint);
  const n = problem.unknowns;
  return stoppedByAction(system, setting, options.largestIteration, (y) => {
    const z = new Float64Array(n);
    const residual = Float64Array.from(y);
    const weighted = new Float64Array(y.length);
    const back = new Float64Array(n);
    return {
      z,
      residual,
      advance() {
        for (let i = 0; i < y.length; i++) weighted[i] = row[i] > 0 ? (options.relaxation * residual[i]) / row[i] : 0;
        system.applyAdjoint(weighted, back);
        let moved = false;
        for (let j = 0; j < n; j++) {
          let next = column[j] > 0 ? z[j] + back[j] / column[j] : z[j];
          if (lowest && next < lowest[j]) next = lowest[j];
          if (next !== z[j]) moved = true;
          z[j] = next;
        }
        system.apply(z, weighted);
        for (let i = 0; i < y.length; i++) residual[i] = y[i] - weighted[i];
        return moved;
      },
    };
  });
}

/** Simultaneous iterative reconstruction with weights by row and column sums. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'sirt',
  name: 'Simultaneous iteration (SIRT)',
  class: 'iterative',
  summary: 'Simultaneous iteration on the linearised problem: all residuals are sent back at once, weighted by the row and column sums of the derivative. The number of steps regularises.',
  formula: 'h_k = h_{k-1} + \\omega\\, C J^{\\mathsf T} R\\, \\bigl(y - F(x_b) - J h_{k-1}\\bigr), \\quad R_{ii} = \\frac{1}{\\sum_j |J_{ij}|}, \\; C_{jj} = \\frac{1}{\\sum_i |J_{ij}|}',
  sources: [
    { short: 'Gilbert 1972', full: 'P. Gilbert. Journal of Theoretical Biology 36 (1972) 105-117.', fromMemory: true },
    { short: 'van der Sluis and van der Vorst 1990', full: 'A. van der Sluis, H. A. van der Vorst. Linear Algebra and its Applications 130 (1990) 257-303 (sums of absolute values).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: stoppingRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Steps', symbol: 'k', default: 100, minimum: 1, maximum: 20000, help: 'Number of steps.' }),
  prepare(problem, parameters, rule) {
    const { relaxation, constraint, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (constraint !== 'none' || goesByAction(problem)) return sirtByAction(problem, { relaxation, constraint, largestIteration }, setting);
    const { dataSize: m, unknowns: n } = problem;
    const background = problem.background();
    const jacobian = derivativeAtBackground(problem);
    requireVector(jacobian, m * n, 'The derivative');
    const row = new Float64Array(m);
    const column = new Float64Array(n);
    for (let i = 0; i < m; i++)
      for (let j = 0; j < n; j++) {
        const size = Math.abs(jacobian[i * n + j]);
        row[i] += size;
        column[j] += size;
      }
    // A datum or a cell without any sensitivity takes no part.
    for (let i = 0; i < m; i++) row[i] = row[i] > 0 ? relaxation / row[i] : 0;
    for (let j = 0; j < n; j++) column[j] = column[j] > 0 ? 1 / column[j] : 0;
    const weighted = new Float64Array(m * n);
    for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) weighted[i * n + j] = jacobian[i * n + j] * column[j];
    // Iterates in the space of the data: h_k = C J^T w_k, so that a step costs m^2 instead of 2 m n.
    const gram = matmulTransposed(weighted, jacobian, m, n, m);
    const offset = problem.dataKind === 'difference' ? new Float64Array(m) : problem.evaluate(background);
    const limit = setting.key === 'fixed' ? setting.value : largestIteration;
    return makeReconstructor((data, noise, context) => {
      requireVector(data, m, 'The data frame');
      const bound = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
      const target = bound * bound;
      const y = new Float64Array(m);
      for (let i = 0; i < m; i++) y[i] = data[i] - offset[i];
      const rest = Float64Array.from(y);
      const w = new Float64Array(m);
      let residual = sumOfSquares(rest);
      let iterations = 0;
      let stop: StopReason = residual === 0 ? 'converged' : target > 0 && residual <= target ? 'discrepancy' : 'maxIterations';
      while (stop === 'maxIterations' && iterations < limit) {
        iterations++;
        for (let i = 0; i < m; i++) w[i] += row[i] * rest[i];
        for (let i = 0; i < m; i++) {
          let model = 0;
          for (let k = 0; k < m; k++) model += gram[i * m + k] * w[k];
          rest[i] = y[i] - model;
        }
        residual = sumOfSquares(rest);
        if (target > 0 && residual <= target) stop = 'discrepancy';
        else if (residual === 0) stop = 'converged';
        else if (context?.aborted?.()) break;
      }
      const x = Float64Array.from(background);
      if (iterations > 0) for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) x[j] += w[i] * weighted[i * n + j];
      return { x, parameter: iterations, iterations, forwardSolves: 0, stop, residualNorm: Math.sqrt(residual) };
    });
  },
};
export const sirtMethod = defineMethod(method);
