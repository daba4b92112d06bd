import { describe, expect, it } from 'vitest';
import { discrepancyRule } from '../../../solvers/parameter-choice/discrepancy';
import { gcvRule } from '../../../solvers/parameter-choice/gcv';
import { lCurveCurvature, lCurveRule } from '../../../solvers/parameter-choice/l-curve';
import { fixedRule } from '../../../solvers/parameter-choice/fixed';
import { cumulativePeriodogramRule } from '../../../solvers/parameter-choice/cumulative-periodogram';
import { quasiOptimality, quasiOptimalityRule } from '../../../solvers/parameter-choice/quasi-optimality';
import quasi from '../../reference/quasi-optimality.json';
import { tikhonovResidual } from '../../../solvers/parameter-choice/spectral-data';
import { cglsInCoefficients } from '../../../solvers/methods/cgls';
import { caseSpectrum, expandCase, regularisation } from '../../support/regularisation-case';

const relative = (a: number, b: number): number => Math.abs(a - b) / Math.abs(b);
function relativeDistance(x: ArrayLike<number>, y: ArrayLike<number>): number {
  let difference = 0;
  let size = 0;
  for (let i = 0; i < y.length; i++) {
    difference += (x[i] - y[i]) ** 2;
    size += y[i] ** 2;
  }
  return Math.sqrt(difference / size);
}
const noNoise = { norm: 0, level: 0 };
const { tolerance } = regularisation;

// Values computed with numpy 1.24.2 and scipy 1.10.1 on a listed matrix and on Shaw 1972; tolerances and their reasons are in the file.
describe.each(regularisation.cases.map((item) => [item.id, item] as const))('%s', (_, item) => {
  const { data, v, r, n } = caseSpectrum(item);
  const { values } = item;
  const s = data.singularValues;

  it('has the singular values of numpy', () => {
    values.singular_values.forEach((value, i) => expect(Math.abs(s[i] - value)).toBeLessThan(1e-13 * s[0]));
  });
  it.each(Object.entries(values.tikhonov))('Tikhonov at alpha = %s', (alphaText, expected) => {
    const alpha = Number(alphaText);
    const x = expandCase(v, r, n, s.map((sigma, k) => (sigma / (sigma * sigma + alpha * alpha)) * data.coefficients[k]));
    expect(relativeDistance(x, expected.x)).toBeLessThan(tolerance.solutions.relative);
    expect(relative(Math.sqrt(tikhonovResidual(data, alpha)), expected.residual)).toBeLessThan(tolerance.solutions.relative);
  });
  it.each(Object.entries(values.tsvd))('truncated SVD at k = %s', (k, expected) => {
    const x = expandCase(v, r, n, Array.from({ length: Number(k) }, (__, i) => data.coefficients[i] / s[i]));
    expect(relativeDistance(x, expected.x)).toBeLessThan(tolerance.solutions.relative);
  });
  it.each(Object.entries(values.cgls))('CGLS after %s steps', (steps, expected) => {
    const { z, iterations, residual } = cglsInCoefficients(s, data.coefficients, data.outside, 0, Number(steps));
    expect(iterations).toBe(Number(steps));
    expect(relativeDistance(expandCase(v, r, n, z), expected.x)).toBeLessThan(tolerance.cgls.relative);
    expect(relative(Math.sqrt(residual), expected.residual)).toBeLessThan(tolerance.cgls.relative);
  });
  it('generalised cross-validation', () => {
    expect(relative(gcvRule.chooseAlpha(data, noNoise, { key: 'gcv' }).alpha!, values.gcv_alpha)).toBeLessThan(tolerance.gcv.relative);
    expect(gcvRule.chooseIndex(data, noNoise, { key: 'gcv' }, r).index).toBe(values.gcv_tsvd_k_up_to_half);
  });
  it('discrepancy principle', () => {
    const { alpha, attained } = discrepancyRule.chooseAlpha(data, { norm: values.discrepancy.delta, level: 0 }, { key: 'discrepancy', safetyFactor: values.discrepancy.tau });
    expect(attained).toBe(true);
    expect(relative(alpha!, values.discrepancy.alpha)).toBeLessThan(tolerance.discrepancy.relative);
  });
  it('L-curve corner of largest curvature', () => {
    const { alpha } = lCurveRule.chooseAlpha(data, noNoise, { key: 'l-curve' });
    expect(relative(alpha!, values.lcurve.alpha)).toBeLessThan(tolerance.lCurve.relative);
    expect(relative(lCurveCurvature(data, alpha!), values.lcurve.curvature)).toBeLessThan(tolerance.lCurve.relative);
  });
});

