import { describe, expect, it } from 'vitest';
import { evaluationGrid } from '../../../solvers/core/grid';
import type { EvaluationGrid, MetricInput, Target } from '../../../solvers/core/types';
import { gridGeometry } from '../../../solvers/metrics/grid-geometry';
import { evaluateMetrics } from '../../../solvers/metrics/registry';

const line = evaluationGrid({ nx: 120, ny: 1, xMin: -2, xMax: 4, yMin: 0, yMax: 1, body: { kind: 'interval', from: -2, to: 4 } });
const curve = (grid: EvaluationGrid, f: (x: number, y: number) => number): Float64Array => {
  const { x, y } = gridGeometry(grid);
  return x.map((v, k) => f(v, y[k]));
};
const input = (truth: Float64Array, estimate: Float64Array, background = 0, grid = line, targets: readonly Target[] = []): MetricInput => ({
  truth, estimate, background: new Float64Array(truth.length).fill(background), grid, targets, residualNorm: null, noiseNorm: 0,
});
const gaussian = (centre: number, sigma: number, height = 1, base = 0) => (x: number) => base + height * Math.exp(-((x - centre) ** 2) / (2 * sigma * sigma));

describe('figures of a peak on a line', () => {
  const truth = curve(line, gaussian(0.7, 0.4));
  it('follow a Gaussian: its place, and 2 sqrt(2 ln 2) deviations at half height (closed form)', () => {
    const values = evaluateMetrics(input(truth, curve(line, gaussian(1.013, 0.6, 0.8))));
    // Half the length is 3. The parabola is off by some thousandths of a cell of 0.05, the chords at half height by less.
    expect(values['peak-position-error'].value).toBeCloseTo(0.313 / 3, 4);
    expect(values['full-width-half-maximum'].value).toBeCloseTo(0.5, 2);
  });
  it('do not mind the sign of the contrast, a background or the height', () => {
    const up = evaluateMetrics(input(truth, curve(line, gaussian(1, 0.6))));
    const down = evaluateMetrics(input(curve(line, gaussian(0.7, 0.4, -1, 3)), curve(line, gaussian(1, 0.6, -0.25, 3)), 3));
    for (const key of ['peak-position-error', 'full-width-half-maximum']) expect(down[key].value).toBeCloseTo(up[key].value!, 12);
  });
  it('are exact for a triangle and for the middle of a flat top', () => {
    const triangle = (x: number): number => Math.max(0, 1 - Math.abs(x - 0.975) / 1.5);
    const top = (x: number): number => (x > 0 && x < 1 ? 1 : 0);
    const values = evaluateMetrics(input(curve(line, triangle), curve(line, top)));
    expect(values['peak-position-error'].value).toBeCloseTo(0.475 / 3, 12);
    // Half height: 1.5 of the triangle; of the top, half a cell beyond its outermost centres, which is 1.
    expect(values['full-width-half-maximum'].value).toBeCloseTo(0.5 / 1.5, 12);
  });
  it('say why they are not defined', () => {
    const reasons = (i: MetricInput): (string | undefined)[] => ['peak-position-error', 'full-width-half-maximum'].map((key) => {
      const value = evaluateMetrics(i)[key];
      expect(value.value).toBeNull();
      return value.reason;
    });
    expect(reasons(input(curve(line, (x) => x), truth))).toEqual(Array(2).fill('The truth is largest at an end of the line: it has no peak.'));
    expect(reasons(input(new Float64Array(120), truth))).toEqual(Array(2).fill('The truth equals the background: it has no peak.'));
    expect(reasons(input(truth, new Float64Array(120)))).toEqual(Array(2).fill('The estimate does not rise above the background, as the truth does.'));
    const square = evaluationGrid({ nx: 12, ny: 12, xMin: -1, xMax: 1, yMin: -1, yMax: 1, body: { kind: 'rectangle', width: 2, height: 2 } });
    expect(reasons(input(curve(square, gaussian(0, 0.4)), curve(square, gaussian(0, 0.4)), 0, square))).toEqual(Array(2).fill('The figure is defined on a line.'));
  });
  it('leave out a width that runs into an end', () => {
    const wide = evaluateMetrics(input(truth, curve(line, gaussian(1, 6))));
    expect(wide['peak-position-error'].value).toBeCloseTo(0.1, 3);
    expect(wide['full-width-half-maximum']).toEqual({ value: null, reason: 'The estimate does not fall to half its height on both sides of its peak.' });
  });
});

