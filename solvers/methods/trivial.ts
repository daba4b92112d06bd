import { familyKeys } from '../../shared/domain/families';
import type { Method } from '../core/types';
import { requireVector } from '../core/vector';
import { defineMethod, defineParameters, readParameters } from './parameters';
import { makeReconstructor } from './reconstructor';

const { schema, fields } = defineParameters({});

/** The background, whatever the data say: the baseline every method must beat. */
const method: Method<Record<string, never>> = {
  key: 'trivial',
  name: 'Trivial reconstruction',
  class: 'baseline',
  summary: 'Returns the known background and ignores the data. A method that does worse than this is worse than nothing.',
  formula: '\\hat x = x_b',
  sources: [{ short: 'Definition of this registry', full: 'The baseline of every chart here: the background alone.' }],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: [] },
  defaultRule: null,
  fixedValue: null,
  prepare(problem, parameters, rule) {
    readParameters(method.name, schema, parameters);
    if (rule) throw new RangeError(`${method.name} has no parameter, so no parameter-choice rule.`);
    const background = problem.background();
    const model = problem.dataKind === 'difference' ? new Float64Array(problem.dataSize) : problem.evaluate(background);
    return makeReconstructor((data) => {
      requireVector(data, problem.dataSize, 'The data frame');
      let sum = 0;
      for (let i = 0; i < data.length; i++) sum += (data[i] - model[i]) * (data[i] - model[i]);
      return { x: Float64Array.from(background), parameter: null, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: Math.sqrt(sum) };
    });
  },
};
export const trivialMethod = defineMethod(method);
