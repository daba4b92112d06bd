import { describe, expect, it } from 'vitest';
import { largestTestValues, passedTests, picardRatios } from '../../../../solvers/methods/direct/indicators';
import { semidefiniteFactors } from '../../../../solvers/methods/direct/semidefinite-factors';
import { signedParts } from '../../../../solvers/methods/direct/signed-parts';
import { concentricMap, concentricSensitivities, dipoleFunctions } from '../../../../solvers/verification/disc-maps';

const N = 12;
const size = 2 * N;
const rho = 0.5;

describe('Picard ratio of the factorisation method', () => {
  const places = [0, 0.15, 0.3, 0.42, 0.58, 0.7, 0.85].map((r, i) => [r, 0.7 * i] as const);
  it.each([3, 0.2])('is that of the closed form for a concentric disc of %d', (s) => {
    const floor = 1e-9;
    const { more, less } = signedParts(concentricMap(rho, s, N), size, () => floor);
    expect(s > 1 ? less : more).toBeNull();
    const part = (s > 1 ? more : less)!;
    picardRatios(part, dipoleFunctions(places, N)).forEach((value, c) => {
      let top = 0;
      let bottom = 0;
      for (let n = 1; n <= N; n++) {
        const q = ((s - 1) / (s + 1)) * rho ** (2 * n);
        const lambda = Math.abs((2 * q) / (n * (1 + q)));
        top += places[c][0] ** (2 * n - 2);
        bottom += places[c][0] ** (2 * n - 2) / ((lambda > floor ? lambda : 0) + floor);
      }
      // Factors leave out 1e-6 of the trace, which the smallest eigenvalues raise: it counts outside only.
      if (places[c][0] < rho) expect(Math.abs(value / (top / bottom) - 1)).toBeLessThan(1e-3);
    });
  });
  it('is large inside and sinks outside, the more the smaller the noise', () => {
    const contrast = (floor: number): number => {
      const ratios = picardRatios(signedParts(concentricMap(rho, 3, N), size, () => floor).more!, dipoleFunctions(places, N));
      for (let c = 1; c < places.length; c++) expect(ratios[c]).toBeLessThan(ratios[c - 1]);
      return ratios[2] / ratios[5];
    };
    const steps = [1e-2, 1e-4, 1e-6].map(contrast);
    expect(steps[0]).toBeGreaterThan(1.5);
    expect(steps[1]).toBeGreaterThan(2 * steps[0]);
    expect(steps[2]).toBeGreaterThan(2 * steps[1]);
  });
});

describe('linearised monotonicity test', () => {
  const s = 2;
  const radii = [0.2, 0.4, 0.5, 0.55, 0.7];
  const part = signedParts(concentricMap(rho, s, N), size, () => 1e-16).more!;
  it('has the largest test value of the closed form for concentric discs', () => {
    largestTestValues(part, concentricSensitivities(radii, N), Infinity).forEach((value, c) => {
      let exact = Infinity;
      for (let n = 1; n <= N; n++) {
        const q = ((s - 1) / (s + 1)) * rho ** (2 * n);
        exact = Math.min(exact, (2 * q) / (1 + q) / radii[c] ** (2 * n));
      }
      // Five digits of the bracket.
      expect(Math.abs(value / exact - 1)).toBeLessThan(2e-5);
    });
  });
  it('passes regions inside at the contrast of the theorem, and none that reaches beyond', () => {
    // Inside a change from 1 to s the test value (s - 1) / s passes (Harrach and Ullrich 2013).
    expect([...passedTests(part, concentricSensitivities(radii, N), (s - 1) / s)]).toEqual([1, 1, 1, 0, 0]);
  });
  it('lets more pass where the noise is larger', () => {
    const noisy = signedParts(concentricMap(rho, s, N), size, () => 1e-2).more!;
    expect([...passedTests(noisy, concentricSensitivities(radii, N), (s - 1) / s)]).toEqual([1, 1, 1, 1, 0]);
  });
  it('is symmetric: less conductivity by the same factor passes at the same value', () => {
    const less = signedParts(concentricMap(rho, 1 / s, N), size, () => 1e-12).less!;
    expect([...passedTests(less, concentricSensitivities(radii, N), (s - 1) / s)]).toEqual([1, 1, 1, 0, 0]);
  });
  it('finds nothing in a map of zeros, and nothing below the noise', () => {
    expect(signedParts(new Float64Array(size * size), size, () => 0)).toEqual({ more: null, less: null });
    expect(signedParts(concentricMap(rho, s, N), size, () => 10)).toEqual({ more: null, less: null });
  });
});

describe('semidefiniteFactors', () => {
  it('add up to the matrix, with as many rows as its rank', () => {
    const vectors = [[1, 2, 0, -1], [0, 1, 1, 3]];
    const { starts, rows } = semidefiniteFactors(1, 4, (_, matrix) => {
      for (let a = 0; a < 4; a++) for (let b = 0; b < 4; b++) matrix[a * 4 + b] = vectors.reduce((sum, v) => sum + v[a] * v[b], 0);
    });
    expect([...starts]).toEqual([0, 2]);
    for (let a = 0; a < 4; a++) for (let b = 0; b < 4; b++) expect(Math.abs(rows[a] * rows[b] + rows[4 + a] * rows[4 + b] - vectors.reduce((sum, v) => sum + v[a] * v[b], 0))).toBeLessThan(1e-14);
  });
  it('has no rows for a matrix of zeros', () => {
    expect(semidefiniteFactors(2, 3, (_, matrix) => matrix.fill(0)).rows).toHaveLength(0);
  });
});
