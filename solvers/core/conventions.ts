/** Conventions that differ between sources, settled here once; the reference page prints them. */
export interface Convention {
  readonly key: string;
  readonly name: string;
  readonly text: string;
}

export const conventions: readonly Convention[] = [
  { key: 'tikhonov-alpha', name: 'Alpha of Tikhonov', text: 'The penalty is alpha squared times the squared norm. Sources that write lambda for the whole weight mean its square.' },
  { key: 'gcv-truncation', name: 'GCV and truncated SVD', text: 'Generalised cross-validation searches truncations up to half the number of data: beyond it the function is known to pick noise.' },
  { key: 'l-curve-corner', name: 'Corner of the L-curve', text: 'The curve can have several corners. The one of largest curvature on a log-log spline is taken.' },
  { key: 'ssim', name: 'SSIM', text: 'An 11 x 11 Gaussian window with sigma 1.5, K1 = 0.01, K2 = 0.03, population covariance, and a border of 5 pixels cropped (Wang et al. 2004).' },
  { key: 'wilcoxon-zeros', name: 'Zeros in Wilcoxon\'s test', text: 'Blocks without a difference are split between the two signs, as in Demsar 2006.' },
  { key: 'friedman-ties', name: 'Ties in Friedman\'s test', text: 'The statistic has the correction for ties.' },
  { key: 'nemenyi-table', name: 'Nemenyi distance', text: 'The critical value is computed from the studentised range, not read from a table that is rounded to three digits.' },
  { key: 'position-error', name: 'Position error', text: 'Distance of the centroid of the quarter-amplitude set, with weights 0 and 1, to the declared centroid, over the body radius. The signed radial difference is a figure of its own. The sign of the amplitude follows the declared contrast.' },
  { key: 'amplitude-response', name: 'Amplitude response', text: 'Divided by the true area of the targets times their contrast, not by the area of the pixels that they cover.' },
  { key: 'relative-error', name: 'Relative error', text: 'Relative to the distance of the truth to the background: the background alone scores 1. Sources that divide by the norm of the truth get a smaller number.' },
  { key: 'quantiles', name: 'Quantiles', text: 'Type 7 of Hyndman and Fan 1996: linear interpolation between order statistics.' },
];
