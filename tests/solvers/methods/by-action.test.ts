import { describe, expect, it } from 'vitest';
import { xrayGeometrySchema } from '../../../shared/domain/geometry/x-ray';
import { denseMatrix, matrixOperator } from '../../../solvers/core/matrix-operator';
import { deriveDrawKey } from '../../../solvers/core/random';
import type { ForwardProblem, PenaltyKey, RuleSetting } from '../../../solvers/core/types';
import { norm2 } from '../../../solvers/core/vector';
import { goesByAction, largestSingularValue, operatorSystem } from '../../../solvers/methods/operator-system';
import { getMethod, methods } from '../../../solvers/methods/registry';
import { spectralSystem } from '../../../solvers/methods/spectral-system';
import { gaussianNoise } from '../../../solvers/noise/gaussian';
import { createProblem } from '../../../solvers/problems/registry';

/** Small enough for singular vectors, large enough to be taken by its action. */
const geometry = xrayGeometrySchema.parse({ body: { kind: 'disc', radius: 0.5 }, beam: 'parallel', views: 13, arcDeg: 180, detectors: 24, detectorSpacing: 1 / 24, cells: 20 });
const sparse = createProblem({ family: 'x-ray', geometry, dataKind: 'absolute', background: 0.3 });
/** The same problem with an explicit matrix: its methods work on singular vectors. */
const derivative = sparse.linearise(sparse.background());
const explicit: ForwardProblem = { ...sparse, linearise: () => matrixOperator(denseMatrix(derivative), derivative.rows, derivative.cols) };
/** Only its action, as a fast convolution has it. */
const { rows, cols, apply, applyAdjoint } = derivative;
const actionOnly: ForwardProblem = { ...sparse, linearise: () => ({ rows, cols, apply, applyAdjoint }) };

const truth = sparse.background().map((value, j) => value + (j % 20 > 6 && j % 20 < 12 ? 1 : 0) + (j > 150 && j < 200 ? 0.5 : 0));
const clean = sparse.evaluate(truth);
const { data, noiseNorm } = gaussianNoise.draw(clean, 0.02, norm2(clean), deriveDrawKey(3, 'by action', 0, 0));
const noise = { norm: noiseNorm, level: 0.02 };

function gapOf(a: ForwardProblem, b: ForwardProblem, key: string, parameters: Record<string, number | string>, rule: RuleSetting): number {
  const one = getMethod(key).prepare(a, parameters, rule).reconstruct(data, noise);
  const other = getMethod(key).prepare(b, parameters, rule).reconstruct(data, noise);
  expect(other.iterations).toBe(one.iterations);
  expect(other.stop).toBe(one.stop);
  expect(Math.abs(other.residualNorm - one.residualNorm)).toBeLessThan(1e-8 * norm2(data));
  return norm2(one.x.map((value, j) => value - other.x[j])) / norm2(one.x.map((value, j) => value - sparse.background()[j]));
}

describe('Iterations by the action of the derivative', () => {
  it('are taken where the problem holds no explicit matrix', () => {
    expect([sparse, explicit, actionOnly].map(goesByAction)).toEqual([true, false, true]);
  });

  it('know the largest singular value to rounding', () => {
    for (const form of ['none', 'identity', 'gradient', 'laplacian'] as const) {
      const exact = spectralSystem(explicit, form).singularValues[0];
      expect(Math.abs(largestSingularValue(operatorSystem(sparse, form)) / exact - 1)).toBeLessThan(1e-12);
    }
  });

  const steps: readonly (readonly [string, number])[] = [['cgls', 10], ['lsqr', 10], ['landweber', 60], ['nu-method', 40], ['kaczmarz', 4]];
  for (const [key, value] of steps)
    it.each(['identity', 'gradient', 'laplacian'] satisfies PenaltyKey[])(`${key}, %s: the iterates are those on singular vectors`, (penalty) => {
      // Krylov directions lose their orthogonality at once where one singular value is far above the others, as under the smoothing norms.
      const krylov = key === 'cgls' || key === 'lsqr';
      const early = krylov && penalty !== 'identity';
      const rule: RuleSetting = { key: 'fixed', value: early ? 4 : value };
      const bound = early ? 1e-4 : 1e-8;
      expect(gapOf(explicit, sparse, key, { penalty }, rule)).toBeLessThan(bound);
      expect(gapOf(explicit, actionOnly, key, { penalty }, rule)).toBeLessThan(bound);
      if (!early) expect(gapOf(explicit, sparse, key, { penalty }, { key: 'discrepancy', safetyFactor: 1.05 })).toBeLessThan(1e-6);
    });

  it('SIRT: the iterates are those in the space of the data', () => {
    expect(gapOf(explicit, sparse, 'sirt', {}, { key: 'fixed', value: 30 })).toBeLessThan(1e-10);
    expect(gapOf(explicit, actionOnly, 'sirt', {}, { key: 'fixed', value: 30 })).toBeLessThan(1e-10);
  });

  it('total variation: the minimiser is that of the exact data step', () => {
    for (const rule of [{ key: 'discrepancy', safetyFactor: 1.05 }, { key: 'fixed', value: 2e-4 }] satisfies RuleSetting[]) {
      const [a, b] = [explicit, sparse].map((problem) => getMethod('total-variation').prepare(problem, { largestIteration: 5000 }, rule).reconstruct(data, noise));
      const change = a.x.map((value, j) => value - sparse.background()[j]);
      // Both end when a step changes the image by less than 2e-5 of it.
      expect(norm2(a.x.map((value, j) => value - b.x[j])) / norm2(change)).toBeLessThan(3e-3);
      expect(Math.abs(a.residualNorm / b.residualNorm - 1)).toBeLessThan(3e-3);
      expect(Math.abs((a.parameter ?? 0) / (b.parameter ?? 1) - 1)).toBeLessThan(0.02);
    }
  });
});

