import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { norm2, requireVector } from '../core/vector';
import { operatorSystem } from './operator-system';
import { defineMethod, defineParameters, readParameters } from './parameters';
import { makeReconstructor } from './reconstructor';
import { absoluteSums } from './row-action';

const { schema, fields } = defineParameters({});

/** Every unknown gets the weighted mean of what its data say about it. */
const method: Method<Record<string, never>> = {
  key: 'back-projection',
  name: 'Weighted back-projection',
  class: 'direct',
  summary: 'Spreads each datum evenly over the unknowns that it depends on and averages what meets there, weighted by the sensitivities. No inversion: sharp things come out blurred and too low.',
  formula: '\\hat x = x_b + C J^{\\mathsf T} R\\, (y - F(x_b)), \\quad R_{ii} = \\frac{1}{\\sum_j |J_{ij}|}, \\; C_{jj} = \\frac{1}{\\sum_i |J_{ij}|}',
  sources: [{ short: 'Kuhl and Edwards 1963', full: 'D. E. Kuhl, R. Q. Edwards: Image separation radioisotope scanning. Radiology 80 (1963) 653-662 (back-projection; the weights are those of one step of SIRT).', fromMemory: true }],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: [] },
  defaultRule: null,
  fixedValue: null,
  prepare(problem, parameters, rule) {
    readParameters(method.name, schema, parameters);
    if (rule) throw new RangeError(`${method.name} has no parameter, so no parameter-choice rule.`);
    const { derivative, dataSize, unknowns, offset, background } = operatorSystem(problem, 'none');
    const { row, column } = absoluteSums(derivative);
    return makeReconstructor((data) => {
      requireVector(data, dataSize, 'The data frame');
      const y = data.map((value, i) => value - offset[i]);
      const h = new Float64Array(unknowns);
      derivative.applyAdjoint(y.map((value, i) => (row[i] > 0 ? value / row[i] : 0)), h);
      for (let j = 0; j < unknowns; j++) h[j] = column[j] > 0 ? h[j] / column[j] : 0;
      const model = new Float64Array(dataSize);
      derivative.apply(h, model);
      const residualNorm = norm2(y.map((value, i) => value - model[i]));
      for (let j = 0; j < unknowns; j++) h[j] += background[j];
      return { x: h, parameter: null, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm };
    });
  },
};
export const backProjectionMethod = defineMethod(method);
