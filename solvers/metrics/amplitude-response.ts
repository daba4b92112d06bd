import { gridGeometry } from './grid-geometry';
import { adler2009, defineMetric, noTarget, undefinedMetric } from './metric-definition';

export const amplitudeResponse = defineMetric({
  key: 'amplitude-response',
  name: 'Amplitude response',
  short: 'Amplitude',
  unit: '',
  better: 'one',
  formula: 'AR = \\frac{\\sum_i w_i (\\hat x_i - x_{b,i})}{\\sum_t A_t\\, \\Delta x_t}',
  summary: 'Total change in the image against the total change of the targets (area times contrast). 1 keeps the amount; below 1 part of it is lost.',
  sources: [adler2009],
  traps: [
    'Divided by the true area of the targets, not by that of the pixels they cover.',
    'Ringing cancels: an image with large positive and negative parts can score 1.',
    'Targets of opposite contrast cancel in the denominator; where they cancel entirely the figure is not defined.',
  ],
  fromSummary: (s) => {
    const missing = noTarget(s);
    if (missing) return missing;
    let whole = 0;
    let absolute = 0;
    for (const { area, contrast } of s.input.targets) {
      whole += area * contrast;
      absolute += Math.abs(area * contrast);
    }
    if (!(Math.abs(whole) > 1e-9 * absolute)) return undefinedMetric('The contrasts of the targets cancel.');
    return { value: (s.changeSum * gridGeometry(s.input.grid).pixelArea) / whole };
  },
});
