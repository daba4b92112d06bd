/**
 * Mean squares over circles |k| = kappa of the transform F(k) = -(2 / |k|^2) t(k / 2), t(k) = sum (i conj k)^m (i k)^n T_mn / (m! n!), and
 * of its expected noise, at the middle of each ring between two radii (the first ring begins at 0).
 * @param exponentials T, 2 x N x N
 * @param variances expected |T_mn|^2 of noise of norm 1, N x N
 * @param radii ascending
 */
export function ringPowers(exponentials: Float64Array, variances: Float64Array, N: number, radii: readonly number[]): { signal: Float64Array; unitNoise: Float64Array } {
  const signal = new Float64Array(radii.length);
  const unitNoise = new Float64Array(radii.length);
  const size = new Float64Array(N);
  const re = new Float64Array(2 * N - 1);
  const im = new Float64Array(2 * N - 1);
  for (let j = 0; j < radii.length; j++) {
    const kappa = 0.5 * (radii[j] + (j === 0 ? 0 : radii[j - 1]));
    // (kappa / 2)^n / n!
    let power = 1;
    for (let n = 1; n <= N; n++) size[n - 1] = power *= kappa / (2 * n);
    re.fill(0);
    im.fill(0);
    let noise = 0;
    for (let m = 0; m < N; m++) {
      for (let n = 0; n < N; n++) {
        const factor = (size[m] * size[n] * 2) / (kappa * kappa);
        noise += factor * factor * variances[m * N + n];
        // -i^{m + n} with orders one above the indices; the sum over n - m = p is one angular mode.
        const turn = (m + n) % 4;
        const a = factor * exponentials[m * N + n];
        const b = factor * exponentials[N * N + m * N + n];
        const p = n - m + N - 1;
        re[p] += turn === 0 ? a : turn === 1 ? -b : turn === 2 ? -a : b;
        im[p] += turn === 0 ? b : turn === 1 ? a : turn === 2 ? -b : -a;
      }
    }
    let sum = 0;
    for (let p = 0; p < re.length; p++) sum += re[p] * re[p] + im[p] * im[p];
    signal[j] = sum;
    unitNoise[j] = noise;
  }
  return { signal, unitNoise };
}
