/** Tail probabilities and quantiles that the tests need. Relative accuracy about 1e-12. */
import { exp, gammaln, ln, log1p } from '../core/math';
import { normalCdf } from '../core/normal';

/** Upper tail of chi-square with `degrees` > 0 (regularised incomplete gamma: series or continued fraction, Abramowitz and Stegun 6.5). */
export function chiSquareSurvival(x: number, degrees: number): number {
  if (x <= 0) return 1;
  const a = degrees / 2;
  const z = x / 2;
  const front = exp(a * ln(z) - z - gammaln(a));
  if (z < a + 1) {
    let term = 1 / a;
    let sum = term;
    for (let n = 1; n < 2000 && term > sum * 1e-17; n++) {
      term *= z / (a + n);
      sum += term;
    }
    return 1 - front * sum;
  }
  // Lentz's evaluation of the continued fraction.
  let b = z + 1 - a;
  let c = 1e300;
  let d = 1 / b;
  let h = d;
  for (let n = 1; n < 2000; n++) {
    const an = -n * (n - a);
    b += 2;
    d = 1 / (an * d + b);
    c = b + an / c;
    const step = d * c;
    h *= step;
    if (Math.abs(step - 1) < 1e-16) break;
  }
  return front * h;
}

/** Regularised incomplete beta function I_x(a, b) (continued fraction, Abramowitz and Stegun 26.5.8). */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const front = exp(gammaln(a + b) - gammaln(a) - gammaln(b) + a * ln(x) + b * log1p(-x)) / a;
  const tiny = 1e-300;
  let c = 1;
  let d = 1 - ((a + b) * x) / (a + 1);
  d = 1 / (Math.abs(d) < tiny ? tiny : d);
  let h = d;
  for (let m = 1; m < 2000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 + even * d;
    c = 1 + even / c;
    d = 1 / (Math.abs(d) < tiny ? tiny : d);
    c = Math.abs(c) < tiny ? tiny : c;
    h *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 + odd * d;
    c = 1 + odd / c;
    d = 1 / (Math.abs(d) < tiny ? tiny : d);
    c = Math.abs(c) < tiny ? tiny : c;
    const step = d * c;
    h *= step;
    if (Math.abs(step - 1) < 1e-16) break;
  }
  return front * h;
}

/** Upper tail of Fisher's F. */
export function fSurvival(x: number, degrees1: number, degrees2: number): number {
  return x <= 0 ? 1 : incompleteBeta(degrees2 / (degrees2 + degrees1 * x), degrees2 / 2, degrees1 / 2);
}

/**
 * Distribution function of the range of `count` standard normal values: k int phi(z) (Phi(z) - Phi(z - q))^(k-1) dz by the trapezoidal
 * rule, which converges geometrically for this integrand.
 */
export function normalRangeCdf(q: number, count: number): number {
  if (q <= 0) return 0;
  const from = -8;
  const to = 8 + q;
  const steps = Math.ceil((to - from) / 0.06);
  const width = (to - from) / steps;
  let sum = 0;
  for (let i = 0; i <= steps; i++) {
    const z = from + i * width;
    const inside = normalCdf(z) - normalCdf(z - q);
    let power = 1;
    for (let k = 1; k < count; k++) power *= inside;
    sum += exp(-0.5 * z * z) * power;
  }
  return (count * sum * width) / 2.5066282746310002;
}

const criticalValues = new Map<string, number>();

/**
 * Critical value of the Nemenyi test: upper quantile of the studentised range of k groups with infinite degrees of freedom, over
 * sqrt(2) (Demsar 2006, table 5).
 * @param count number of methods compared, 2 to 200
 * @param alpha significance level
 */
export function nemenyiCriticalValue(count: number, alpha: number): number {
  if (!(Number.isInteger(count) && count >= 2 && count <= 200)) throw new RangeError(`The Nemenyi test compares 2 to 200 methods, not ${count}.`);
  if (!(alpha > 0 && alpha < 1)) throw new RangeError(`A significance level lies between 0 and 1, not ${alpha}.`);
  const key = `${count} ${alpha}`;
  let value = criticalValues.get(key);
  if (value === undefined) {
    // Regula falsi (Illinois variant) on a bracket that holds every level between 1e-6 and 0.5.
    let low = 0.5;
    let high = 14;
    let fLow = normalRangeCdf(low, count) - (1 - alpha);
    let fHigh = normalRangeCdf(high, count) - (1 - alpha);
    let side = 0;
    let q = high;
    for (let i = 0; i < 200 && high - low > 1e-13 * high; i++) {
      const next = i % 3 === 2 ? 0.5 * (low + high) : (fLow * high - fHigh * low) / (fLow - fHigh);
      const f = normalRangeCdf(next, count) - (1 - alpha);
      q = next;
      if (f === 0) break;
      if (f > 0) {
        high = next;
        fHigh = f;
        if (side === 1) fLow /= 2;
        side = 1;
      } else {
        low = next;
        fLow = f;
        if (side === -1) fHigh /= 2;
        side = -1;
      }
    }
    value = q / Math.SQRT2;
    criticalValues.set(key, value);
  }
  return value;
}
