import { describe, expect, it } from 'vitest';
import { denseMatrix } from '../../../solvers/core/matrix-operator';
import { Matrix, solve } from 'ml-matrix';
import reference from '../../reference/linear-methods.json';
import type { ForwardProblem, RuleSetting } from '../../../solvers/core/types';
import { getMethod } from '../../../solvers/methods/registry';
import { matrixProblem } from '../../../solvers/verification/matrix-problem';
import { denseOperator, syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

const values = Float64Array.from(reference.A.flat());
const [m, n] = [reference.A.length, reference.A[0].length];
const problem: ForwardProblem = {
  ...matrixProblem(new Float64Array(n * n).fill(1), n), dataSize: m, linearise: () => denseOperator(values, m, n),
  evaluate(x) {
    const out = new Float64Array(m);
    denseOperator(values, m, n).apply(x.map((v) => v - 1), out);
    return out;
  },
};
const data = Float64Array.from(reference.b);
const quiet = { norm: 0, level: 0 };

function changeOf(key: string, parameters: Record<string, number | string>, rule: RuleSetting): Float64Array {
  return getMethod(key).prepare(problem, parameters, rule).reconstruct(data, quiet).x.map((v, j) => v - problem.background()[j]);
}
function relativeGap(a: ArrayLike<number>, b: ArrayLike<number>): number {
  let gap = 0;
  let size = 0;
  for (let i = 0; i < b.length; i++) {
    gap += (a[i] - b[i]) ** 2;
    size += b[i] ** 2;
  }
  return Math.sqrt(gap / size);
}
const fixed = (value: number): RuleSetting => ({ key: 'fixed', value });
/** Values by numpy and scipy (make-linear-methods.py); the tolerance and its reason are in the file. */
const bound = reference.tolerance.relative;

describe('spectral filters against numpy and scipy', () => {
  it.each(reference.iteratedTikhonov)('iterated Tikhonov, $passes passes: the recursion by least squares', ({ share, passes, x }) => {
    expect(relativeGap(changeOf('iterated-tikhonov', { penalty: 'identity', passes }, fixed(share)), x)).toBeLessThan(bound);
  });
  it.each(reference.exponential)('exponential filter at $share: the exponential of the matrix', ({ share, x }) => {
    expect(relativeGap(changeOf('exponential-filter', { penalty: 'identity' }, fixed(share)), x)).toBeLessThan(bound);
  });
  it.each(reference.sensitivity)('sensitivity-weighted prior, p = $exponent: the normal equations', ({ share, exponent, x }) => {
    expect(relativeGap(changeOf('sensitivity-prior', { exponent }, fixed(share)), x)).toBeLessThan(bound);
  });
});

describe('iterations against numpy and scipy', () => {
  it.each(reference.landweber)('Landweber, $steps steps, relaxation $relaxation', ({ steps, relaxation, x }) => {
    expect(relativeGap(changeOf('landweber', { penalty: 'identity', relaxation }, fixed(steps)), x)).toBeLessThan(bound);
  });
  it.each(reference.nu)('nu-method, $steps steps, nu = $nu: Jacobi polynomials of scipy', ({ steps, nu, x }) => {
    expect(relativeGap(changeOf('nu-method', { penalty: 'identity', nu }, fixed(steps)), x)).toBeLessThan(bound);
  });
  it.each(reference.lsqr)('LSQR, $steps steps: scipy, and CGLS here', ({ steps, x }) => {
    const own = changeOf('lsqr', { penalty: 'identity' }, fixed(steps));
    expect(relativeGap(own, x)).toBeLessThan(reference.tolerance.krylov);
    expect(relativeGap(changeOf('cgls', { penalty: 'identity' }, fixed(steps)), own)).toBeLessThan(reference.tolerance.krylov);
  });
  it.each(reference.kaczmarz)('Kaczmarz, $steps sweeps, relaxation $relaxation', ({ steps, relaxation, x }) => {
    expect(relativeGap(changeOf('kaczmarz', { penalty: 'identity', relaxation }, fixed(steps)), x)).toBeLessThan(bound);
  });
  it.each(reference.sirt)('SIRT, $steps steps, relaxation $relaxation', ({ steps, relaxation, x }) => {
    expect(relativeGap(changeOf('sirt', { relaxation }, fixed(steps)), x)).toBeLessThan(bound);
  });
  it.each(['landweber', 'nu-method', 'lsqr', 'kaczmarz', 'sirt'])('%s stops at the first step within the noise', (key) => {
    const smooth = syntheticProblem({ side: 9, data: 18 });
    const { simulated } = syntheticTruth(smooth);
    const noise = { norm: 0.1 * simulated.noiseScale, level: 0.1 };
    const method = getMethod(key);
    const { iterations, residualNorm, stop } = method.prepare(smooth, {}, { key: 'discrepancy', safetyFactor: 1.2 }).reconstruct(simulated.clean, noise);
    expect(stop).toBe('discrepancy');
    expect(residualNorm).toBeLessThanOrEqual(1.2 * noise.norm);
    if (iterations > 1) expect(method.prepare(smooth, {}, fixed(iterations - 1)).reconstruct(simulated.clean, noise).residualNorm).toBeGreaterThan(1.2 * noise.norm);
  });
});

describe('filters', () => {
  const smooth = syntheticProblem({ side: 9, data: 18 });
  const { simulated } = syntheticTruth(smooth);
  const noise = { norm: 0.02 * simulated.noiseScale, level: 0.02 };
  it('one pass of iterated Tikhonov is Tikhonov, under every rule of both', () => {
    for (const rule of [fixed(0.01), { key: 'discrepancy', safetyFactor: 1.1 }, { key: 'gcv' }] as const) {
      const once = getMethod('iterated-tikhonov').prepare(smooth, { passes: 1 }, rule).reconstruct(simulated.clean, noise);
      const plain = getMethod('tikhonov').prepare(smooth, {}, rule).reconstruct(simulated.clean, noise);
      // Golden section ends with a width of 1e-8 in ln(alpha^2) there and in ln(alpha) here.
      expect(relativeGap(once.x, plain.x)).toBeLessThan(1e-6);
    }
  });
  it.each(['iterated-tikhonov', 'exponential-filter', 'sensitivity-prior'])('%s lands on the safety factor times the noise', (key) => {
    const { residualNorm } = getMethod(key).prepare(smooth, {}, { key: 'discrepancy', safetyFactor: 1.3 }).reconstruct(simulated.clean, noise);
    // Bisection to rounding of ln(alpha).
    expect(Math.abs(residualNorm / (1.3 * noise.norm) - 1)).toBeLessThan(1e-10);
  });
});

describe('Gaussian smoothness prior', () => {
  const smooth = syntheticProblem({ side: 9, data: 18 });
  const { simulated } = syntheticTruth(smooth);
  const size = smooth.unknowns;
  const length = 0.3;
  const deviation = 0.4;
  const gradient = smooth.penalty('gradient');
  const g = Matrix.zeros(gradient.rows, size);
  for (let i = 0; i < gradient.rows; i++) for (let k = gradient.rowStart[i]; k < gradient.rowStart[i + 1]; k++) g.set(i, gradient.columns[k], gradient.values[k]);
  const mass = Matrix.diag(Array.from(smooth.unknownWeights));
  const b = Matrix.div(mass, length * length).add(g.transpose().mmul(g));
  const precision = b.mmul(Matrix.diag(Array.from(smooth.unknownWeights, (w) => 1 / w))).mmul(b).mul((length * length) / (4 * Math.PI * deviation * deviation));
  it('is the posterior mean of a linear Gaussian problem (Kaipio and Somersalo 2005), by the data-space formula', () => {
    const norm = 0.02 * simulated.noiseScale;
    const { x } = getMethod('smoothness-prior').prepare(smooth, { deviation, correlationLength: length }, null).reconstruct(simulated.clean, { norm, level: 0.02 });
    const jacobian = Matrix.from1DArray(18, size, denseMatrix(smooth.linearise(smooth.background())));
    const covariance = solve(precision, jacobian.transpose());
    const inner = jacobian.mmul(covariance).add(Matrix.eye(18, 18).mul((norm * norm) / 18));
    const mean = covariance.mmul(solve(inner, Matrix.columnVector(Array.from(simulated.clean)))).to1DArray();
    // The condition of the inner matrix, about 1e5, and of the precision, about 1e4, times rounding.
    expect(relativeGap(x.map((v) => v - 1), mean)).toBeLessThan(1e-8);
  });
  it('has the declared deviation where no boundary is near (Lindgren, Rue, Lindstrom 2011)', () => {
    const fine = syntheticProblem({ side: 25, data: 2 });
    const rows = fine.penalty('gradient');
    const k = Matrix.zeros(625, 625);
    for (let i = 0; i < rows.rows; i++)
      for (let p = rows.rowStart[i]; p < rows.rowStart[i + 1]; p++)
        for (let q = rows.rowStart[i]; q < rows.rowStart[i + 1]; q++) k.set(rows.columns[p], rows.columns[q], k.get(rows.columns[p], rows.columns[q]) + rows.values[p] * rows.values[q]);
    const w = fine.unknownWeights[0];
    const l = 0.2;
    for (let j = 0; j < 625; j++) k.set(j, j, k.get(j, j) + w / (l * l));
    const unit = Matrix.zeros(625, 1);
    unit.set(312, 0, 1);
    // Variance (B^{-1} M B^{-1})_jj / tau^2 = w ||B^{-1} e_j||^2 / tau^2.
    const column = solve(k, unit).to1DArray();
    const variance = (w * column.reduce((sum, v) => sum + v * v, 0) * 4 * Math.PI) / (l * l);
    // Cells of 0.08 against a length of 0.2, boundary five lengths away: a few per cent.
    expect(Math.abs(Math.sqrt(variance) - 1)).toBeLessThan(0.05);
  });
});