describe('Values that may not be negative', () => {
  it.each(['sirt', 'kaczmarz', 'total-variation', 'sart'])('%s keeps them so, on every kind of problem, and still fits the data', (key) => {
    if (!methods.some((method) => method.key === key)) return;
    const low = sparse.background().map((_, j) => (j % 20 > 6 && j % 20 < 12 ? 1 : 0));
    const shifted = sparse.evaluate(low);
    const noisy = gaussianNoise.draw(shifted, 0.05, norm2(shifted), deriveDrawKey(3, 'not negative', 0, 0));
    for (const problem of key === 'sart' ? [sparse] : [sparse, explicit, actionOnly]) {
      const free = getMethod(key).prepare(problem, {}, { key: 'discrepancy', safetyFactor: 1.05 }).reconstruct(noisy.data, { norm: noisy.noiseNorm, level: 0.05 });
      expect(Math.min(...free.x)).toBeLessThan(0);
      const { x, residualNorm } = getMethod(key).prepare(problem, { constraint: 'nonnegative' }, { key: 'discrepancy', safetyFactor: 1.05 }).reconstruct(noisy.data, { norm: noisy.noiseNorm, level: 0.05 });
      expect(Math.min(...x)).toBeGreaterThanOrEqual(-1e-12);
      expect(residualNorm).toBeLessThan(1.1 * noisy.noiseNorm);
      expect(norm2(x.map((value, j) => value - low[j]))).toBeLessThan(1.1 * norm2(free.x.map((value, j) => value - low[j])));
    }
  });

  it('is refused by Kaczmarz in another norm than that of the size', () => {
    expect(() => getMethod('kaczmarz').prepare(sparse, { constraint: 'nonnegative', penalty: 'gradient' }, null)).toThrow(/smoothing norm/);
  });
});

describe('Methods that need singular vectors', () => {
  it('serve X-ray problems up to a size, and name the limit beyond it', () => {
    const facts = { family: 'x-ray' as const, dataKind: 'absolute' as const, geometry, dataSize: 312, unknowns: 350 };
    for (const key of ['tikhonov', 'truncated-svd', 'iterated-tikhonov', 'exponential-filter', 'sensitivity-prior', 'smoothness-prior', 'filter-expression']) {
      const method = getMethod(key);
      expect(method.capabilities.families).toContain('x-ray');
      expect(method.unfit?.(facts)).toBeNull();
      expect(method.unfit?.({ ...facts, dataSize: 4000, unknowns: 3300 })).toMatch(/1500.*CGLS/);
      expect(method.unfit?.({ ...facts, dataSize: 20000, unknowns: 1200 })).toMatch(/8 million/);
    }
  });

  it('as does Kaczmarz where rows must be made one by one', () => {
    const { unfit } = getMethod('kaczmarz');
    const facts = { dataKind: 'absolute' as const, geometry, dataSize: 9216, unknowns: 9216 };
    expect(unfit?.({ ...facts, family: 'deblurring' })).toMatch(/rows of a 9216 x 9216 matrix/);
    expect(unfit?.({ ...facts, family: 'x-ray' })).toBeNull();
  });
});
