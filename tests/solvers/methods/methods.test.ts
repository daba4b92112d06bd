import { describe, expect, it } from 'vitest';
import { denseMatrix } from '../../../solvers/core/matrix-operator';
import { runLevel, prepareRun } from '../../../solvers/campaign/run';
import { ballMultiplier } from '../../../solvers/methods/data-term';
import { factorPenalty, penaltyMatrix } from '../../../solvers/methods/penalty';
import { getMethod } from '../../../solvers/methods/registry';
import { frameSpectrum, spectralSystem } from '../../../solvers/methods/spectral-system';
import { Matrix, SingularValueDecomposition, solve } from 'ml-matrix';
import { syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';
import type { PenaltyKey } from '../../../solvers/core/types';

const problem = syntheticProblem({ side: 9, data: 18 });
const { simulated, x: truth } = syntheticTruth(problem);
const jacobian = Matrix.from1DArray(18, 81, denseMatrix(problem.linearise(problem.background())));
const noise = { norm: 0.01 * simulated.noiseScale, level: 0.01 };

function relativeGap(a: ArrayLike<number>, b: ArrayLike<number>): number {
  let gap = 0;
  let size = 0;
  for (let i = 0; i < a.length; i++) {
    gap += (a[i] - b[i]) ** 2;
    size += b[i] ** 2;
  }
  return Math.sqrt(gap / size);
}
/** L^T L plus the mass, dense. */
function densePenalty(kind: PenaltyKey): Matrix {
  const { n, colStart, rows, values } = penaltyMatrix(problem, kind);
  const dense = Matrix.zeros(n, n);
  for (let j = 0; j < n; j++)
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      dense.set(rows[k], j, values[k]);
      dense.set(j, rows[k], values[k]);
    }
  return dense;
}

describe.each(['identity', 'gradient', 'laplacian'] as const)('standard form with the %s penalty', (kind) => {
  const system = spectralSystem(problem, kind);
  it('the penalty matrix is L^T L and a small mass', () => {
    const l = problem.penalty(kind);
    const dense = Matrix.zeros(l.rows, l.cols);
    for (let i = 0; i < l.rows; i++) for (let k = l.rowStart[i]; k < l.rowStart[i + 1]; k++) dense.set(i, l.columns[k], dense.get(i, l.columns[k]) + l.values[k]);
    const mass = kind === 'identity' ? 0 : 0.1;
    const expected = dense.transpose().mmul(dense).add(Matrix.diag(Array.from(problem.unknownWeights, (weight) => mass * weight)));
    expect(relativeGap(densePenalty(kind).to1DArray(), expected.to1DArray())).toBeLessThan(1e-14);
  });
  it('half solves make a whole one', () => {
    const factor = factorPenalty(problem, kind);
    const b = Float64Array.from({ length: 162 }, (_, i) => Math.sin(i));
    const halves = Float64Array.from(b);
    factor.halfSolveMany(halves, 2, 'forward');
    factor.halfSolveMany(halves, 2, 'backward');
    const whole = Float64Array.from(b);
    factor.solveMany(whole, 2);
    expect(halves).toEqual(whole);
  });
  it('has the singular values that ml-matrix gives for J R^{-1}', () => {
    // Eigenvalues of J P^{-1} J^T are their squares; compared where the square keeps its digits (sigma above 1e-4 sigma_1, 1e-8 there).
    const gram = jacobian.mmul(solve(densePenalty(kind), jacobian.transpose()));
    const expected = new SingularValueDecomposition(gram).diagonal.map(Math.sqrt);
    expected.forEach((value, i) => { if (value > 1e-4 * expected[0]) expect(Math.abs(system.singularValues[i] / value - 1)).toBeLessThan(1e-6); });
  });
  it('Tikhonov solves the normal equations', () => {
    const value = 0.003;
    const alpha = value * system.singularValues[0];
    const data = simulated.clean;
    const { x, parameter } = getMethod('tikhonov').prepare(problem, { penalty: kind }, { key: 'fixed', value }).reconstruct(data, noise);
    const normal = jacobian.transpose().mmul(jacobian).add(densePenalty(kind).mul(alpha * alpha));
    const h = solve(normal, jacobian.transpose().mmul(Matrix.columnVector(Array.from(data)))).to1DArray();
    // The normal equations square the condition of the regularised problem: 1e-16 times (1 / 0.003)^2, and some.
    expect(relativeGap(x.map((v, j) => v - problem.background()[j]), h)).toBeLessThan(1e-8);
    expect(parameter).toBeCloseTo(value, 15);
  });
});

describe('truncated SVD', () => {
  it('at full rank fits the data, and at each index drops the residual', () => {
    const system = spectralSystem(problem, 'identity');
    let last = Infinity;
    for (const value of [1, 3, 6, 12, system.rank]) {
      const { residualNorm } = getMethod('truncated-svd').prepare(problem, {}, { key: 'fixed', value }).reconstruct(simulated.clean, noise);
      expect(residualNorm).toBeLessThanOrEqual(last);
      last = residualNorm;
    }
    expect(last).toBeLessThan(1e-12 * simulated.noiseScale);
  });
  it('coefficients keep the norm of the data', () => {
    const system = spectralSystem(problem, 'identity');
    const frame = frameSpectrum(system, simulated.clean);
    const sum = frame.coefficients.slice(0, system.rank).reduce((total, c) => total + c * c, frame.outside);
    expect(Math.abs(Math.sqrt(sum) / simulated.noiseScale - 1)).toBeLessThan(1e-12);
  });
});

