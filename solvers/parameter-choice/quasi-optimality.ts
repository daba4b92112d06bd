import { exp, ln } from '../core/math';
import { goldenSection } from './golden-section';
import { requireSetting, type ParameterRule } from './rule';
import { searchRange, type SpectralData } from './spectral-data';

const gridPoints = 160;

/** ||alpha dz_alpha / d alpha|| / 2: the square root of sum (a s_k c_k / (s_k^2 + a)^2)^2, a = alpha^2. */
export function quasiOptimality(data: SpectralData, alpha: number): number {
  const { singularValues: s, coefficients: c } = data;
  const a = alpha * alpha;
  let sum = 0;
  for (let k = 0; k < s.length; k++) {
    const q = 1 / (s[k] * s[k] + a);
    const d = a * q * (s[k] * q * c[k]);
    sum += d * d;
  }
  return Math.sqrt(sum);
}

/** The parameter at which the solution changes least. */
export const quasiOptimalityRule: ParameterRule = {
  key: 'quasi-optimality',
  name: 'Quasi-optimality',
  summary: 'The parameter at which the solution changes least on a logarithmic scale. It is not told the noise.',
  formula: '\\min_\\alpha\\; \\Bigl\\|\\alpha \\frac{\\mathrm d z_\\alpha}{\\mathrm d \\alpha}\\Bigr\\|, \\qquad \\min_k\\; \\frac{|u_k^{\\mathsf T} y|}{\\sigma_k}',
  sources: [
    { short: 'Tikhonov and Glasko 1965', full: 'A. N. Tikhonov, V. B. Glasko. USSR Computational Mathematics and Mathematical Physics 5 (1965) 93-107.', fromMemory: true },
    { short: 'Hansen 1992', full: 'P. C. Hansen. SIAM Review 34 (1992) 561-580 (the function for truncated SVD).', fromMemory: true },
  ],
  usesNoiseLevel: false,
  fields: [],
  defaultSetting: { key: 'quasi-optimality' },
  conventions: [
    'The function has several local minima: the lowest one inside the range is taken, by 160 points on a log scale between the smallest singular value (at least 1e-9 sigma_1) and sigma_1, then golden section. Without one inside, the lower end of the two.',
    'Truncated SVD takes the k with the smallest last component, searched up to half the number of data.',
  ],
  chooseAlpha(data, _noise, setting) {
    requireSetting(setting, 'quasi-optimality');
    const { low, high } = searchRange(data);
    const from = ln(low);
    const step = (ln(high) - from) / (gridPoints - 1);
    if (!(step > 0)) return { alpha: low, attained: false };
    const value = new Float64Array(gridPoints);
    for (let k = 0; k < gridPoints; k++) value[k] = quasiOptimality(data, exp(from + k * step));
    let best = -1;
    for (let k = 1; k < gridPoints - 1; k++) if (value[k] <= value[k - 1] && value[k] <= value[k + 1] && (best < 0 || value[k] < value[best])) best = k;
    if (best < 0) return { alpha: value[0] <= value[gridPoints - 1] ? low : high, attained: false };
    return { alpha: exp(goldenSection((u) => quasiOptimality(data, exp(u)), from + (best - 1) * step, from + (best + 1) * step, 1e-8)), attained: true };
  },
  chooseIndex(data, _noise, setting, limit) {
    requireSetting(setting, 'quasi-optimality');
    const { singularValues: s, coefficients: c } = data;
    const last = Math.min(limit, Math.max(1, Math.floor(data.dataSize / 2)));
    let index = 1;
    for (let k = 2; k <= last; k++) if (Math.abs(c[k - 1] / s[k - 1]) < Math.abs(c[index - 1] / s[index - 1])) index = k;
    return { index, attained: index < last };
  },
};
