import { describe, expect, it } from 'vitest';
import { unitGeometry } from '../../support/impedance-case';
import { denseMatrix } from '../../../solvers/core/matrix-operator';
import { applySparse, applySparseTransposed, sparseTimesDense, sparseTransposedTimesDense } from '../../../solvers/core/sparse';
import { norm2 } from '../../../solvers/core/vector';
import { frameSpectrum, spectralSystem } from '../../../solvers/methods/spectral-system';
import { createEitInversion } from '../../../solvers/problems/electrical-impedance/inversion-problem';

const detail = { cellMin: 0.12, cellMax: 0.16, grading: 1, elementMin: 0.01 };

describe('the basis of reciprocal data', () => {
  it.each([
    // L (L - 3) / 2 pairs of equal values; L (L + 1) / 2 with the driven pairs; a symmetric matrix on the L - 1 patterns.
    { pattern: 'adjacent', measurement: 'adjacent-undriven', count: 20 },
    { pattern: 'adjacent', measurement: 'adjacent-all', count: 36 },
    { pattern: 'trigonometric', measurement: 'electrode-voltages', count: 28 },
  ] as const)('holds every derivative: $pattern, $measurement', ({ pattern, measurement, count }) => {
    const problem = createEitInversion(unitGeometry({ electrodes: 8, pattern, measurement }), 1, 'difference', detail);
    const basis = problem.dataBasis;
    if (!basis) throw new Error('This problem has a basis.');
    expect([basis.rows, basis.cols]).toEqual([count, problem.dataSize]);
    const unit = new Float64Array(count);
    const image = new Float64Array(problem.dataSize);
    const back = new Float64Array(count);
    for (let i = 0; i < count; i++) {
      unit.fill(0);
      unit[i] = 1;
      applySparseTransposed(basis, unit, image);
      applySparse(basis, image, back);
      expect(norm2(back.map((value, j) => value - unit[j]))).toBeLessThan(1e-14);
    }
    const x = problem.background().map((value, i) => value * (1 + 0.3 * Math.sin(i)));
    const jacobian = denseMatrix(problem.linearise(x));
    const kept = sparseTransposedTimesDense(basis, sparseTimesDense(basis, jacobian, problem.unknowns), problem.unknowns);
    // Rounding of the solves that made the derivative.
    expect(norm2(jacobian.map((value, i) => value - kept[i])) / norm2(jacobian)).toBeLessThan(1e-12);
  });

  it('leaves the decomposition as it was', () => {
    const problem = createEitInversion(unitGeometry({ electrodes: 8, pattern: 'trigonometric', measurement: 'electrode-voltages' }), 1, 'difference', detail);
    const plain = { ...problem, dataBasis: undefined };
    const small = spectralSystem(problem, 'gradient');
    const large = spectralSystem(plain, 'gradient');
    const top = large.singularValues[0];
    small.singularValues.forEach((value, k) => expect(Math.abs(value - large.singularValues[k]) / top).toBeLessThan(1e-13));
    // Noise is not reciprocal: both see the same share of it, component by component up to signs, and the same rest.
    const data = Float64Array.from({ length: problem.dataSize }, (_, i) => Math.sin(1 + i * i));
    const a = frameSpectrum(small, data);
    const b = frameSpectrum(large, data);
    for (let k = 0; k < 12; k++) expect(Math.abs(Math.abs(a.coefficients[k]) - Math.abs(b.coefficients[k]))).toBeLessThan(1e-8);
    expect(a.outside + norm2(a.coefficients) ** 2).toBeCloseTo(norm2(data) ** 2, 9);
  });

  it('is left out where frames have no such structure', () => {
    expect(createEitInversion(unitGeometry({ electrodes: 8, pattern: 'skip', skip: 1, measurement: 'electrode-voltages' }), 1, 'difference', detail).dataBasis).toBeUndefined();
  });
});
