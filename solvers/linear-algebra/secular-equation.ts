/**
 * Singular values of the arrow matrix with first row z and diagonal 0 = d_0 < d_1 < ...: roots of
 * 1 + sum of z_j^2 / (d_j^2 - s^2), one in each interval (Gu and Eisenstat 1995, SIAM J. Matrix Anal. Appl. 16, 79-92; rational
 * steps after Li 1993).
 */
export interface ArrowRoots {
  readonly values: Float64Array;
  /** d_j^2 - s_i^2 without cancellation, row i for root i. */
  readonly gaps: Float64Array;
}

const epsilon = 2.220446049250313e-16;

export function arrowRoots(d: Float64Array, z: Float64Array, n: number): ArrowRoots {
  const values = new Float64Array(n);
  const gaps = new Float64Array(n * n);
  const squares = new Float64Array(n);
  let all = 0;
  for (let j = 0; j < n; j++) {
    squares[j] = z[j] * z[j];
    all += squares[j];
  }
  const delta = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const last = i === n - 1;
    // Half the interval in s^2, from the pole on the left.
    const half = last ? all : 0.5 * (d[i + 1] - d[i]) * (d[i + 1] + d[i]);
    let shift = i;
    if (!last) {
      let f = 1;
      for (let j = 0; j < n; j++) f += squares[j] / ((d[j] - d[i]) * (d[j] + d[i]) - half);
      if (f < 0) shift = i + 1;
    }
    const pole = d[shift];
    for (let j = 0; j < n; j++) delta[j] = (d[j] - pole) * (d[j] + pole);
    const x = rootNear(delta, squares, n, i, shift === i ? 0 : -half, shift === i ? half : 0);
    values[i] = Math.sqrt(pole * pole + x);
    for (let j = 0; j < n; j++) gaps[i * n + j] = delta[j] - x;
  }
  return { values, gaps };
}

/** The root between the poles i and i + 1, inside (low, high), where one end is the pole at 0. */
function rootNear(delta: Float64Array, squares: Float64Array, n: number, i: number, low: number, high: number): number {
  const last = i === n - 1;
  let x = 0.5 * (low + high);
  for (let step = 0; step < 200; step++) {
    let below = 0, belowSlope = 0, above = 0, aboveSlope = 0;
    for (let j = 0; j <= i; j++) {
      const t = 1 / (delta[j] - x);
      const part = squares[j] * t;
      below += part;
      belowSlope += part * t;
    }
    for (let j = n - 1; j > i; j--) {
      const t = 1 / (delta[j] - x);
      const part = squares[j] * t;
      above += part;
      aboveSlope += part * t;
    }
    const f = 1 + below + above;
    if (Math.abs(f) <= epsilon * (8 * (1 + above - below) + Math.abs(x) * (belowSlope + aboveSlope))) return x;
    if (f > 0) high = x;
    else low = x;
    const left = delta[i] - x;
    let next: number;
    if (last) {
      // One pole: 1 + a + b / (pole - x), fitted to value and slope.
      const rest = 1 + below - belowSlope * left;
      next = x + left + (belowSlope * left * left) / rest;
    } else {
      const right = delta[i + 1] - x;
      const c = 1 + (below - belowSlope * left) + (above - aboveSlope * right);
      const a = c * (left + right) + belowSlope * left * left + aboveSlope * right * right;
      const b = left * right * f;
      const root = Math.sqrt(Math.max(0, a * a - 4 * c * b));
      next = x + (a <= 0 ? (a - root) / (2 * c) : (2 * b) / (a + root));
    }
    if (!(next > low && next < high)) next = 0.5 * (low + high);
    if (next === x || next === low || next === high) return next === 0 ? x : next;
    x = next;
  }
  return x;
}
