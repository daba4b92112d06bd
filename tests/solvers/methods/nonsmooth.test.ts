import { describe, expect, it } from 'vitest';
import { Matrix, solve } from 'ml-matrix';
import { applySparse, applySparseTransposed } from '../../../solvers/core/sparse';
import { denseMatrix } from '../../../solvers/core/matrix-operator';
import { dot, norm2 } from '../../../solvers/core/vector';
import { laggedFactor } from '../../../solvers/methods/lagged-weights';
import { acceleratedGradient, operatorNormSquare } from '../../../solvers/methods/proximal/accelerated-gradient';
import { waveletFilters, waveletTransform, type WaveletKey } from '../../../solvers/methods/proximal/wavelets';
import { getMethod } from '../../../solvers/methods/registry';
import { denseOperator, syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

const problem = syntheticProblem({ side: 10, data: 24 });
const { simulated } = syntheticTruth(problem);
const jacobian = denseMatrix(problem.linearise(problem.background()));
const quiet = { norm: 0, level: 0 };
const n = problem.unknowns;

describe('wavelet transform', () => {
  const random = Float64Array.from({ length: 64 * 16 }, (_, k) => Math.sin(12.9898 * k) * 43758.5453 % 1);
  it.each(['haar', 'daubechies'] as WaveletKey[])('%s: orthonormal filters (Daubechies 1988), inverse and norm to rounding', (key) => {
    const low = waveletFilters[key];
    expect(low.reduce((sum, v) => sum + v, 0)).toBeCloseTo(Math.SQRT2, 14);
    expect(low.reduce((sum, v) => sum + v * v, 0)).toBeCloseTo(1, 14);
    const transform = waveletTransform(64, 16, key);
    const image = random.slice();
    transform.forward(image);
    expect(norm2(image)).toBeCloseTo(norm2(random), 11);
    transform.inverse(image);
    expect(norm2(image.map((v, k) => v - random[k]))).toBeLessThan(1e-12 * norm2(random));
  });
  it('Daubechies with two vanishing moments leaves no detail of a ramp, but at the wrapped end', () => {
    const ramp = Float64Array.from({ length: 64 }, (_, k) => k);
    const transform = waveletTransform(64, 1, 'daubechies');
    transform.forward(ramp);
    expect(ramp.subarray(32, 63).every((v) => Math.abs(v) < 1e-12)).toBe(true);
    expect(Math.abs(ramp[63])).toBeGreaterThan(1);
  });
  it('refuses sides that are no powers of two', () => {
    expect(() => waveletTransform(48, 16, 'haar')).toThrow(/powers of two, not 48/);
  });
});

describe('accelerated proximal gradient', () => {
  const a = Float64Array.from({ length: 12 * 8 }, (_, k) => Math.cos(3.1 * k) + (k % 9 === 0 ? 2 : 0));
  const y = Float64Array.from({ length: 12 }, (_, i) => Math.sin(i + 1));
  const operator = denseOperator(a, 12, 8);
  const goal = { target: null, decay: 0.5, smallestWeight: 0, limit: 20_000 };
  it('without a penalty solves least squares as ml-matrix does', () => {
    const { z } = acceleratedGradient({ operator, normSquare: operatorNormSquare(operator), prox: () => {} }, y, { ...goal, weight: 0 });
    const exact = solve(Matrix.from1DArray(12, 8, a), Matrix.columnVector(y)).to1DArray();
    // The iteration ends at a relative change of 1e-4; the matrix is well conditioned.
    expect(norm2(z.map((v, j) => v - exact[j]))).toBeLessThan(2e-3 * norm2(Float64Array.from(exact)));
  });
  it('with soft thresholding meets the optimality condition of l1: the correlation of the residual is the weight on the support, below it elsewhere', () => {
    const weight = 0.8;
    const prox = (z: Float64Array, t: number): void => {
      for (let j = 0; j < z.length; j++) z[j] = Math.sign(z[j]) * Math.max(0, Math.abs(z[j]) - t);
    };
    const { z } = acceleratedGradient({ operator, normSquare: operatorNormSquare(operator), prox }, y, { ...goal, weight });
    const residual = new Float64Array(12);
    operator.apply(z, residual);
    for (let i = 0; i < 12; i++) residual[i] = y[i] - residual[i];
    const correlation = new Float64Array(8);
    operator.applyAdjoint(residual, correlation);
    expect(z.some((v) => v === 0)).toBe(true);
    z.forEach((v, j) => {
      if (v !== 0) expect(correlation[j]).toBeCloseTo(weight * Math.sign(v), 2);
      else expect(Math.abs(correlation[j])).toBeLessThan(weight * 1.001);
    });
  });
});

describe('Tikhonov with bounds', () => {
  it('keeps its bounds, and elsewhere satisfies the normal equations (Karush, Kuhn, Tucker)', () => {
    const method = getMethod('box-constrained-tikhonov');
    const value = 1e-2;
    const { x } = method.prepare(problem, { constraint: 'rise', largestIteration: 5000 }, { key: 'fixed', value }).reconstruct(simulated.clean, quiet);
    const operator = denseOperator(jacobian, problem.dataSize, n);
    const l = problem.penalty('identity');
    const unit = operatorNormSquare(operator) / operatorNormSquare({ rows: l.rows, cols: l.cols, apply: (v, out) => applySparse(l, v, out), applyAdjoint: (v, out) => applySparseTransposed(l, v, out) });
    const h = x.map((v, j) => v - problem.background()[j]);
    const residual = new Float64Array(problem.dataSize);
    operator.apply(h, residual);
    for (let i = 0; i < residual.length; i++) residual[i] -= simulated.clean[i];
    const gradient = new Float64Array(n);
    operator.applyAdjoint(residual, gradient);
    const scale = norm2(gradient);
    for (let j = 0; j < n; j++) gradient[j] += value * unit * problem.unknownWeights[j] * h[j];
    let free = 0;
    for (let j = 0; j < n; j++) {
      expect(h[j]).toBeGreaterThanOrEqual(0);
      if (h[j] > 0) {
        free++;
        expect(Math.abs(gradient[j])).toBeLessThan(2e-2 * scale);
      } else expect(gradient[j]).toBeGreaterThan(-2e-2 * scale);
    }
    expect(free).toBeGreaterThan(5);
    expect(free).toBeLessThan(n);
  });
  it('refuses bounds that leave nothing, and never forbids the background', () => {
    const method = getMethod('box-constrained-tikhonov');
    expect(() => method.prepare(problem, { lowest: 2, highest: 1 }, null)).toThrow(/must be below/);
    const { x } = method.prepare(problem, { lowest: 5, highest: 6 }, null).reconstruct(simulated.clean, { norm: 0.1 * simulated.noiseScale, level: 0.1 });
    expect(x.every((v) => v >= 1 && v <= 6)).toBe(true);
  });
});

describe('total variation by lagged diffusivity', () => {
  it('at a fixed weight ends where its own quadratic form is stationary (Vogel and Oman 1996)', () => {
    const value = 1e-5;
    const smoothing = 0.05;
    const { x, stop } = getMethod('lagged-diffusivity').prepare(problem, { smoothing, largestIteration: 100 }, { key: 'fixed', value }).reconstruct(simulated.clean, quiet);
    expect(stop).toBe('converged');
    const h = x.map((v, j) => v - problem.background()[j]);
    const m = problem.dataSize;
    const residual = Float64Array.from(simulated.clean, (v, i) => v - dot(jacobian.subarray(i * n, (i + 1) * n), h));
    const correlation = new Float64Array(n);
    denseOperator(jacobian, m, n).applyAdjoint(residual, correlation);
    // lambda P h = J^T r: P^{-1} J^T r / lambda is h again.
    const factor = laggedFactor(problem, smoothing);
    const start = factor(new Float64Array(n));
    const standard = Float64Array.from(jacobian);
    start.halfSolveMany(standard, m, 'forward');
    let trace = 0;
    for (const v of standard) trace += v * v;
    const again = correlation.slice();
    factor(h).solveMany(again, 1);
    const gap = norm2(again.map((v, j) => v / (value * trace) - h[j])) / norm2(h);
    // A step changed the image by less than 1e-3 of it.
    expect(gap).toBeLessThan(2e-3);
  });
  it('under the discrepancy principle leaves a residual at the noise', () => {
    const norm = 0.02 * simulated.noiseScale;
    const { residualNorm } = getMethod('lagged-diffusivity').prepare(problem, {}, { key: 'discrepancy', safetyFactor: 1.05 }).reconstruct(simulated.clean, { norm, level: 0.02 });
    expect(residualNorm).toBeLessThanOrEqual(1.05 * norm * (1 + 1e-9));
    expect(residualNorm).toBeGreaterThan(norm);
  });
  it('refuses more data than its dense system can take, with the reason', () => {
    expect(getMethod('lagged-diffusivity').unfit?.({ family: 'x-ray', dataKind: 'absolute', geometry: problem.geometry, dataSize: 5000, unknowns: 1000 })).toMatch(/at most 700/);
  });
});

describe('sparsity in a wavelet basis', () => {
  it.each(['haar', 'daubechies'])('%s: fits the data to the noise with a change of few wavelets', (wavelet) => {
    const norm = 0.02 * simulated.noiseScale;
    const { x, residualNorm, stop } = getMethod('wavelet-sparsity').prepare(problem, { wavelet, largestIteration: 300 }, null).reconstruct(simulated.clean, { norm, level: 0.02 });
    expect(stop).toBe('discrepancy');
    expect(residualNorm).toBeLessThanOrEqual(1.05 * norm);
    const model = new Float64Array(problem.dataSize);
    problem.linearise(x).apply(x.map((v, j) => v - problem.background()[j]), model);
    expect(norm2(model.map((v, i) => v - simulated.clean[i]))).toBeCloseTo(residualNorm, 10);
  });
});
