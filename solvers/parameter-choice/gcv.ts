import { exp, ln } from '../core/math';
import { goldenSection } from './golden-section';
import { requireSetting, type ParameterRule } from './rule';
import { searchRange, truncationResiduals, type SpectralData } from './spectral-data';

/** ||r||^2 / (m - sum of filter factors)^2 at alpha^2 = a. */
function gcvFunction(data: SpectralData, a: number): number {
  const { singularValues: s, coefficients: c } = data;
  let residual = data.outside;
  let free = data.dataSize - s.length;
  for (let i = 0; i < s.length; i++) {
    const g = a / (s[i] * s[i] + a);
    const r = g * c[i];
    residual += r * r;
    free += g;
  }
  return residual / (free * free);
}

const gridPoints = 80;

/** Generalised cross-validation. */
export const gcvRule: ParameterRule = {
  key: 'gcv',
  name: 'Generalised cross-validation',
  summary: 'Predicts each datum from the others in a rotation-invariant way and takes the parameter with the smallest mean square error. It is not told the noise.',
  formula: '\\min_\\alpha\\; \\frac{\\|A x_\\alpha - y\\|^2}{\\bigl(m - \\sum_i \\sigma_i^2/(\\sigma_i^2+\\alpha^2)\\bigr)^2}',
  sources: [{ short: 'Golub, Heath, Wahba 1979', full: 'G. H. Golub, M. Heath, G. Wahba: Generalized cross-validation as a method for choosing a good ridge parameter. Technometrics 21 (1979) 215-223.', fromMemory: true }],
  usesNoiseLevel: false,
  fields: [],
  defaultSetting: { key: 'gcv' },
  conventions: [
    'Alpha is searched between the smallest singular value (at least 1e-9 sigma_1) and sigma_1: 80 points on a log scale, then golden section.',
    'Truncated SVD searches k up to half the number of data: beyond it the function is known to pick noise.',
  ],
  chooseAlpha(data, _noise, setting) {
    requireSetting(setting, 'gcv');
    const { low, high } = searchRange(data);
    const from = 2 * ln(low);
    const step = (2 * ln(high) - from) / (gridPoints - 1);
    if (!(step > 0)) return { alpha: low, attained: false };
    let best = 0;
    let bestValue = Infinity;
    for (let k = 0; k < gridPoints; k++) {
      const value = gcvFunction(data, exp(from + k * step));
      if (value < bestValue) {
        bestValue = value;
        best = k;
      }
    }
    const u = goldenSection((x) => gcvFunction(data, exp(x)), from + Math.max(0, best - 1) * step, from + Math.min(gridPoints - 1, best + 1) * step, 1e-8);
    return { alpha: exp(0.5 * u), attained: best > 0 && best < gridPoints - 1 };
  },
  chooseIndex(data, _noise, setting, limit) {
    requireSetting(setting, 'gcv');
    const last = Math.min(limit, Math.floor(data.dataSize / 2));
    const residuals = truncationResiduals(data, last);
    let index = 1;
    let bestValue = Infinity;
    for (let k = 1; k <= last; k++) {
      const free = data.dataSize - k;
      const value = residuals[k] / (free * free);
      if (value < bestValue) {
        bestValue = value;
        index = k;
      }
    }
    return { index, attained: index < last };
  },
};
