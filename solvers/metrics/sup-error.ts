import { defineMetric, ownDefinition, placeOf, undefinedMetric } from './metric-definition';

export const supError = defineMetric({
  key: 'sup-error',
  name: 'Sup error (L∞) and its place',
  short: 'L∞',
  unit: 'that of the unknown',
  better: 'lower',
  formula: 'E_\\infty = \\max_i |\\hat x_i - x_i|',
  summary: 'The largest error at any pixel, in the unit of the unknown, with the place where it is attained.',
  sources: [ownDefinition],
  traps: [
    'Two images can be close in L2 and far apart here: a narrow spot weighs nothing in a sum.',
    'At a sharp edge every smooth method misses about half the step; the place says whether the error is at the edge or elsewhere.',
    'Of several places with the same error the first in the order of the grid is given.',
  ],
  fromSummary: (s) => (s.errorPlace < 0 ? undefinedMetric('The body has no pixel.') : { value: s.errorLargest, at: placeOf(s) }),
});
