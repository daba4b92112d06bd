/** A method as a contributor adds it: this file, and one line in the registry. Nothing else is told of it. */
import type { Method } from '../../../solvers/core/types';
import { norm2, requireVector } from '../../../solvers/core/vector';
import { defineMethod, defineParameters, readParameters, type ParametersOf } from '../../../solvers/methods/parameters';
import { makeReconstructor } from '../../../solvers/methods/reconstructor';

const specs = {
  gain: { kind: 'number', label: 'Gain of the adjoint', symbol: 'g', unit: '', default: 0.5, minimum: 0.01, maximum: 10, scale: 'log', help: 'How far one step along the adjoint goes.' },
} as const;
const { schema, fields } = defineParameters(specs);

const method: Method<ParametersOf<typeof specs>> = {
  key: 'scaled-adjoint',
  name: 'Scaled adjoint',
  class: 'direct',
  summary: 'One step along the adjoint of the derivative, with a length that fits the data.',
  formula: '\\hat x = x_b + g\\, \\frac{\\|J^{\\mathsf T} y\\|^2}{\\|J J^{\\mathsf T} y\\|^2}\\, J^{\\mathsf T} y',
  sources: [{ short: 'common practice, no source', full: 'Common practice, no source.' }],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: true, statistical: false, families: ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: [] },
  defaultRule: null,
  fixedValue: null,
  prepare(problem, parameters) {
    const { gain } = readParameters(method.name, schema, parameters);
    const background = problem.background();
    const derivative = problem.linearise(background);
    const offset = problem.dataKind === 'difference' ? new Float64Array(problem.dataSize) : problem.evaluate(background);
    return makeReconstructor((data) => {
      requireVector(data, problem.dataSize, 'The data frame');
      const y = data.map((value, i) => value - offset[i]);
      const step = new Float64Array(problem.unknowns);
      const model = new Float64Array(problem.dataSize);
      derivative.applyAdjoint(y, step);
      derivative.apply(step, model);
      const size = norm2(model);
      const length = size > 0 ? gain * (norm2(step) / size) * (norm2(step) / size) : 0;
      return { x: step.map((value, j) => background[j] + length * value), parameter: null, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: norm2(y.map((value, i) => value - length * model[i])) };
    });
  },
};
export const scaledAdjointMethod = defineMethod(method);
