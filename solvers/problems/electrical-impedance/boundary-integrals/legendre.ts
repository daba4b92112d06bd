import { cos, ln } from '../../../core/math';

/** Gauss-Legendre rule on (-1, 1) with the tables that products with a logarithm need. */
export interface GaussRule {
  readonly n: number;
  /** Ascending. */
  readonly points: Float64Array;
  readonly weights: Float64Array;
  /** (2k + 1)/2 P_k(s_j) w_j, entry k n + j: takes values at the points to Legendre coefficients. */
  readonly toCoefficients: Float64Array;
}

const rules = new Map<number, GaussRule>();

/** The rule with n points, exact for polynomials below degree 2n. */
export function gaussRule(n: number): GaussRule {
  const known = rules.get(n);
  if (known) return known;
  const points = new Float64Array(n);
  const weights = new Float64Array(n);
  const values = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) {
    // Newton's method from the usual first guess.
    let x = -cos((Math.PI * (i + 0.75)) / (n + 0.5));
    const slopeAtX = (): number => {
      legendre(x, n + 1, values);
      return (n * (values[n - 1] - x * values[n])) / (1 - x * x);
    };
    for (let step = 0; step < 8; step++) {
      const slope = slopeAtX();
      x -= values[n] / slope;
    }
    const slope = slopeAtX();
    points[i] = x;
    weights[i] = 2 / ((1 - x * x) * slope * slope);
  }
  const toCoefficients = new Float64Array(n * n);
  for (let j = 0; j < n; j++) {
    legendre(points[j], n, values);
    for (let k = 0; k < n; k++) toCoefficients[k * n + j] = (k + 0.5) * values[k] * weights[j];
  }
  const rule = { n, points, weights, toCoefficients };
  rules.set(n, rule);
  return rule;
}

/** P_0 .. P_(count - 1) at x. */
export function legendre(x: number, count: number, out: Float64Array): void {
  out[0] = 1;
  if (count > 1) out[1] = x;
  for (let k = 1; k + 1 < count; k++) out[k + 1] = ((2 * k + 1) * x * out[k] - k * out[k - 1]) / (k + 1);
}

/** Weights that take values at the points of a rule to the value at x of the polynomial through them. */
export function interpolationWeights(rule: GaussRule, x: number, out: Float64Array): void {
  const { n, toCoefficients } = rule;
  const values = new Float64Array(n);
  legendre(x, n, values);
  for (let j = 0; j < n; j++) {
    let sum = 0;
    for (let k = 0; k < n; k++) sum += toCoefficients[k * n + j] * values[k];
    out[j] = sum;
  }
}

/** Beyond this the plain rule integrates the logarithm: the error of n points is about 5.8^(-2n). */
export const nearLimit = 3;
/** Up to here the recurrence is stable enough upwards, beyond it downwards. */
const upwardLimit = 1.05;
/** Where the downward recurrence starts: its error is about (t + sqrt(t^2 - 1))^(-2 (start - k)). */
const downwardStart = 90;

const q = new Float64Array(downwardStart + 2);
const moments = new Float64Array(downwardStart);

/**
 * Weights of the rule for the integral over (-1, 1) of ln|t - s| f(s) ds, exact for polynomials f below degree n. The integral of
 * P_k is 2 (Q_(k+1) - Q_(k-1)) / (2k + 1), Q_k the Legendre functions of the second kind (Neumann's integral and one integration
 * by parts; Abramowitz and Stegun 1964, chapter 8).
 * @param t any real number; at the ends the limit is taken
 */
export function logarithmWeights(rule: GaussRule, t: number, out: Float64Array): void {
  const { n, points, weights, toCoefficients } = rule;
  if (Math.abs(t) > nearLimit) {
    for (let j = 0; j < n; j++) out[j] = weights[j] * ln(Math.abs(t - points[j]));
    return;
  }
  const gap = Math.abs(Math.abs(t) - 1);
  const x = gap < 1e-15 ? Math.sign(t) * (1 - 2e-15) : t;
  const left = Math.abs(1 + x);
  const right = Math.abs(1 - x);
  const lnLeft = ln(left);
  const lnRight = ln(right);
  q[0] = 0.5 * (lnLeft - lnRight);
  if (Math.abs(x) <= upwardLimit) {
    q[1] = x * q[0] - 1;
    for (let k = 1; k < n; k++) q[k + 1] = ((2 * k + 1) * x * q[k] - k * q[k - 1]) / (k + 1);
  } else {
    // Miller's downward recurrence, scaled by Q_0.
    const first = q[0];
    q[downwardStart + 1] = 0;
    q[downwardStart] = 1e-150;
    for (let k = downwardStart; k > 0; k--) q[k - 1] = ((2 * k + 1) * x * q[k] - (k + 1) * q[k + 1]) / k;
    const scale = first / q[0];
    for (let k = 0; k <= n; k++) q[k] *= scale;
  }
  moments[0] = (1 + x) * lnLeft + (1 - x) * lnRight - 2;
  for (let k = 1; k < n; k++) moments[k] = (2 * (q[k + 1] - q[k - 1])) / (2 * k + 1);
  for (let j = 0; j < n; j++) {
    let sum = 0;
    for (let k = 0; k < n; k++) sum += toCoefficients[k * n + j] * moments[k];
    out[j] = sum;
  }
}
