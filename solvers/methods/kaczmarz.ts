import type { Method } from '../core/types';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { penaltyChoices } from './penalty';
import { spectralSystem } from './spectral-system';
import { stoppedReconstructor, stoppingRules } from './stopped-iteration';

const specs = {
  penalty: { kind: 'choice', label: 'Smoothing norm', symbol: 'L', default: 'identity', choices: penaltyChoices, help: 'The inner product of the iteration: the size of the change, its gradient, or its Laplacian.' },
  relaxation: { kind: 'number', label: 'Relaxation', symbol: '\\omega', default: 0.5, minimum: 0.01, maximum: 1.99, scale: 'linear', help: 'Share of the way to each hyperplane. Below 1 the noise of single data weighs less.' },
  largestIteration: { kind: 'integer', label: 'Most iterations', default: 300, minimum: 1, maximum: 20000, help: 'The iteration ends here even if the discrepancy is not reached.' },
} as const;
const { schema, fields } = defineParameters(specs);

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
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: stoppingRules },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'integer', label: 'Sweeps', symbol: 'k', default: 20, minimum: 1, maximum: 20000, help: 'Number of sweeps over all data.' }),
  prepare(problem, parameters, rule) {
    const { penalty, relaxation, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const system = spectralSystem(problem, penalty);
    const { rank, dataSize: m, left, leftColumns, singularValues: s, offset } = system;
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
            // A datum that depends on nothing says nothing.
            if (!(squares[i] > 1e-24 * largest)) continue;
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
