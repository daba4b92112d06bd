import { exp, ln } from '../core/math';
import { goldenSection } from './golden-section';
import { requireSetting, type ParameterRule } from './rule';
import { searchRange, truncationResiduals, type SpectralData } from './spectral-data';

const gridPoints = 160;

/**
 * Curvature of (ln ||A z - y||, ln ||z||) at alpha in closed form, positive at the corner. With rho = ||A z - y||^2, eta = ||z||^2 and
 * d rho = -alpha^2 d eta it is
 * kappa = -2 (eta rho / eta') (alpha^2 eta' rho + 2 alpha eta rho + alpha^4 eta eta') / (alpha^4 eta^2 + rho^2)^(3/2).
 */
export function lCurveCurvature(data: SpectralData, alpha: number): number {
  const { singularValues: s, coefficients: c } = data;
  const a = alpha * alpha;
  let rho = data.outside;
  let eta = 0;
  let slope = 0;
  for (let i = 0; i < s.length; i++) {
    const q = 1 / (s[i] * s[i] + a);
    const z = s[i] * q * c[i];
    const g = a * q;
    const r = g * c[i];
    rho += r * r;
    eta += z * z;
    slope += g * z * z;
  }
  if (eta === 0 || rho === 0 || slope === 0) return 0;
  slope *= -4 / alpha;
  const base = a * a * eta * eta + rho * rho;
  return (-2 * ((eta * rho) / slope) * (a * slope * rho + 2 * alpha * eta * rho + a * a * eta * slope)) / (base * Math.sqrt(base));
}

/** Second derivatives at the knots 0, 1, 2, ... of the natural cubic spline through `y`. */
function splineSecondDerivatives(y: Float64Array): Float64Array {
  const n = y.length;
  const second = new Float64Array(n);
  const work = new Float64Array(n);
  for (let i = 1; i < n - 1; i++) {
    const p = 0.5 * second[i - 1] + 2;
    second[i] = -0.5 / p;
    work[i] = (3 * (y[i + 1] - 2 * y[i] + y[i - 1]) - 0.5 * work[i - 1]) / p;
  }
  second[n - 1] = 0;
  for (let i = n - 2; i >= 0; i--) second[i] = second[i] * second[i + 1] + work[i];
  second[0] = 0;
  return second;
}

/** First derivative at knot i of that spline. */
function splineSlope(y: Float64Array, second: Float64Array, i: number): number {
  return i < y.length - 1 ? y[i + 1] - y[i] - second[i] / 3 - second[i + 1] / 6 : y[i] - y[i - 1] + second[i] / 3 + second[i - 1] / 6;
}

/** The corner of the L-curve. */
export const lCurveRule: ParameterRule = {
  key: 'l-curve',
  name: 'L-curve corner',
  summary: 'The point of largest curvature of the log-log curve of solution norm against residual norm. It is not told the noise.',
  formula: '\\max_\\alpha\\; \\kappa\\bigl(\\ln\\|A x_\\alpha - y\\|,\\ \\ln\\|L x_\\alpha\\|\\bigr)',
  sources: [{ short: 'Hansen 1992', full: 'P. C. Hansen: Analysis of discrete ill-posed problems by means of the L-curve. SIAM Review 34 (1992) 561-580.', fromMemory: true }],
  usesNoiseLevel: false,
  fields: [],
  defaultSetting: { key: 'l-curve' },
  conventions: [
    'The curve can have several corners: the one of largest curvature is taken.',
    'For a continuous alpha the curvature is exact (no spline): 160 points on a log scale between the smallest singular value (at least 1e-9 sigma_1) and sigma_1, then golden section.',
    'For a truncation index a natural cubic spline runs through the log-log points with the index as its parameter, k up to half the number of data.',
  ],
  chooseAlpha(data, _noise, setting) {
    requireSetting(setting, 'l-curve');
    const { low, high } = searchRange(data);
    const from = ln(low);
    const step = (ln(high) - from) / (gridPoints - 1);
    if (!(step > 0)) return { alpha: low, attained: false };
    const curvature = new Float64Array(gridPoints);
    for (let k = 0; k < gridPoints; k++) curvature[k] = lCurveCurvature(data, exp(from + k * step));
    let best = -1;
    for (let k = 1; k < gridPoints - 1; k++)
      if (curvature[k] >= curvature[k - 1] && curvature[k] >= curvature[k + 1] && (best < 0 || curvature[k] > curvature[best])) best = k;
    if (best < 0) return { alpha: curvature[0] >= curvature[gridPoints - 1] ? low : high, attained: false };
    const u = goldenSection((x) => -lCurveCurvature(data, exp(x)), from + (best - 1) * step, from + (best + 1) * step, 1e-8);
    return { alpha: exp(u), attained: true };
  },
  chooseIndex(data, _noise, setting, limit) {
    requireSetting(setting, 'l-curve');
    const { singularValues: s, coefficients: c } = data;
    const last = Math.min(limit, Math.floor(data.dataSize / 2));
    const residuals = truncationResiduals(data, last);
    // Points k = 1 ... count, as long as the residual is positive and the solution not zero.
    const logResidual: number[] = [];
    const logSolution: number[] = [];
    let eta = 0;
    let firstIndex = 0;
    for (let k = 1; k <= last; k++) {
      const z = c[k - 1] / s[k - 1];
      eta += z * z;
      if (eta === 0) continue;
      if (residuals[k] <= 0) break;
      if (firstIndex === 0) firstIndex = k;
      logResidual.push(0.5 * ln(residuals[k]));
      logSolution.push(0.5 * ln(eta));
    }
    if (logResidual.length < 3) return { index: Math.max(1, Math.min(last, firstIndex + logResidual.length - 1)), attained: false };
    const x = Float64Array.from(logResidual);
    const y = Float64Array.from(logSolution);
    const x2 = splineSecondDerivatives(x);
    const y2 = splineSecondDerivatives(y);
    let index = firstIndex;
    let bestValue = -Infinity;
    for (let i = 1; i < x.length - 1; i++) {
      const dx = splineSlope(x, x2, i);
      const dy = splineSlope(y, y2, i);
      const speed = dx * dx + dy * dy;
      if (speed === 0) continue;
      // With growing k the residual falls, so the curve is walked from right to left: convex (a corner) is x'' y' - x' y'' > 0.
      const value = (x2[i] * dy - dx * y2[i]) / (speed * Math.sqrt(speed));
      if (value > bestValue) {
        bestValue = value;
        index = firstIndex + i;
      }
    }
    return { index, attained: bestValue > 0 };
  },
};
