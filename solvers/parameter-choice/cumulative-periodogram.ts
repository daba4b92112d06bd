import { exp, ln } from '../core/math';
import { goldenSection } from './golden-section';
import { requireSetting, type ParameterRule } from './rule';
import { searchRange, type SpectralData } from './spectral-data';

const gridPoints = 80;

/**
 * Distance of the normalised cumulative periodogram of a residual from the straight line of white noise: the Euclidean norm over i of
 * sum_{j <= i} r_j^2 / sum r^2 - i / n. Infinite for a residual of zero.
 * @param residual coefficients in the basis of the left singular vectors, length n
 */
export function periodogramDistance(residual: Float64Array): number {
  const n = residual.length;
  let whole = 0;
  for (let i = 0; i < n; i++) whole += residual[i] * residual[i];
  if (!(whole > 0)) return Infinity;
  let partial = 0;
  let sum = 0;
  for (let i = 0; i < n; i++) {
    partial += residual[i] * residual[i];
    const d = partial / whole - (i + 1) / n;
    sum += d * d;
  }
  return Math.sqrt(sum);
}

function tikhonovDistance({ singularValues: s, coefficients: c }: SpectralData, alpha: number, residual: Float64Array): number {
  const a = alpha * alpha;
  for (let i = 0; i < residual.length; i++) residual[i] = (a / (s[i] * s[i] + a)) * c[i];
  return periodogramDistance(residual);
}

/** The residual that looks most like white noise. */
export const cumulativePeriodogramRule: ParameterRule = {
  key: 'cumulative-periodogram',
  name: 'Normalised cumulative periodogram',
  summary: 'The parameter whose residual looks most like white noise: its cumulative power over the frequencies lies nearest to a straight line. It is not told the noise.',
  formula: '\\min_\\alpha\\; \\Bigl\\| \\frac{\\sum_{j \\le i} |\\hat r_j|^2}{\\sum_j |\\hat r_j|^2} - \\frac{i}{n} \\Bigr\\|_2, \\qquad \\hat r = U^{\\mathsf T}(y - A x_\\alpha)',
  sources: [
    { short: 'Hansen, Kilmer, Kjeldsen 2006', full: 'P. C. Hansen, M. E. Kilmer, R. H. Kjeldsen: Exploiting residual information in the parameter choice for discrete ill-posed problems. BIT 46 (2006) 41-59.', fromMemory: true },
  ],
  usesNoiseLevel: false,
  fields: [],
  defaultSetting: { key: 'cumulative-periodogram' },
  conventions: [
    'The frequencies are the left singular vectors in the order of their singular values: frames of electrode voltages or views have no time axis to transform along. The source uses the discrete Fourier transform, which these vectors resemble in one dimension.',
    'Only components within the numerical rank count.',
    'Alpha: 80 points on a log scale between the smallest singular value (at least 1e-9 sigma_1) and sigma_1, the lowest one, then golden section. Truncated SVD: k up to the rank less two.',
  ],
  chooseAlpha(data, _noise, setting) {
    requireSetting(setting, 'cumulative-periodogram');
    const { low, high } = searchRange(data);
    const from = ln(low);
    const step = (ln(high) - from) / (gridPoints - 1);
    if (!(step > 0)) return { alpha: low, attained: false };
    const residual = new Float64Array(data.singularValues.length);
    const value = (u: number): number => tikhonovDistance(data, exp(u), residual);
    let best = 0;
    let bestValue = Infinity;
    for (let k = 0; k < gridPoints; k++) {
      const now = value(from + k * step);
      if (now < bestValue) {
        bestValue = now;
        best = k;
      }
    }
    const u = goldenSection(value, from + Math.max(0, best - 1) * step, from + Math.min(gridPoints - 1, best + 1) * step, 1e-8);
    return { alpha: exp(u), attained: best > 0 && best < gridPoints - 1 };
  },
  chooseIndex(data, _noise, setting, limit) {
    requireSetting(setting, 'cumulative-periodogram');
    const n = data.singularValues.length;
    const last = Math.max(1, Math.min(limit, n - 2));
    let index = 1;
    let bestValue = Infinity;
    const residual = data.coefficients.slice(0, n);
    for (let k = 1; k <= last; k++) {
      residual[k - 1] = 0;
      // White noise fills only what the solution leaves: the line starts after the k components taken.
      const value = periodogramDistance(residual.subarray(k)) / Math.sqrt(n - k);
      if (value < bestValue) {
        bestValue = value;
        index = k;
      }
    }
    return { index, attained: index < last };
  },
};
