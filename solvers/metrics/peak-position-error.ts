import { linePeaks } from './line-peak';
import { defineMetric, ownDefinition, undefinedMetric } from './metric-definition';

export const peakPositionError = defineMetric({
  key: 'peak-position-error',
  name: 'Peak position error',
  short: 'Peak',
  unit: 'half length',
  better: 'lower',
  formula: 'E_{\\mathrm{peak}} = \\frac{|\\hat t^{*} - t^{*}|}{(b - a)/2}, \\quad t^{*} = \\operatorname*{arg\\,max}_t\\, \\pm(x - x_b)',
  summary: 'Distance of the highest point of a curve to that of the truth, as a share of half the length of the line.',
  sources: [{ ...ownDefinition, full: 'The place of the largest value, refined by the parabola through its neighbours, is common practice; dividing by half the length is the choice of this registry.' }],
  traps: [
    'Defined on a line, where the truth is largest away from the ends.',
    'The place is refined by the parabola through the highest cell and its neighbours; of a flat top it is the middle.',
    'One peak, the largest: where noise lifts another one above it the figure jumps.',
    'The sign follows the truth: where it falls below the background most, the deepest point counts.',
  ],
  fromSummary(s) {
    const peaks = linePeaks(s);
    if (typeof peaks === 'string') return undefinedMetric(peaks);
    return { value: Math.abs(peaks.estimate.place - peaks.truth.place) / s.input.grid.bodyRadius };
  },
});
