import { exp, gammaln, ln } from '../core/math';
import { normalQuantile } from '../core/normal';
import { RandomStream } from '../core/random';
import { norm2 } from '../core/vector';
import { requireNoiseInput, type NoiseModel } from './noise-model';

/** Below this mean counts are drawn by multiplying uniforms, above the next by the normal quantile and its corrections. */
const smallMean = 10;
const largeMean = 1e6;

/**
 * A Poisson count of the given mean. Below 10: products of uniforms (Knuth 1969). Up to 1e6: transformed rejection (Hoermann 1993). Above,
 * the quantile of one uniform by the first terms of Cornish and Fisher, which is off by less than a hundredth of a count in the bulk.
 */
export function poissonCount(stream: RandomStream, mean: number): number {
  if (mean > largeMean) {
    const z = normalQuantile(stream.nextUniform());
    return Math.max(0, Math.round(mean + Math.sqrt(mean) * z + (z * z - 1) / 6));
  }
  if (mean < smallMean) {
    const limit = exp(-mean);
    let count = 0;
    for (let product = stream.nextUniform(); product > limit; product *= stream.nextUniform()) count++;
    return count;
  }
  const b = 0.931 + 2.53 * Math.sqrt(mean);
  const a = -0.059 + 0.02483 * b;
  const inverse = 1.1239 + 1.1328 / (b - 3.4);
  const inner = 0.9277 - 3.6224 / (b - 2);
  const logMean = ln(mean);
  for (;;) {
    const u = stream.nextUniform() - 0.5;
    const v = stream.nextUniform();
    const rim = 0.5 - Math.abs(u);
    const count = Math.floor(((2 * a) / rim + b) * u + mean + 0.43);
    if (rim >= 0.07 && v <= inner) return count;
    if (count < 0 || (rim < 0.013 && v > rim)) continue;
    if (ln(v * inverse) - ln(a / (rim * rim) + b) <= count * logMean - mean - gammaln(count + 1)) return count;
  }
}

/**
 * Sums of 1 / t and 1.75 / t^2 over the transmissions t = exp(-y): with N photons a ray E ||e||^2 = first / N + second / N^2 + ..., from
 * E ln(n / lambda)^2 = 1 / lambda + 7 / (4 lambda^2) + ... for a Poisson count n of mean lambda.
 */
function noiseTerms(clean: Float64Array): { first: number; second: number } {
  let first = 0;
  let second = 0;
  for (let i = 0; i < clean.length; i++) {
    const attenuation = exp(clean[i]);
    first += attenuation;
    second += 1.75 * attenuation * attenuation;
  }
  if (!Number.isFinite(second)) throw new RangeError('The line integrals are so large that no photon passes: photon noise is not defined for them.');
  return { first, second };
}

/** Photons sent along each ray so that E ||e||^2 is (level noiseScale)^2 to second order in 1 / photons; Infinity at level 0. */
export function photonsOfLevel(clean: Float64Array, level: number, noiseScale: number): number {
  const { first, second } = noiseTerms(clean);
  const target = (level * noiseScale) * (level * noiseScale);
  return target > 0 ? (first + Math.sqrt(first * first + 4 * target * second)) / (2 * target) : Infinity;
}

/** The level that so many photons a ray amount to: the equivalent delta. */
export function levelOfPhotons(clean: Float64Array, photons: number, noiseScale: number): number {
  if (!(photons > 0)) throw new RangeError(`The number of photons must be positive, not ${photons}.`);
  const { first, second } = noiseTerms(clean);
  return Math.sqrt(first / photons + second / (photons * photons)) / noiseScale;
}

/** Counts behind the body, turned back into line integrals. */
export const poissonNoise: NoiseModel = {
  key: 'poisson',
  name: 'Photon counts (Poisson)',
  summary: 'Each ray counts the photons that pass the body and takes the logarithm; dark rays are noisier than bright ones. The number of photons sent is set so that the mean square norm of the noise is the square of the level times the norm of the data. A count of 0 is taken as 1.',
  formula: 'y^\\delta_i = \\ln \\frac{N}{\\max(n_i, 1)}, \\quad n_i \\sim \\operatorname{Poisson}(N e^{-y_i}), \\quad \\sum_i \\Bigl(\\frac{e^{y_i}}{N} + \\frac{7 e^{2 y_i}}{4 N^2}\\Bigr) = \\delta^2\\,\\|y\\|^2',
  sources: [
    { short: 'Kak and Slaney 1988', full: 'A. C. Kak, M. Slaney: Principles of Computerized Tomographic Imaging. IEEE Press, 1988 (section 5.2, photon statistics).', fromMemory: true },
    { short: 'Hoermann 1993', full: 'W. Hoermann: The transformed rejection method for generating Poisson random variables. Insurance: Mathematics and Economics 12 (1993) 39-45.', fromMemory: true },
    { short: 'Salmon et al. 2011', full: 'J. K. Salmon, M. A. Moraes, R. O. Dror, D. E. Shaw: Parallel random numbers: as easy as 1, 2, 3. SC11, 2011.', fromMemory: true },
  ],
  exact: false,
  normal: false,
  families: ['x-ray'],
  draw(clean, level, noiseScale, key) {
    requireNoiseInput(clean, level, noiseScale);
    const photons = photonsOfLevel(clean, level, noiseScale);
    if (!(photons < Infinity)) return { data: Float64Array.from(clean), noiseNorm: 0 };
    const stream = new RandomStream(key);
    const logPhotons = ln(photons);
    const data = new Float64Array(clean.length);
    for (let i = 0; i < clean.length; i++) data[i] = logPhotons - ln(Math.max(1, poissonCount(stream, exp(logPhotons - clean[i]))));
    return { data, noiseNorm: norm2(data.map((value, i) => value - clean[i])) };
  },
};
