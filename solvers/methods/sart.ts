import type { XrayGeometry } from '../../shared/domain/geometry/x-ray';
import { applySparse } from '../core/sparse';
import type { Method } from '../core/types';
import { constraintChoices, lowestChange, raiseTo } from './constraint';
import { operatorSystem, stoppedByAction } from './operator-system';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { absoluteSums, sparseRows } from './row-action';
import { stoppingRules } from './stopped-iteration';

const specs = {
  relaxation: { kind: 'number', label: 'Relaxation', symbol: '\\omega', default: 0.5, minimum: 0.01, maximum: 1.99, scale: 'linear', help: 'Share of each correction that is taken.' },
  order: {
    kind: 'choice', label: 'Order of the views', default: 'spread', choices: [{ value: 'spread', label: 'Spread' }, { value: 'sequential', label: 'As measured' }],
    help: 'Views far apart one after the other tell more than neighbours do, so that fewer sweeps are needed.',
  },
  constraint: { kind: 'choice', label: 'Constraint', default: 'none', choices: constraintChoices, help: 'What is known of the values: raised to 0 after every view where they are not to be negative.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 200, minimum: 1, maximum: 5000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** The views in steps of about 0.382 of their number, made prime to it so that all come. */
export function spreadOrder(views: number): number[] {
  const common = (a: number, b: number): number => (b === 0 ? a : common(b, a % b));
  let stride = Math.max(1, Math.round(0.38196601125 * views));
  while (common(views, stride) !== 1) stride++;
  return Array.from({ length: views }, (_, k) => (k * stride) % views);
}

/** View after view; a step of the count is one sweep over all views. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'sart',
  name: 'Simultaneous algebraic reconstruction (SART)',
  class: 'iterative',
  summary: 'Corrects the image for all rays of one view at a time, weighted by the lengths of the rays and what they share, view after view; the number of sweeps regularises.',
  formula: 'h_j \\leftarrow h_j + \\frac{\\omega}{\\sum_{i \\in v} a_{ij}} \\sum_{i \\in v} a_{ij}\\, \\frac{y_i - F_i(x_b) - \\langle a_i, h\\rangle}{\\sum_k a_{ik}} \\quad \\text{for each view } v',
  sources: [
    { short: 'Andersen and Kak 1984', full: 'A. H. Andersen, A. C. Kak: Simultaneous algebraic reconstruction technique (SART): a superior implementation of the ART algorithm. Ultrasonic Imaging 6 (1984) 81-94.', fromMemory: true },
    { short: 'Guan and Gordon 1994', full: 'H. Guan, R. Gordon: A projection access order for speedy convergence of ART. Physics in Medicine and Biology 39 (1994) 2005-2022 (why the order matters; the order here is a plain stride).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: ['x-ray'], dataKinds: ['absolute'], rules: stoppingRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Sweeps', symbol: 'k', default: 10, minimum: 1, maximum: 5000, help: 'Number of sweeps over all views.' }),
  prepare(problem, parameters, rule) {
    const { relaxation, order, constraint, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    if (problem.family !== 'x-ray') throw new RangeError(`${method.name} needs data that come in views, not those of the family '${problem.family}'.`);
    const { views, detectors } = problem.geometry as XrayGeometry;
    const system = operatorSystem(problem, 'none');
    const matrix = sparseRows(system.derivative);
    const { rowStart, columns, values } = matrix;
    const { row } = absoluteSums(system.derivative);
    const lowest = lowestChange(problem, constraint);
    const sequence = order === 'spread' ? spreadOrder(views) : Array.from({ length: views }, (_, k) => k);
    const { dataSize: m, unknowns: n } = problem;
    return stoppedByAction(system, setting, largestIteration, (y) => {
      const z = new Float64Array(n);
      const residual = Float64Array.from(y);
      const model = new Float64Array(m);
      const correction = new Float64Array(n);
      const weight = new Float64Array(n);
      return {
        z,
        residual,
        advance() {
          let moved = false;
          for (const view of sequence) {
            correction.fill(0);
            weight.fill(0);
            for (let i = view * detectors; i < (view + 1) * detectors; i++) {
              if (!(row[i] > 0)) continue;
              let rest = y[i];
              for (let k = rowStart[i]; k < rowStart[i + 1]; k++) rest -= values[k] * z[columns[k]];
              rest /= row[i];
              for (let k = rowStart[i]; k < rowStart[i + 1]; k++) {
                correction[columns[k]] += values[k] * rest;
                weight[columns[k]] += values[k];
              }
            }
            for (let j = 0; j < n; j++)
              if (weight[j] > 0 && correction[j] !== 0) {
                z[j] += (relaxation * correction[j]) / weight[j];
                moved = true;
              }
            raiseTo(z, lowest);
          }
          applySparse(matrix, z, model);
          for (let i = 0; i < m; i++) residual[i] = y[i] - model[i];
          return moved;
        },
      };
    });
  },
};
export const sartMethod = defineMethod(method);
