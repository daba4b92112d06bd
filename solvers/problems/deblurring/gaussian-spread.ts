import { erf, exp } from '../../core/math';
import { collectTaps } from './collect-taps';
import type { PointSpread } from './point-spread';

const rootTwo = 1.4142135623730951;
const rootTwoPi = 2.5066282746310002;

/** Share of the standard normal distribution below z. */
const below = (z: number): number => 0.5 * (1 + erf(z / rootTwo));

/** Deviations beyond which the weights are dropped: 6e-7 of the whole along an axis for the inversion, 2e-9 for the simulation. */
const inversionDeviations = 5;
const simulationDeviations = 6;

/** Samples of a Gaussian at whole multiples of a step, of unit sum: weights of offsets -n .. n. */
export function sampledGaussian(sigma: number, step: number): Float64Array {
  const n = Math.ceil((inversionDeviations * sigma) / step);
  const values = new Float64Array(2 * n + 1);
  let sum = 0;
  for (let k = -n; k <= n; k++) sum += values[k + n] = exp(-0.5 * ((k * step) / sigma) * ((k * step) / sigma));
  return values.map((value) => value / sum);
}

/** A round Gaussian of standard deviation sigma, m. The inversion samples it at the centres of pixels. */
export function gaussianSpread(sigma: number): PointSpread {
  return {
    reachX: simulationDeviations * sigma,
    reachY: simulationDeviations * sigma,
    taps(dx, dy) {
      const along = sampledGaussian(sigma, dx);
      const up = sampledGaussian(sigma, dy);
      const nx = (along.length - 1) / 2;
      const ny = (up.length - 1) / 2;
      return collectTaps(nx, ny, (i, j) => up[i + ny] * along[j + nx]);
    },
    response: (x, y, dx, dy) => strip(x, dx, sigma) * strip(y, dy, sigma),
    separable: { along: (offset, size) => strip(offset, size, sigma) },
    edgeIntegral: (x) => x * below(x / sigma) + (sigma * exp(-0.5 * (x / sigma) * (x / sigma))) / rootTwoPi,
    formula: 'p(x, y) = \\frac{1}{2\\pi\\sigma^2} \\exp\\!\\left(-\\frac{x^2 + y^2}{2\\sigma^2}\\right)',
  };
}

const strip = (offset: number, size: number, sigma: number): number => below((size / 2 - offset) / sigma) - below((-size / 2 - offset) / sigma);
