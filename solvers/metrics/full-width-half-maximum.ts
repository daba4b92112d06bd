import { linePeaks } from './line-peak';
import { defineMetric, ownDefinition, undefinedMetric } from './metric-definition';

export const fullWidthHalfMaximum = defineMetric({
  key: 'full-width-half-maximum',
  name: 'Full width at half maximum, relative error',
  short: 'FWHM',
  unit: '',
  better: 'lower',
  formula: 'E_{\\mathrm{FWHM}} = \\frac{|\\hat w - w|}{w}, \\quad w = \\text{width of the peak at half its height over } x_b',
  summary: 'How far the width of the highest peak at half its height is off, as a share of the true width.',
  sources: [{ ...ownDefinition, full: 'The full width at half maximum is common practice; dividing by that of the truth is the choice of this registry.' }],
  traps: [
    'Defined on a line, where truth and estimate fall to half their height on both sides of the peak.',
    'Each curve is measured at half its own height: a peak of the right width and half the height scores 0.',
    'The ends of the width are interpolated between neighbouring cells; noise near half height shortens it.',
  ],
  fromSummary(s) {
    const peaks = linePeaks(s);
    if (typeof peaks === 'string') return undefinedMetric(peaks);
    const { truth, estimate } = peaks;
    if (truth.width === null) return undefinedMetric('The truth does not fall to half its height on both sides of its peak.');
    if (estimate.width === null) return undefinedMetric('The estimate does not fall to half its height on both sides of its peak.');
    return { value: Math.abs(estimate.width - truth.width) / truth.width };
  },
});
