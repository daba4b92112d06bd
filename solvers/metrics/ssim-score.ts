import { defineMetric, undefinedMetric } from './metric-definition';
import { truthRange } from './psnr-score';
import { structuralSimilarity } from './structural-similarity';

export const ssimScore = defineMetric({
  key: 'ssim-score',
  name: 'Structural similarity (SSIM)',
  short: 'SSIM',
  unit: '',
  better: 'higher',
  formula: '\\mathrm{SSIM} = \\frac{1}{N}\\sum_{i} \\frac{(2\\mu_{x}\\mu_{\\hat x} + c_1)(2\\sigma_{x\\hat x} + c_2)}{(\\mu_x^2 + \\mu_{\\hat x}^2 + c_1)(\\sigma_x^2 + \\sigma_{\\hat x}^2 + c_2)}, \\quad c_1 = (0.01 L)^2,\\; c_2 = (0.03 L)^2',
  summary: 'Mean over local windows of the agreement of brightness, contrast and structure; 1 for equal images. The window is 11 x 11 pixels, Gaussian of deviation 1.5.',
  sources: [{ short: 'Wang et al. 2004', full: 'Z. Wang, A. C. Bovik, H. R. Sheikh, E. P. Simoncelli. IEEE Transactions on Image Processing 13 (2004) 600-612.', fromMemory: true }],
  traps: [
    'Only windows that lie inside the body count: no window is centred within 5 pixels of the rim, so what happens there weighs less.',
    'Population covariance, as published; some codes use the sample covariance and differ in the fourth digit.',
    'L is the range of the truth (largest less smallest value), not of both images.',
    'It depends on the pixel size of the evaluation grid: a window is 11 pixels, whatever they measure.',
  ],
  fromSummary: (s) => {
    const range = truthRange(s.input.truth);
    if (range === 0) return undefinedMetric('The truth is constant: it has no range.');
    const value = structuralSimilarity(s.input.truth, s.input.estimate, s.input.grid, range);
    return value === null ? undefinedMetric('No window of 11 x 11 pixels fits into the body.') : { value };
  },
});
