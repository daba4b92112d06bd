import { describe, expect, it } from 'vitest';
import { besselJ } from '../../../../solvers/core/bessel';
import { bornImage, hermitianCoefficients } from '../../../../solvers/methods/direct/born-image';
import { exponentialMatrix } from '../../../../solvers/methods/direct/harmonic-map';
import { ringPowers } from '../../../../solvers/methods/direct/ring-powers';
import { concentricMap, firstOrderDisc } from '../../../../solvers/verification/disc-maps';

const N = 16;

function imageAt(exponentials: Float64Array, x: number, y: number, K: number): number {
  const rows = bornImage(Float64Array.of(x, y), N, K);
  return hermitianCoefficients(exponentials, N).reduce((sum, value, i) => sum + rows[i] * value, 0);
}
const bessel = (n: number, x: number): number => {
  const out = new Float64Array(n + 1);
  besselJ(n, x, out);
  return out[n];
};

describe('Calderon\'s image', () => {
  it.each([2, 5, 0.3])('of a concentric disc of %d has the closed form in the middle', (s) => {
    // (Lambda - Lambda_1) on harmonic n is 2 n sum_j mu^j rho^{2nj}, so F is that of discs of radius rho^j with the change 2 mu^j, and a
    // disc of radius r cut at K has 1 - J_0(K r) in the middle.
    const mu = (s - 1) / (s + 1);
    const exponentials = exponentialMatrix(concentricMap(0.5, s, N), N);
    for (const K of [2, 4, 6]) {
      let exact = 0;
      for (let j = 1; j < 60; j++) exact += 2 * mu ** j * (1 - bessel(0, K * 0.5 ** j));
      // The eigenvalue of 1 + A is kept above 1/20: no disc here reaches it. Rounding.
      expect(Math.abs(imageAt(exponentials, 0, 0, K) - exact)).toBeLessThan(1e-12);
    }
  });

  it('with the single layer is that of one disc of the change 2 mu', () => {
    const mu = 1 / 3;
    const exponentials = exponentialMatrix(concentricMap(0.5, 2, N), N, 'single-layer');
    expect(Math.abs(imageAt(exponentials, 0, 0, 5) - 2 * mu * (1 - bessel(0, 2.5)))).toBeLessThan(1e-12);
  });

  it('of an off-centre disc is that of the centred one, moved', () => {
    const centred = firstOrderDisc(0.3, 0, 0, 0.7, N);
    const moved = firstOrderDisc(0.3, Math.hypot(0.4, -0.2), Math.atan2(-0.2, 0.4), 0.7, N);
    // Harmonics above 16 are missing: (K / 2)^17 / 17! and less.
    for (const [x, y] of [[0, 0], [0.2, 0.1], [-0.1, 0.3]]) expect(Math.abs(imageAt(moved, 0.4 + x, -0.2 + y, 5) - imageAt(centred, x, y, 5))).toBeLessThan(1e-7);
  });

  it('has the mean squares over circles that the transform of a disc has', () => {
    // |F| = 2 pi rho |a| |J_1(kappa rho)| / kappa on every circle.
    const radii = [1, 2, 3, 4];
    const { signal } = ringPowers(firstOrderDisc(0.3, 0.45, 0.5, 0.7, N), new Float64Array(N * N), N, radii);
    radii.forEach((radius, j) => {
      const kappa = 0.5 * (radius + (radii[j - 1] ?? 0));
      const exact = (2 * Math.PI * 0.3 * 0.7 * bessel(1, kappa * 0.3)) / kappa;
      expect(Math.abs(signal[j] - exact * exact)).toBeLessThan(1e-9);
    });
  });
});
