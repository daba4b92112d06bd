import { describe, expect, it } from 'vitest';
import { momentsGroup, tableGroups } from '../../../app/features/runs/model/error-table';

const moments = { biasSquared: 0.04, variance: 0.01, meanSquaredError: 0.05, draws: 24, reason: null };

describe('groups of the error table', () => {
  it('end with bias and variance where the run has them', () => {
    const groups = tableGroups({ table: { 'relative-l2-error': [] }, moments: [null, moments] });
    expect(groups.map((group) => group.key)).toEqual(['relative-l2-error', momentsGroup]);
    expect(groups[1]!.columns).toEqual(['biasSquared', 'variance', 'meanSquaredError']);
  });
  it('leave them out for a run older than they are', () => {
    expect(tableGroups({ table: { 'relative-l2-error': [] }, moments: [null, null] }).map((group) => group.key)).toEqual(['relative-l2-error']);
  });
});
