import { defineMetric, undefinedMetric } from './metric-definition';

export const credibleCoverage = defineMetric({
  key: 'credible-coverage',
  name: 'Coverage of credible intervals',
  short: 'Coverage',
  unit: '',
  better: 'one',
  formula: 'C = \\frac{1}{p}\\,\\frac{\\#\\{i : q_{(1-p)/2,\\,i} \\le x_i \\le q_{(1+p)/2,\\,i}\\}}{\\#\\{i\\}}, \\quad p = 0.9',
  summary: 'Share of the pixels whose true value lies in the pointwise 90 % credible interval of the method, over 0.9. 1 means that the intervals are as wide as they claim; below 1 the method is too sure.',
  sources: [{ short: 'common practice', full: 'Empirical coverage of pointwise intervals over a nominal probability. Common practice, no source.' }],
  traps: [
    'Only methods that give a distribution have it.',
    'Pixels are not independent: one image says little, read the spread over draws.',
    'A prior that is far too wide covers everything. Read the relative L2 error beside it.',
  ],
  fromSummary: ({ input: { interval, truth } }) => {
    if (!interval) return undefinedMetric('The method gives no distribution.');
    let inside = 0;
    for (let k = 0; k < truth.length; k++) if (truth[k] >= interval.low[k] && truth[k] <= interval.high[k]) inside++;
    return truth.length > 0 ? { value: inside / truth.length / interval.probability } : undefinedMetric('The body has no pixels.');
  },
});
