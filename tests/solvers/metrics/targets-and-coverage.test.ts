import { describe, expect, it } from 'vitest';
import type { MetricInput, Target } from '../../../solvers/core/types';
import { gridGeometry } from '../../../solvers/metrics/grid-geometry';
import { evaluateMetrics } from '../../../solvers/metrics/registry';
import { discGrid } from '../../support/synthetic-problem';

const grid = discGrid(32);
const { x, y } = gridGeometry(grid);
const count = grid.inside.length;
const image = (discs: readonly (readonly [number, number, number, number])[]): Float64Array =>
  Float64Array.from({ length: count }, (_, k) => discs.reduce((value, [cx, cy, r, v]) => ((x[k] - cx) ** 2 + (y[k] - cy) ** 2 <= r * r ? v : value), 0));
const target = (tx: number, ty: number, contrast = 1): Target => ({ label: 't', x: tx, y: ty, area: 0.1, contrast });
const score = (truth: Float64Array, estimate: Float64Array, targets: Target[] = [], more: Partial<MetricInput> = {}) =>
  evaluateMetrics({ truth, background: new Float64Array(count), estimate, grid, targets, residualNorm: null, noiseNorm: 0, ...more });

describe('Dice overlap (Dice 1945: 2 |A and B| / (|A| + |B|))', () => {
  const truth = image([[0.3, 0, 0.3, 1]]);
  it('is 1 for the same region whatever the contrast, 0 apart, and counts pixels between', () => {
    expect(score(truth, truth.map((v) => 0.2 * v))['dice-score'].value).toBe(1);
    expect(score(truth, truth.map((v) => -3 * v))['dice-score'].value).toBe(1);
    expect(score(truth, image([[-0.5, 0, 0.2, 1]]))['dice-score'].value).toBe(0);
    const larger = image([[0.3, 0, 0.45, 1]]);
    const size = (v: Float64Array): number => v.reduce((sum, t) => sum + t, 0);
    expect(score(truth, larger)['dice-score'].value).toBeCloseTo((2 * size(truth)) / (size(truth) + size(larger)), 14);
    expect(score(truth, new Float64Array(count))['dice-score'].value).toBe(0);
    expect(score(new Float64Array(count), truth)['dice-score'].value).toBeNull();
  });
});

describe('missed and false targets', () => {
  const truth = image([[0.5, 0, 0.2, 1], [-0.5, 0, 0.2, 1]]);
  const targets = [target(0.5, 0), target(-0.5, 0)];
  it('are none where every target has a spot of its own', () => {
    expect(score(truth, truth, targets)).toMatchObject({ 'missed-targets-error': { value: 0 }, 'false-targets-error': { value: 0 } });
  });
  it('count a merged pair as one missed, and a third spot as one false', () => {
    expect(score(truth, image([[0, 0, 0.6, 1]]), targets)).toMatchObject({ 'missed-targets-error': { value: 1 }, 'false-targets-error': { value: 0 } });
    expect(score(truth, image([[0.5, 0, 0.2, 1], [-0.5, 0, 0.2, 1], [0, 0.6, 0.2, 1]]), targets)).toMatchObject({ 'missed-targets-error': { value: 0 }, 'false-targets-error': { value: 1 } });
  });
  it('miss all where nothing has the sign of the targets, and count parts for a single one too', () => {
    expect(score(truth, truth.map((v) => -v), targets)).toMatchObject({ 'missed-targets-error': { value: 2 }, 'false-targets-error': { value: 0 } });
    expect(score(truth, truth, [target(0.5, 0)])).toMatchObject({ 'false-targets-error': { value: 1 } });
    expect(score(truth, truth)['missed-targets-error'].value).toBeNull();
  });
});

describe('coverage of credible intervals', () => {
  it('is the share of pixels inside over the probability', () => {
    const truth = Float64Array.from({ length: count }, (_, k) => k % 2);
    const low = new Float64Array(count).fill(-0.5);
    const high = new Float64Array(count).fill(0.5);
    const zeros = truth.filter((v) => v === 0).length;
    expect(score(truth, truth, [], { interval: { low, high, probability: 0.9 } })['credible-coverage'].value).toBeCloseTo(zeros / count / 0.9, 14);
    expect(score(truth, truth)['credible-coverage']).toEqual({ value: null, reason: 'The method gives no distribution.' });
  });
});
