import { defineMetric, ownDefinition, placeOf, relativeTo } from './metric-definition';

export const relativeSupError = defineMetric({
  key: 'relative-sup-error',
  name: 'Relative sup error',
  short: 'Relative L∞',
  unit: '',
  better: 'lower',
  formula: 'E_{\\infty}^{\\mathrm{rel}} = \\frac{\\max_i |\\hat x_i - x_i|}{\\max_i |x_i - x_{b,i}|}',
  summary: 'The largest error at any pixel against the largest contrast. The trivial reconstruction scores exactly 1.',
  sources: [ownDefinition],
  traps: ['A smooth reconstruction of a sharp edge scores about 0.5 even at little noise.', 'The two maxima may sit at different places.'],
  fromSummary: (s) => {
    const ratio = relativeTo(s.errorLargest, s.signalLargest);
    return ratio.value === null ? ratio : { ...ratio, at: placeOf(s) };
  },
});
