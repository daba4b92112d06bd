import { describe, expect, it } from 'vitest';
import { momentsOf } from '../../../api/jobs/level-moments.ts';
import { discDefinition } from '../../support/registry-fixture.ts';

const input = { definition: discDefinition(0.02), truthImage: Float64Array.of(1, 1, 2, 2), cases: null };
const row = (draw: number, error: number | null) => ({ draw, metrics: { 'relative-l2-error': error, 'position-error': null } });
const images = new Map([[0, Float64Array.of(1, 1, 2, 2)], [1, Float64Array.of(1, 1, 1, 1)], [2, Float64Array.of(1, 1, 2, 1)]]);

describe('bias and variance of a level', () => {
  it('do not depend on the order in which the draws came in', () => {
    const rows = [row(0, 0), row(1, 1), row(2, 0.7)];
    const found = momentsOf(rows, images, input, 0);
    expect(momentsOf([...rows].reverse(), new Map([...images].reverse()), input, 0)).toEqual(found);
    // Errors 0, 1 and sqrt(1/2) of a truth at distance sqrt(2) from its background: mean square (0 + 1 + 1/2) / 3.
    expect(found!.meanSquaredError).toBeCloseTo(0.5, 14);
  });
  it('wait for every image', () => expect(momentsOf([row(0, 0), row(3, 1)], images, input, 0)).toBeNull());
  it('leave out draws without a finite image, and say so', () => {
    expect(momentsOf([row(0, 0), row(1, null)], images, input, 0)).toMatchObject({ draws: 1, biasSquared: 0, variance: 0, reason: '1 of 2 draws gave no finite image and are left out.' });
    expect(momentsOf([row(0, null)], images, input, 0)).toMatchObject({ draws: 0, biasSquared: null, reason: 'No draw gave a finite image.' });
  });
});
