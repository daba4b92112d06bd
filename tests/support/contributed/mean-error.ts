/** A metric as a contributor adds it: this file, and one line in the registry. */
import { defineMetric } from '../../../solvers/metrics/metric-definition';

export const meanError = defineMetric({
  key: 'mean-shift-error',
  name: 'Shift of the mean',
  short: 'Mean shift',
  unit: '',
  better: 'lower',
  formula: '\\bigl|\\operatorname{mean}_i(\\hat x_i - x_i)\\bigr|',
  summary: 'How far the mean of the image lies from the mean of the truth.',
  sources: [{ short: 'common practice, no source', full: 'Common practice, no source.' }],
  traps: ['Errors of opposite sign cancel.'],
  fromSummary: ({ input: { truth, estimate } }) => {
    let sum = 0;
    for (let k = 0; k < truth.length; k++) sum += estimate[k] - truth[k];
    return { value: Math.abs(sum) / truth.length };
  },
});
