/** Kernels of the exact proximal step of a quadratic data term through the SVD of the derivative. */

/** a_k = <row k of basis, h> for k < count; four rows at a time, each summed in ascending order. */
export function coordinatesIn(basis: Float64Array, n: number, h: Float64Array, count: number, a: Float64Array): void {
  let k = 0;
  for (; k + 3 < count; k += 4) {
    const r0 = k * n;
    const r1 = r0 + n;
    const r2 = r1 + n;
    const r3 = r2 + n;
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    let s3 = 0;
    for (let j = 0; j < n; j++) {
      const value = h[j];
      s0 += basis[r0 + j] * value;
      s1 += basis[r1 + j] * value;
      s2 += basis[r2 + j] * value;
      s3 += basis[r3 + j] * value;
    }
    a[k] = s0;
    a[k + 1] = s1;
    a[k + 2] = s2;
    a[k + 3] = s3;
  }
  for (; k < count; k++) {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += basis[k * n + j] * h[j];
    a[k] = sum;
  }
}

/** out += sum over k < count of d_k times row k of basis, ascending k for every entry. */
export function addExpansion(basis: Float64Array, n: number, d: Float64Array, count: number, out: Float64Array): void {
  let k = 0;
  for (; k + 3 < count; k += 4) {
    const d0 = d[k];
    const d1 = d[k + 1];
    const d2 = d[k + 2];
    const d3 = d[k + 3];
    const r0 = k * n;
    const r1 = r0 + n;
    const r2 = r1 + n;
    const r3 = r2 + n;
    for (let j = 0; j < n; j++) out[j] = out[j] + d0 * basis[r0 + j] + d1 * basis[r1 + j] + d2 * basis[r2 + j] + d3 * basis[r3 + j];
  }
  for (; k < count; k++) {
    const dk = d[k];
    const row = k * n;
    for (let j = 0; j < n; j++) out[j] += dk * basis[row + j];
  }
}

/**
 * Multiplier mu >= 0 of the projection onto {||S z - c||^2 <= bound}: sum (e_k / (1 + mu s_k^2))^2 = bound, or 0 where the point
 * lies inside. Newton on 1 / sqrt(sum) (Hebden 1973; nearly linear in mu) inside a bracket.
 * @param e residual coefficients before the projection
 * @param start where to begin, the multiplier of the last step
 * @returns Infinity where the bound is not positive
 */
export function ballMultiplier(s: Float64Array, e: Float64Array, count: number, bound: number, start: number): number {
  let inside = 0;
  for (let k = 0; k < count; k++) inside += e[k] * e[k];
  if (inside <= bound) return 0;
  if (!(bound > 0)) return Infinity;
  const goal = 1 / Math.sqrt(bound);
  let low = 0;
  let high = Infinity;
  let mu = start > 0 ? start : 1 / (s[0] * s[0]);
  for (let iteration = 0; iteration < 100; iteration++) {
    let value = 0;
    let slope = 0;
    for (let k = 0; k < count; k++) {
      const q = 1 / (1 + mu * s[k] * s[k]);
      const r = e[k] * q;
      value += r * r;
      slope += r * r * s[k] * s[k] * q;
    }
    const root = Math.sqrt(value);
    const now = 1 / root;
    if (now < goal) low = mu;
    else high = mu;
    let next = mu + ((goal - now) * value * root) / slope;
    if (!(next > low && next < high)) next = high === Infinity ? 4 * mu : 0.5 * (low + high);
    if (Math.abs(next - mu) <= 1e-12 * mu) return next;
    mu = next;
  }
  return mu;
}
