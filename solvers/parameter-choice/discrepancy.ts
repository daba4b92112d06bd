import { exp, ln } from '../core/math';
import { requireSetting, type ParameterRule } from './rule';
import { tikhonovResidual, truncationResiduals, type SpectralData } from './spectral-data';

/** Share of sigma_1 below which alpha is not searched: beyond it double precision has no digits of A^T A left. */
const smallestShare = 1e-10;

/**
 * Solves ||A z_alpha - y||^2 = target for ln(alpha^2) by Newton's method kept inside a bracket; the left side grows with alpha.
 * Cost: about ten sums over the spectrum.
 */
function solveResidual(data: SpectralData, target: number): number {
  const { singularValues: s, coefficients: c } = data;
  let low = 2 * ln(smallestShare * s[0]);
  let high = 2 * ln(1e8 * s[0]);
  let u = ln(s[0] * s[s.length - 1]);
  if (!(u > low && u < high)) u = 0.5 * (low + high);
  for (let iteration = 0; iteration < 120; iteration++) {
    const t = exp(u);
    let value = data.outside;
    let slope = 0;
    for (let i = 0; i < s.length; i++) {
      const q = 1 / (s[i] * s[i] + t);
      const r = t * q * c[i];
      value += r * r;
      slope += 2 * r * r * (s[i] * s[i] * q);
    }
    if (value > target) high = u;
    else low = u;
    // Newton on ln(value), close to linear in u over most of the range.
    let next = u - (value * ln(value / target)) / slope;
    if (!(next > low && next < high)) next = 0.5 * (low + high);
    if (Math.abs(next - u) <= 1e-14 * Math.max(1, Math.abs(u))) return next;
    u = next;
  }
  return u;
}

/** Morozov's discrepancy principle: the residual equals the safety factor times the norm of the noise drawn. */
export const discrepancyRule: ParameterRule = {
  key: 'discrepancy',
  name: 'Discrepancy principle',
  summary: 'The largest alpha (the smallest index, the first iterate) whose residual is within a safety factor times the norm of the noise. It is told the noise.',
  formula: '\\|A x_\\alpha - y^\\delta\\| = \\tau\\,\\|e\\|',
  sources: [{ short: 'Morozov 1966', full: 'V. A. Morozov: On the solution of functional equations by the method of regularization. Soviet Mathematics Doklady 7 (1966) 414-417.', fromMemory: true }],
  usesNoiseLevel: true,
  fields: [{
    name: 'safetyFactor', label: 'Safety factor', symbol: '\\tau', unit: '', kind: 'number', default: 1.05, minimum: 1, maximum: 10, scale: 'linear',
    help: 'Residual allowed, as a multiple of the noise. 1 uses the noise as it is; a little above guards against overfitting.',
  }],
  defaultSetting: { key: 'discrepancy', safetyFactor: 1.05 },
  conventions: [
    'The norm is that of the noise really drawn, not its expectation.',
    'Where the model itself cannot reach the noise (below the model-error floor) no alpha satisfies the rule: the smallest alpha the method allows is used.',
  ],
  chooseAlpha(data, noise, setting) {
    const { safetyFactor } = requireSetting(setting, 'discrepancy');
    const target = safetyFactor * safetyFactor * noise.norm * noise.norm;
    let all = data.outside;
    for (let i = 0; i < data.singularValues.length; i++) all += data.coefficients[i] * data.coefficients[i];
    if (all <= target) return { alpha: null, attained: true };
    const smallest = smallestShare * data.singularValues[0];
    if (tikhonovResidual(data, smallest) >= target) return { alpha: smallest, attained: false };
    return { alpha: exp(0.5 * solveResidual(data, target)), attained: true };
  },
  chooseIndex(data, noise, setting, limit) {
    const { safetyFactor } = requireSetting(setting, 'discrepancy');
    const target = safetyFactor * safetyFactor * noise.norm * noise.norm;
    const residuals = truncationResiduals(data, limit);
    for (let k = 0; k <= limit; k++) if (residuals[k] <= target) return { index: k, attained: true };
    return { index: limit, attained: false };
  },
};