describe('figures of images on a line', () => {
  const truth = curve(line, (x) => Math.sin(x));
  const estimate = curve(line, (x) => Math.sin(x) + 0.1 * Math.cos(3 * x));
  const values = evaluateMetrics(input(truth, estimate));
  it('approach the integrals over the interval', () => {
    // Closed forms of the integrals over [-2, 4]; midpoint sums of 120 cells are off by 1e-3 of them at most.
    const sinSquares = 3 - (Math.sin(8) + Math.sin(4)) / 4;
    const cosSquares = 3 + (Math.sin(24) + Math.sin(12)) / 12;
    expect(values['relative-l2-error'].value).toBeCloseTo(Math.sqrt((0.01 * cosSquares) / sinSquares), 3);
    const slopeError = 0.09 * (3 - (Math.sin(24) + Math.sin(12)) / 12);
    const slope = 3 + (Math.sin(8) + Math.sin(4)) / 4;
    // Differences of neighbours leave out half a cell at each end, 1 % of the length.
    expect(Math.abs(values['relative-h1-error'].value! / Math.sqrt(slopeError / slope) - 1)).toBeLessThan(0.02);
  });
  it('name the place of the largest error on the line', () => {
    const [x, y] = values['sup-error'].at!;
    expect(Math.abs(Math.cos(3 * x))).toBeGreaterThan(0.99);
    expect(y).toBe(0.5);
  });
  it('have no structural similarity and no figures of targets, and say why', () => {
    expect(values['ssim-score']).toEqual({ value: null, reason: 'No window of 11 x 11 pixels fits into the body.' });
    for (const key of ['position-error', 'radial-position-difference', 'resolution', 'shape-deformation', 'ringing', 'amplitude-response']) expect(values[key]).toEqual({ value: null, reason: 'The phantom declares no target.' });
  });
});

describe('figures of images on a rectangle', () => {
  // Pixels twice as wide as high.
  const grid = evaluationGrid({ nx: 40, ny: 30, xMin: -2, xMax: 2, yMin: -0.75, yMax: 0.75, body: { kind: 'rectangle', width: 4, height: 1.5 } });
  const spot = (cx: number, cy: number) => curve(grid, (x, y) => ((x - cx) ** 2 + (y - cy) ** 2 <= 0.3 ** 2 ? 1 : 0));
  const target: Target = { label: 't', x: -0.9, y: 0.1, area: Math.PI * 0.09, contrast: 1 };
  const values = evaluateMetrics(input(spot(-0.9, 0.1), spot(-0.6, -0.3), 0, grid, [target]));
  it('measure distances in metres over half the longer side', () => {
    // A disc of 0.3 m moved by 0.5 m; half the longer side is 2 m. The pixels' centroid is off by a few thousandths of a metre.
    expect(values['position-error'].value).toBeCloseTo(0.25, 2);
    expect(values['radial-position-difference'].value).toBeCloseTo((Math.hypot(-0.9, 0.1) - Math.hypot(-0.6, -0.3)) / 2, 2);
    expect(values.resolution.value).toBeCloseTo(Math.sqrt((Math.PI * 0.09) / 6), 2);
    expect(values['amplitude-response'].value).toBeCloseTo(1, 1);
  });
  it('weigh slopes by the sides of the pixels', () => {
    const along = evaluateMetrics(input(curve(grid, (x) => x), curve(grid, (x, y) => x + y), 0, grid));
    // |grad(y)| = |grad(x)| = 1 over areas without the outer half pixels: (1 - 1/30) and (1 - 1/40) of the rectangle.
    expect(along['relative-h1-error'].value).toBeCloseTo(Math.sqrt((1 - 1 / 30) / (1 - 1 / 40)), 12);
  });
});
