import { log10 } from '../core/math';
import { defineMetric, undefinedMetric } from './metric-definition';

/** Largest less smallest value; 0 without pixels. */
export function truthRange(truth: Float64Array): number {
  if (truth.length === 0) return 0;
  let low = truth[0];
  let high = truth[0];
  for (let k = 1; k < truth.length; k++) {
    if (truth[k] < low) low = truth[k];
    if (truth[k] > high) high = truth[k];
  }
  return high - low;
}

/** 10 log10(range^2 / mean square error) in dB; `errorSquares` summed over `count` pixels. */
export const peakSignalToNoise = (range: number, errorSquares: number, count: number): number => 10 * log10((range * range * count) / errorSquares);

export const psnrScore = defineMetric({
  key: 'psnr-score',
  name: 'Peak signal-to-noise ratio',
  short: 'PSNR',
  unit: 'dB',
  better: 'higher',
  formula: '\\mathrm{PSNR} = 10 \\log_{10} \\frac{L^2}{\\frac1N \\sum_i (\\hat x_i - x_i)^2}, \\quad L = \\max x - \\min x',
  summary: 'Range of the truth against the root mean square error, in decibels.',
  sources: [{ short: 'common practice', full: 'Common practice, no source.' }],
  traps: [
    'The range is that of the truth inside the body; with a fixed range (255) the figure is another.',
    'The same information as the L2 error, on a logarithmic scale: 6 dB are a factor of two.',
    'Not defined for an image without any error.',
  ],
  fromSummary: (s) => {
    const range = truthRange(s.input.truth);
    if (range === 0) return undefinedMetric('The truth is constant: it has no range.');
    if (s.errorSquares === 0) return undefinedMetric('The image equals the truth: the ratio is infinite.');
    return { value: peakSignalToNoise(range, s.errorSquares, s.input.truth.length) };
  },
});
