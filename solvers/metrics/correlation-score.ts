import { defineMetric, undefinedMetric } from './metric-definition';

export const correlationScore = defineMetric({
  key: 'correlation-score',
  name: 'Correlation',
  short: 'Correlation',
  unit: '',
  better: 'higher',
  formula: '\\rho = \\frac{\\sum_i (x_i - \\bar x)(\\hat x_i - \\bar{\\hat x})}{\\sqrt{\\sum_i (x_i - \\bar x)^2\\, \\sum_i (\\hat x_i - \\bar{\\hat x})^2}}',
  summary: 'Linear correlation of the pixels of image and truth inside the body; 1 where the image is the truth up to scale and offset.',
  sources: [{ short: 'Pearson 1895', full: 'K. Pearson. Proceedings of the Royal Society of London 58 (1895) 240-242.', fromMemory: true }],
  traps: ['Blind to scale and offset: half the contrast costs nothing.', 'Not defined for a constant image, so not for the trivial reconstruction of a constant background.'],
  fromSummary: ({ input: { truth, estimate } }) => {
    const count = truth.length;
    let meanT = 0;
    let meanE = 0;
    for (let k = 0; k < count; k++) {
      meanT += truth[k];
      meanE += estimate[k];
    }
    meanT /= count;
    meanE /= count;
    let tt = 0;
    let ee = 0;
    let te = 0;
    let sizeT = 0;
    let sizeE = 0;
    for (let k = 0; k < count; k++) {
      const t = truth[k] - meanT;
      const e = estimate[k] - meanE;
      tt += t * t;
      ee += e * e;
      te += t * e;
      sizeT += truth[k] * truth[k];
      sizeE += estimate[k] * estimate[k];
    }
    // A constant differs from its own mean by rounding: that is no variation.
    if (!(tt > 1e-24 * sizeT)) return undefinedMetric('The truth is constant.');
    if (!(ee > 1e-24 * sizeE)) return undefinedMetric('The image is constant.');
    return { value: Math.max(-1, Math.min(1, te / Math.sqrt(tt * ee))) };
  },
});