describe('discrepancy', () => {
  it.each(['tikhonov', 'total-variation'])('%s lands on the safety factor times the noise', (method) => {
    const prepared = prepareRun({ problem, method, parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.2 } });
    const [trial] = runLevel(prepared, simulated, { benchSeed: 1, phantomHash: 'p', levelIndex: 0, level: 0.05, draws: [0] });
    expect(trial.metrics['data-residual-ratio'].value).toBeCloseTo(1.2, 8);
  });
  it.each(['cgls', 'truncated-svd', 'gauss-newton'])('%s is the first to get below it', (method) => {
    const prepared = prepareRun({ problem, method, parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.2 } });
    const [trial] = runLevel(prepared, simulated, { benchSeed: 1, phantomHash: 'p', levelIndex: 0, level: 0.05, draws: [0] });
    expect(trial.metrics['data-residual-ratio'].value).toBeLessThanOrEqual(1.2);
    if (method !== 'truncated-svd') expect(trial.stop).toBe('discrepancy');
  });
  it('the multiplier of the projection solves its equation', () => {
    const s = Float64Array.of(3, 1, 0.1, 0.001);
    const e = Float64Array.of(1, -2, 0.5, 0.3);
    for (const bound of [5, 1, 0.2, 0.09]) {
      const mu = ballMultiplier(s, e, 4, bound, 0);
      const value = e.reduce((sum, v, k) => sum + (v / (1 + mu * s[k] * s[k])) ** 2, 0);
      expect(Math.abs(value / bound - 1)).toBeLessThan(1e-9);
    }
    expect(ballMultiplier(s, e, 4, 6, 0)).toBe(0);
    expect(ballMultiplier(s, e, 4, 0, 0)).toBe(Infinity);
  });
});

describe('total variation', () => {
  const objective = (h: Float64Array, lambda: number): number => {
    const model = new Float64Array(18);
    problem.linearise(problem.background()).apply(h, model);
    const { matrix, lengths } = problem.jumps();
    const jumps = lengths.reduce((sum, length, i) => {
      let jump = 0;
      for (let k = matrix.rowStart[i]; k < matrix.rowStart[i + 1]; k++) jump += matrix.values[k] * h[matrix.columns[k]];
      return sum + length * Math.abs(jump);
    }, 0);
    return 0.5 * model.reduce((sum, value, i) => sum + (value - simulated.clean[i]) ** 2, 0) + lambda * jumps;
  };
  it('no change of a cell, a pair or the whole image lowers the objective', () => {
    const largest = spectralSystem(problem, 'identity').singularValues[0];
    const value = 1e-3;
    const lambda = value * largest * largest;
    const { x } = getMethod('total-variation').prepare(problem, { largestIteration: 5000 }, { key: 'fixed', value }).reconstruct(simulated.clean, noise);
    const h = x.map((v, j) => v - problem.background()[j]);
    const best = objective(h, lambda);
    expect(best).toBeLessThan(objective(new Float64Array(81), lambda));
    expect(best).toBeLessThan(objective(truth.map((v, j) => v - problem.background()[j]), lambda));
    for (let j = 0; j < 82; j++)
      for (const step of [0.02, -0.02, 0.3, -0.3]) {
        const moved = Float64Array.from(h);
        for (const cell of j === 81 ? moved.keys() : [j, (j + 1) % 81]) moved[cell] += step;
        // The iteration ends with a relative change of 2e-5 a step: the objective may lie above its minimum by that order.
        expect(objective(moved, lambda)).toBeGreaterThan(best * (1 - 1e-4));
      }
  });
});

describe('Gauss-Newton', () => {
  const bent = syntheticProblem({ side: 9, data: 18, curvature: 0.5 });
  const made = syntheticTruth(bent, 0.8);
  it('fits nonlinear data that the linearised methods cannot', () => {
    const level = { benchSeed: 1, phantomHash: 'p', levelIndex: 0, level: 1e-3, draws: [0] };
    const nonlinear = runLevel(prepareRun({ problem: bent, method: 'gauss-newton', parameters: {}, rule: null }), made.simulated, level)[0];
    const linear = runLevel(prepareRun({ problem: bent, method: 'tikhonov', parameters: {}, rule: null }), made.simulated, level)[0];
    expect(nonlinear.stop).toBe('discrepancy');
    expect(nonlinear.metrics['relative-l2-error'].value!).toBeLessThan(linear.metrics['relative-l2-error'].value!);
    expect(nonlinear.forwardSolves).toBeGreaterThanOrEqual(nonlinear.iterations);
  });
  it('keeps every value above the lower bound', () => {
    const deep = syntheticTruth(bent, -0.98);
    const data = deep.simulated.clean.map((value) => 3 * value);
    const { x } = getMethod('gauss-newton').prepare(bent, {}, null).reconstruct(data, { norm: 1e-3 * deep.simulated.noiseScale, level: 1e-3 });
    expect(Math.min(...x)).toBeGreaterThanOrEqual(bent.lowerBound);
  });
  it('is one Tikhonov step for a linear problem with one iteration', () => {
    const { x } = getMethod('gauss-newton').prepare(problem, { firstAlpha: 0.003, largestIteration: 1 }, { key: 'fixed', value: 0.003 }).reconstruct(simulated.clean, noise);
    const { x: expected } = getMethod('tikhonov').prepare(problem, { penalty: 'gradient' }, { key: 'fixed', value: 0.003 }).reconstruct(simulated.clean, noise);
    const free = expected.map((value) => Math.max(value, problem.lowerBound));
    // sigma_1 comes from a power iteration here and from the SVD there: 1e-8.
    expect(relativeGap(x, free)).toBeLessThan(1e-6);
  });
});
