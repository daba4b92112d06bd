import { describe, expect, it } from 'vitest';
import { bornImage, hermitianCoefficients } from '../../../../solvers/methods/direct/born-image';
import { dBarSolver } from '../../../../solvers/methods/direct/d-bar-solver';
import { exponentialMatrix } from '../../../../solvers/methods/direct/harmonic-map';
import reference from '../../../reference/d-bar.json';
import { concentricMap, firstOrderDisc } from '../../../../solvers/verification/disc-maps';

const N = 16;
const points = Float64Array.of(0, 0, 0.1, 0.2, 0.3, 0.4, 0, 0.6, 0.7, 0.1, 0.9, 0.3);

function firstOrder(exponentials: Float64Array, at: Float64Array, K: number): number[] {
  const c = hermitianCoefficients(exponentials, N);
  const rows = bornImage(at, N, K);
  return Array.from({ length: at.length / 2 }, (_, p) => c.reduce((sum, value, i) => sum + rows[p * c.length + i] * value, 0));
}

describe('the d-bar equation', () => {
  it.each(reference.cases)('agrees with a square grid of the k plane at R = $R', ({ R, values }) => {
    const { rho, x, y, change } = reference.disc;
    const solution = dBarSolver(Float64Array.from(reference.points.flat()), R).solve(firstOrderDisc(rho, Math.hypot(x, y), Math.atan2(y, x), change, N), N);
    expect(solution.converged).toBe(true);
    values.forEach((value, i) => expect(Math.abs(solution.values[i] - value)).toBeLessThan(reference.tolerance));
  });

  it.each([2, 4, 6])('gives the first-order image of twice the cutoff for small contrasts, and differs from it by the square (R = %d)', (R) => {
    const gaps = [0.02, 0.01].map((contrast) => {
      const exponentials = exponentialMatrix(concentricMap(0.5, 1 + contrast, N), N);
      const { values } = dBarSolver(points, R).solve(exponentials, N);
      const linear = firstOrder(exponentials, points, 2 * R);
      return Math.max(...linear.map((change, i) => Math.abs(values[i] - 1 - change)));
    });
    expect(gaps[1]).toBeLessThan(1e-4);
    // Second order: a quarter at half the contrast, to the third order.
    expect(gaps[0] / gaps[1]).toBeGreaterThan(3.8);
    expect(gaps[0] / gaps[1]).toBeLessThan(4.2);
  });

  it('leaves a constant conductivity as it is, to the last bit', () => {
    expect(dBarSolver(points, 4).solve(new Float64Array(2 * N * N), N).values).toEqual(new Float64Array(6).fill(1));
  });

  it('turns with the body', () => {
    const rotated = (angle: number): number => {
      const c = Math.cos(angle);
      const s = Math.sin(angle);
      const disc = firstOrderDisc(0.25, 0.5, angle, 1, N);
      return dBarSolver(Float64Array.of(0.4 * c - 0.1 * s, 0.4 * s + 0.1 * c), 4).solve(disc, N).values[0];
    };
    // Between the rings' angles the value is interpolated: 0.1 % of the change.
    for (const angle of [0.3, 1.1, 2.9]) expect(Math.abs(rotated(angle) - rotated(0))).toBeLessThan(2e-3);
    // By a step of the angles nothing is interpolated differently: rounding and the end of the iteration.
    expect(Math.abs(rotated(Math.PI / 2) - rotated(0))).toBeLessThan(1e-4);
  });

  it('recovers twice the background in the middle of a concentric disc to a tenth with the single layer', () => {
    // Gibbs oscillations of a truncated transform of a step: the mean over the disc's inner half.
    const ring = Float64Array.from(Array.from({ length: 8 }, (_, i) => [0.03 + 0.03 * i, 0]).flat());
    const { values } = dBarSolver(ring, 7).solve(exponentialMatrix(concentricMap(0.5, 2, N), N, 'single-layer'), N);
    const weights = Array.from({ length: 8 }, (_, i) => 0.03 + 0.03 * i);
    const mean = values.reduce((sum, value, i) => sum + value * weights[i], 0) / weights.reduce((a, b) => a + b);
    expect(Math.abs(mean - 2)).toBeLessThan(0.2);
  });

  it('refuses a radius it does not resolve', () => {
    for (const R of [0, -1, 13, NaN]) expect(() => dBarSolver(points, R)).toThrow(RangeError);
  });
});
