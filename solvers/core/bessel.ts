/**
 * Bessel functions J_0(x) ... J_n(x) for x >= 0 by downward recurrence (J. C. P. Miller), normalised with J_0 + 2 J_2 + 2 J_4 + ... = 1.
 * Absolute error about 1e-15. M. Abramowitz, I. Stegun, Handbook of Mathematical Functions (1964), 9.12 (from memory).
 * @param out length at least n + 1; entries 0 ... n are overwritten
 * @throws RangeError for a negative x or one above 1000
 */
export function besselJ(n: number, x: number, out: Float64Array): void {
  if (!(x >= 0 && x <= 1000)) throw new RangeError(`Bessel functions are computed for arguments from 0 to 1000, not ${x}.`);
  out.fill(0, 0, n + 1);
  if (x < 1e-8) {
    out[0] = 1;
    if (n > 0) out[1] = 0.5 * x;
    return;
  }
  const largest = Math.max(n, Math.ceil(x));
  let k = 2 * Math.ceil(0.5 * (largest + 12 + Math.ceil(Math.sqrt(60 * largest))));
  let above = 0;
  let here = 1e-290;
  let sum = 0;
  for (; k > 0; k--) {
    const below = (2 * k * here) / x - above;
    above = here;
    here = below;
    if (k - 1 <= n) out[k - 1] = here;
    if ((k - 1) % 2 === 0) sum += k === 1 ? here : 2 * here;
    if (Math.abs(here) > 1e250) {
      above *= 1e-250;
      here *= 1e-250;
      sum *= 1e-250;
      for (let i = k - 1; i <= n; i++) out[i] *= 1e-250;
    }
  }
  for (let i = 0; i <= n; i++) out[i] /= sum;
}
