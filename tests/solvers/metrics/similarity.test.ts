import { describe, expect, it } from 'vitest';
import reference from '../../reference/structural-similarity.json';
import type { EvaluationGrid, MetricInput } from '../../../solvers/core/types';
import { gridGeometry } from '../../../solvers/metrics/grid-geometry';
import { peakSignalToNoise } from '../../../solvers/metrics/psnr-score';
import { evaluateMetrics } from '../../../solvers/metrics/registry';
import { structuralSimilarity } from '../../../solvers/metrics/structural-similarity';
import { discGrid } from '../../support/synthetic-problem';

const side = 24;
const square: EvaluationGrid = {
  nx: side, ny: side, xMin: 0, xMax: 1, yMin: 0, yMax: 1, mask: new Uint8Array(side * side).fill(1), inside: Int32Array.from({ length: side * side }, (_, k) => k), bodyRadius: 0.5, body: { kind: 'rectangle', width: 1, height: 1 },
};
const at = (k: number): [number, number] => [(k % side) / (side - 1), Math.floor(k / side) / (side - 1)];
const a = Float64Array.from(square.inside, (k) => Math.sin(3 * at(k)[0]) * Math.cos(2 * at(k)[1]) + at(k)[0] * at(k)[1]);
const b = Float64Array.from(square.inside, (k) => a[k] + 0.1 * Math.sin(9 * at(k)[0] + 7 * at(k)[1]));
const bound = reference.tolerance.absolute;

// Source and tolerance are in structural-similarity.json.
describe('against scikit-image', () => {
  it('the inputs are those of the reference', () => {
    reference.inputs.a_0_0_to_0_2.forEach((value, k) => expect(Math.abs(a[k] - value)).toBeLessThan(1e-15));
    reference.inputs.b_0_0_to_0_2.forEach((value, k) => expect(Math.abs(b[k] - value)).toBeLessThan(1e-15));
  });
  it('SSIM', () => {
    expect(Math.abs(structuralSimilarity(a, b, square, 2)! - reference.values.ssim_gauss_population_cov)).toBeLessThan(bound);
  });
  it('PSNR', () => {
    const squares = a.reduce((sum, value, k) => sum + (value - b[k]) ** 2, 0);
    expect(Math.abs(peakSignalToNoise(2, squares, a.length) - reference.values.psnr_db)).toBeLessThan(bound);
  });
});

describe('on a disc', () => {
  const grid = discGrid(64);
  const { x, y } = gridGeometry(grid);
  const truth = Float64Array.from(x, (v, k) => (v * v + (y[k] - 0.3) ** 2 <= 0.04 ? 3 : 1));
  const base: MetricInput = { truth, background: new Float64Array(truth.length).fill(1), estimate: truth, grid, targets: [], residualNorm: null, noiseNorm: 0 };
  it('equal images score 1, and have no finite PSNR', () => {
    const values = evaluateMetrics(base);
    // Identity of numerator and denominator, each rounded.
    expect(Math.abs(values['ssim-score'].value! - 1)).toBeLessThan(1e-14);
    expect(Math.abs(values['correlation-score'].value! - 1)).toBeLessThan(1e-14);
    expect(values['psnr-score'].value).toBeNull();
    expect(values['relative-h1-error'].value).toBe(0);
  });
  it('SSIM is the mean over the windows inside the body, each summed as it is written', () => {
    const estimate = Float64Array.from(truth, (v, k) => v + 0.1 * x[k]);
    const full = (image: Float64Array): Float64Array => {
      const out = new Float64Array(64 * 64);
      grid.inside.forEach((pixel, k) => (out[pixel] = image[k]));
      return out;
    };
    const [t, e] = [full(truth), full(estimate)];
    const weights = Array.from({ length: 121 }, (_, i) => Math.exp(-((Math.floor(i / 11) - 5) ** 2 + ((i % 11) - 5) ** 2) / 4.5));
    const whole = weights.reduce((sum, w) => sum + w, 0);
    const scores: number[] = [];
    for (let row = 5; row < 59; row++)
      for (let column = 5; column < 59; column++) {
        const cells = Array.from({ length: 121 }, (_, i) => (row - 5 + Math.floor(i / 11)) * 64 + column - 5 + (i % 11));
        if (!cells.every((cell) => grid.mask[cell])) continue;
        const mean = (f: (cell: number) => number): number => cells.reduce((sum, cell, i) => sum + (weights[i] / whole) * f(cell), 0);
        const [mt, me] = [mean((c) => t[c]), mean((c) => e[c])];
        const [vt, ve, cov] = [mean((c) => (t[c] - mt) ** 2), mean((c) => (e[c] - me) ** 2), mean((c) => (t[c] - mt) * (e[c] - me))];
        scores.push(((2 * mt * me + 0.02 ** 2) * (2 * cov + 0.06 ** 2)) / ((mt * mt + me * me + 0.02 ** 2) * (vt + ve + 0.06 ** 2)));
      }
    // Rounding of variances against c2 = 0.0036: 1e-16 / 0.0036 and some.
    expect(Math.abs(structuralSimilarity(truth, estimate, grid, 2)! - scores.reduce((sum, v) => sum + v, 0) / scores.length)).toBeLessThan(1e-12);
  });
  it('correlation is blind to scale and offset; the H1 error halves with the error', () => {
    const estimate = truth.map((v) => 1 + 0.5 * (v - 1));
    const values = evaluateMetrics({ ...base, estimate });
    expect(Math.abs(values['correlation-score'].value! - 1)).toBeLessThan(1e-14);
    expect(values['relative-h1-error'].value).toBe(0.5);
  });
  it('a truth changed in place is read anew', () => {
    const other = Float64Array.from(truth);
    const before = structuralSimilarity(other, truth, grid, 2)!;
    other.fill(1, 1500);
    expect(structuralSimilarity(other, truth, grid, 2)).toBe(structuralSimilarity(Float64Array.from(other), truth, grid, 2));
    expect(before).toBeGreaterThan(structuralSimilarity(other, truth, grid, 2)!);
  });
  it('are null with a reason where they are not defined', () => {
    const values = evaluateMetrics({ ...base, truth: base.background, estimate: base.background });
    for (const key of ['ssim-score', 'psnr-score', 'correlation-score', 'shape-deformation', 'ringing', 'relative-h1-error']) expect(values[key]).toEqual({ value: null, reason: expect.stringMatching(/\.$/) });
    const tiny = discGrid(8);
    expect(structuralSimilarity(new Float64Array(tiny.inside.length), new Float64Array(tiny.inside.length), tiny, 1)).toBeNull();
  });
});
