/**
 * Filters phi(s, alpha) of a linear problem in standard form: z = sum phi_k c_k / s_k. One implementation of the parameter rules for every
 * filter that is given by its complement g = 1 - phi.
 */
import { exp, ln } from '../core/math';
import type { Method, NoiseInfo, RuleSetting } from '../core/types';
import { goldenSection } from '../parameter-choice/golden-section';
import { searchRange, type SpectralData } from '../parameter-choice/spectral-data';

export interface SpectralFilter {
  /** g(s, alpha) = 1 - phi in [0, 1], growing with alpha. */
  complement(s: number, alpha: number): number;
  /** phi(s, alpha), without the cancellation of 1 - g where phi is small. */
  filter(s: number, alpha: number): number;
}

/** ||A z_alpha - y||^2. */
export function filteredResidual(data: SpectralData, filter: SpectralFilter, alpha: number): number {
  const { singularValues: s, coefficients: c } = data;
  let sum = 0;
  for (let k = 0; k < s.length; k++) {
    const r = filter.complement(s[k], alpha) * c[k];
    sum += r * r;
  }
  return sum + data.outside;
}

/** Share of sigma_1 below which the discrepancy is not searched, as for Tikhonov. */
const smallestShare = 1e-10;
const gridPoints = 80;

function atDiscrepancy(data: SpectralData, filter: SpectralFilter, target: number): number | null {
  const { singularValues: s, coefficients: c } = data;
  let all = data.outside;
  for (let k = 0; k < s.length; k++) all += c[k] * c[k];
  if (all <= target) return null;
  let low = ln(smallestShare * s[0]);
  if (filteredResidual(data, filter, exp(low)) >= target) return exp(low);
  let high = ln(1e8 * s[0]);
  // Bisection: the residual grows with alpha. 60 halvings of a width of 42 leave 4e-17.
  for (let step = 0; step < 60; step++) {
    const middle = 0.5 * (low + high);
    if (filteredResidual(data, filter, exp(middle)) > target) high = middle;
    else low = middle;
  }
  return exp(0.5 * (low + high));
}

function atCrossValidation(data: SpectralData, filter: SpectralFilter): number {
  const { low, high } = searchRange(data);
  const s = data.singularValues;
  const value = (u: number): number => {
    const alpha = exp(u);
    let free = data.dataSize - s.length;
    for (let k = 0; k < s.length; k++) free += filter.complement(s[k], alpha);
    return free > 0 ? filteredResidual(data, filter, alpha) / (free * free) : Infinity;
  };
  const from = ln(low);
  const step = (ln(high) - from) / (gridPoints - 1);
  if (!(step > 0)) return low;
  let best = 0;
  let bestValue = Infinity;
  for (let k = 0; k < gridPoints; k++) {
    const now = value(from + k * step);
    if (now < bestValue) {
      bestValue = now;
      best = k;
    }
  }
  return exp(goldenSection(value, from + Math.max(0, best - 1) * step, from + Math.min(gridPoints - 1, best + 1) * step, 1e-8));
}

/** Rules that work for any filter. */
export const filterRules: Method['capabilities']['rules'] = ['discrepancy', 'gcv', 'fixed'];

/**
 * alpha by a rule of `filterRules`; null where the zero solution is within the noise.
 * @throws RangeError for another rule
 */
export function chooseFilterAlpha(data: SpectralData, filter: SpectralFilter, noise: NoiseInfo, setting: RuleSetting): number | null {
  if (setting.key === 'fixed') return setting.value * data.singularValues[0];
  if (setting.key === 'gcv') return atCrossValidation(data, filter);
  if (setting.key !== 'discrepancy') throw new RangeError(`The rule '${setting.key}' does not serve filters of this kind.`);
  return atDiscrepancy(data, filter, setting.safetyFactor * setting.safetyFactor * noise.norm * noise.norm);
}