// Tikhonov and Glasko 1965, minimised by scipy (make-quasi-optimality.py); tolerances and their reasons are in the file.
describe.each(quasi.cases)('quasi-optimality, $id', ({ id, alpha: expected, value }) => {
  const { data, r } = caseSpectrum(regularisation.cases.find((item) => item.id === id)!);
  it('finds the alpha of scipy', () => {
    const { alpha, attained } = quasiOptimalityRule.chooseAlpha(data, noNoise, { key: 'quasi-optimality' });
    expect(attained).toBe(true);
    expect(relative(alpha!, expected)).toBeLessThan(quasi.tolerance.alpha);
    expect(relative(quasiOptimality(data, alpha!), value)).toBeLessThan(quasi.tolerance.value);
  });
  it('takes the index with the smallest last component of truncated SVD', () => {
    const { index } = quasiOptimalityRule.chooseIndex(data, noNoise, { key: 'quasi-optimality' }, r);
    const components = Array.from(data.singularValues.subarray(0, Math.floor(data.dataSize / 2)), (s, k) => Math.abs(data.coefficients[k] / s));
    expect(index).toBe(components.indexOf(Math.min(...components)) + 1);
  });
});

describe('rules at their edges', () => {
  const { data, r } = caseSpectrum(regularisation.cases[0]);
  const discrepancy = { key: 'discrepancy', safetyFactor: 1 } as const;
  it('gives the zero solution where the data are within the noise', () => {
    expect(discrepancyRule.chooseAlpha(data, { norm: 1e3, level: 1 }, discrepancy)).toEqual({ alpha: null, attained: true });
    expect(discrepancyRule.chooseIndex(data, { norm: 1e3, level: 1 }, discrepancy, r)).toEqual({ index: 0, attained: true });
  });
  it('says that a residual below the reach of the model is not attained', () => {
    const unreachable = { ...data, outside: 1 };
    expect(discrepancyRule.chooseAlpha(unreachable, { norm: 0.5, level: 0.1 }, discrepancy).attained).toBe(false);
    expect(discrepancyRule.chooseIndex(unreachable, { norm: 0.5, level: 0.1 }, discrepancy, r)).toEqual({ index: r, attained: false });
  });
  it('takes the smallest index whose residual is within the noise', () => {
    const { index } = discrepancyRule.chooseIndex(data, { norm: 0.5, level: 0 }, discrepancy, r);
    let residual = data.outside;
    for (let k = r - 1; k >= index; k--) residual += data.coefficients[k] ** 2;
    expect(Math.sqrt(residual)).toBeLessThanOrEqual(0.5);
    expect(Math.sqrt(residual + data.coefficients[index - 1] ** 2)).toBeGreaterThan(0.5);
  });
  it('a fixed alpha is a share of the largest singular value; a fixed index is cut at the rank', () => {
    expect(fixedRule.chooseAlpha(data, noNoise, { key: 'fixed', value: 0.1 }).alpha).toBe(0.1 * data.singularValues[0]);
    expect(fixedRule.chooseIndex(data, noNoise, { key: 'fixed', value: 500 }, r)).toEqual({ index: r, attained: false });
  });
  it('refuses the setting of another rule', () => {
    expect(() => gcvRule.chooseAlpha(data, noNoise, { key: 'l-curve' })).toThrow(RangeError);
  });
});

// Hansen, Kilmer, Kjeldsen 2006, with the left singular vectors as frequencies: the definition evaluated directly, by brute force.
describe.each(regularisation.cases.map((item) => [item.id, item] as const))('normalised cumulative periodogram, %s', (_, item) => {
  const { data, r } = caseSpectrum(item);
  const distanceOf = (residual: number[]): number => {
    const whole = residual.reduce((sum, v) => sum + v * v, 0);
    let partial = 0;
    return Math.hypot(...residual.map((v, i) => (partial += v * v) / whole - (i + 1) / residual.length));
  };
  const at = (alpha: number): number => distanceOf(Array.from(data.singularValues, (s, i) => ((alpha * alpha) / (s * s + alpha * alpha)) * data.coefficients[i]));
  it('has a smaller distance than every alpha of a fine grid, up to the width of the grid', () => {
    const { alpha } = cumulativePeriodogramRule.chooseAlpha(data, noNoise, { key: 'cumulative-periodogram' });
    const s = data.singularValues;
    const low = Math.max(s[s.length - 1], 1e-9 * s[0]);
    let least = Infinity;
    for (let k = 0; k <= 2000; k++) least = Math.min(least, at(low * (s[0] / low) ** (k / 2000)));
    expect(at(alpha!)).toBeLessThanOrEqual(least * 1.01);
  });
  it('takes the truncation whose remaining coefficients look whitest', () => {
    const { index } = cumulativePeriodogramRule.chooseIndex(data, noNoise, { key: 'cumulative-periodogram' }, r);
    const c = Array.from(data.coefficients.subarray(0, r));
    const values = Array.from({ length: Math.max(1, Math.min(r, r - 2)) }, (__, k) => distanceOf(c.slice(k + 1)) / Math.sqrt(r - k - 1));
    expect(index).toBe(values.indexOf(Math.min(...values)) + 1);
  });
});
