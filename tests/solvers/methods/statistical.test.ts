import { describe, expect, it } from 'vitest';
import { credibleInterval } from '../../../solvers/campaign/credible-interval';
import { prepareRun, runLevel } from '../../../solvers/campaign/run';
import { norm2 } from '../../../solvers/core/vector';
import { unknownPlaces } from '../../../solvers/methods/cell-image';
import { getMethod } from '../../../solvers/methods/registry';
import { methodStream, smoothnessPrior } from '../../../solvers/methods/statistical/prior';
import { frameSpectrum } from '../../../solvers/methods/spectral-system';
import { syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

const problem = syntheticProblem({ side: 10, data: 24 });
const { simulated } = syntheticTruth(problem);
const noise = { norm: 0.05 * simulated.noiseScale, level: 0.05 };
const n = problem.unknowns;
const prior = { deviation: 0.5, correlationLength: 0.2 };

// Closed form of a linear Gaussian problem (Kaipio and Somersalo 2005, theorem 3.7, from memory): in the coordinates of the singular vectors the
// posterior is normal with variance 1 / (1 + s^2 / sigma^2) and mean s c / (s^2 + sigma^2).
const { system } = smoothnessPrior(problem, prior.deviation, prior.correlationLength);
const sigma = noise.norm / Math.sqrt(problem.dataSize);
const frame = frameSpectrum(system, simulated.clean);
const exactMean = Float64Array.from(problem.background());
for (let k = 0; k < system.rank; k++) {
  const z = (system.singularValues[k] * frame.coefficients[k]) / (system.singularValues[k] ** 2 + sigma ** 2);
  for (let j = 0; j < n; j++) exactMean[j] += z * system.basis[k * n + j];
}

describe.each(['approximation', 'prior'])('Crank-Nicolson sampling with proposals about the %s', (reference) => {
  const steps = reference === 'prior' ? 60_000 : 4_000;
  const kept = 500;
  const { x, samples } = getMethod('crank-nicolson').prepare(problem, { ...prior, reference, steps, kept, stepSize: reference === 'prior' ? 0.3 : 1 }, null).reconstruct(simulated.clean, noise);
  it('has the mean of the closed form', () => {
    const change = exactMean.map((v, j) => v - problem.background()[j]);
    // Monte Carlo error: a chain about the prior has few independent members at this noise.
    expect(norm2(x.map((v, j) => v - exactMean[j]))).toBeLessThan((reference === 'prior' ? 0.15 : 0.05) * norm2(change));
  });
  it('has the variance of the closed form in the coordinates that the data see', () => {
    const k = 3;
    const expected = 1 / (1 + (system.singularValues[k] / sigma) ** 2);
    // z_k = u_k^T J h / s_k of each sample.
    const values = samples!.map((sample) => {
      const model = problem.evaluate(sample);
      return frameSpectrum(system, model).coefficients[k] / system.singularValues[k];
    });
    const mean = values.reduce((sum, v) => sum + v, 0) / kept;
    const variance = values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / kept;
    // 500 independent samples know a variance to 6 %; a chain about the prior mixes slowly and knows it less well.
    expect(Math.abs(variance / expected - 1)).toBeLessThan(reference === 'prior' ? 0.6 : 0.25);
  });
});

describe('credible intervals', () => {
  it('cover nine tenths of truths that are drawn from the prior itself', () => {
    const random = methodStream('truths of a test');
    const { draw } = smoothnessPrior(problem, prior.deviation, prior.correlationLength);
    const method = getMethod('crank-nicolson').prepare(problem, { ...prior, steps: 600, kept: 100 }, null);
    let inside = 0;
    let pixels = 0;
    for (let trial = 0; trial < 20; trial++) {
      const change = new Float64Array(n);
      draw(random, change);
      const x = change.map((v, j) => v + problem.background()[j]);
      const data = problem.evaluate(x);
      const scale = 0.05 * norm2(data) / Math.sqrt(data.length);
      for (let i = 0; i < data.length; i++) data[i] += scale * random.nextNormal();
      const { samples } = method.reconstruct(data, { norm: scale * Math.sqrt(data.length), level: 0.05 });
      const { low, high } = credibleInterval(problem, samples!);
      const truth = new Float64Array(low.length);
      problem.toImage(x, truth);
      truth.forEach((v, k) => (inside += v >= low[k] && v <= high[k] ? 1 : 0));
      pixels += truth.length;
    }
    // 20 truths of some ten independent places each: two standard errors are 0.04; quantiles of 100 samples lie 0.01 inside.
    expect(inside / pixels).toBeGreaterThan(0.84);
    expect(inside / pixels).toBeLessThan(0.95);
  });
  it('reach the trial as a metric, and only from methods that sample', () => {
    const value = (method: string): number | null => runLevel(prepareRun({ problem, method, parameters: {}, rule: null }), simulated, { benchSeed: 1, phantomHash: 'p', levelIndex: 0, level: 0.02, draws: [0] })[0].metrics['credible-coverage'].value;
    expect(value('crank-nicolson')).toBeGreaterThan(0.3);
    expect(value('ensemble-kalman')).toBeGreaterThan(0);
    expect(value('smoothness-prior')).toBeNull();
  });
});

describe('ensemble Kalman inversion', () => {
  it('after one step has the mean of the closed form, up to the error of a finite ensemble', () => {
    const { x } = getMethod('ensemble-kalman').prepare(problem, { members: 1000, ...prior }, { key: 'fixed', value: 1 }).reconstruct(simulated.clean, noise);
    const change = exactMean.map((v, j) => v - problem.background()[j]);
    // Covariances of 1000 members in 24 data: about sqrt(24 / 1000).
    expect(norm2(x.map((v, j) => v - exactMean[j]))).toBeLessThan(0.2 * norm2(change));
  });
  it('stops at the discrepancy, with a full model too', () => {
    const bent = syntheticProblem({ side: 8, data: 20, curvature: 0.2 });
    const truth = syntheticTruth(bent);
    const norm = 0.05 * truth.simulated.noiseScale;
    for (const model of ['linearised', 'full']) {
      const { stop, forwardSolves } = getMethod('ensemble-kalman').prepare(bent, { model, members: 100 }, null).reconstruct(truth.simulated.clean, { norm, level: 0.05 });
      expect(stop).toBe('discrepancy');
      expect(forwardSolves > 0).toBe(model === 'full');
    }
  });
});

describe('linear reconstruction trained on targets', () => {
  it('gives a small target about its own amount, at its own place', () => {
    const { x } = getMethod('trained-linear').prepare(problem, { responseRadius: 0.35 }, { key: 'fixed', value: 1e-3 }).reconstruct(simulated.clean, { norm: 0, level: 0 });
    const [target] = simulated.targets;
    const places = unknownPlaces(problem);
    let amount = 0;
    let [px, py] = [0, 0];
    for (let j = 0; j < n; j++) {
      const share = (x[j] - 1) * problem.unknownWeights[j];
      amount += share;
      px += share * places[2 * j];
      py += share * places[2 * j + 1];
    }
    expect(amount / (target.area * target.contrast)).toBeGreaterThan(0.8);
    expect(amount / (target.area * target.contrast)).toBeLessThan(1.2);
    expect(Math.hypot(px / amount - target.x, py / amount - target.y)).toBeLessThan(0.1);
  });
  it('trades resolution against noise: a larger weight gives a smaller gain', () => {
    const gain = (value: number): number => {
      const method = getMethod('trained-linear').prepare(problem, {}, { key: 'fixed', value });
      const still = method.reconstruct(new Float64Array(problem.dataSize), { norm: 0, level: 0 }).x;
      const moved = method.reconstruct(Float64Array.from({ length: problem.dataSize }, (_, i) => Math.sin(7 * i)), { norm: 0, level: 0 }).x;
      return norm2(moved.map((v, j) => v - still[j]));
    };
    expect(gain(1)).toBeLessThan(0.5 * gain(0.001));
  });
});
