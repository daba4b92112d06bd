import { describe, expect, it } from 'vitest';
import { norm2 } from '../../../solvers/core/vector';
import { getMethod } from '../../../solvers/methods/registry';
import { syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

const bent = syntheticProblem({ side: 10, data: 24, curvature: 0.6 });
const { x: truth, simulated } = syntheticTruth(bent, 2);
const noise = { norm: 0.01 * simulated.noiseScale, level: 0.01 };
const error = (x: Float64Array): number => norm2(x.map((v, j) => v - truth[j])) / norm2(truth.map((v, j) => v - bent.background()[j]));

describe.each(['gauss-newton', 'levenberg-marquardt', 'gauss-newton-total-variation'])('%s on a model with a strong bend', (key) => {
  const { x, stop, residualNorm, iterations, forwardSolves } = getMethod(key).prepare(bent, {}, null).reconstruct(simulated.clean, noise);
  it('fits the full model to the noise (Morozov 1966), by several forward solves', () => {
    expect(stop).toBe('discrepancy');
    const model = bent.evaluate(x);
    expect(norm2(model.map((v, i) => v - simulated.clean[i]))).toBeCloseTo(residualNorm, 12);
    expect(residualNorm).toBeLessThanOrEqual(1.1 * noise.norm);
    expect(forwardSolves).toBeGreaterThan(iterations);
  });
  it('does better than one linear step, which the bend misleads', () => {
    const linear = getMethod('tikhonov').prepare(bent, {}, null).reconstruct(simulated.clean, noise).x;
    expect(error(x)).toBeLessThan(error(linear));
  });
});

describe('Levenberg-Marquardt', () => {
  it('lowers the residual at every step, by about the share asked for while the linearisation carries (Hanke 1997)', () => {
    const residuals = [1, 2, 3].map((value) => getMethod('levenberg-marquardt').prepare(bent, { contraction: 0.8 }, { key: 'fixed', value }).reconstruct(simulated.clean, noise).residualNorm);
    const shares = [residuals[0] / norm2(simulated.clean), residuals[1] / residuals[0], residuals[2] / residuals[1]];
    for (const share of shares) {
      expect(share).toBeLessThan(0.95);
      expect(share).toBeGreaterThan(0.5);
    }
  });
});
