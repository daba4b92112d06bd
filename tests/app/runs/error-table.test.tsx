import { cleanup, render, screen } from '@testing-library/react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { ErrorLevels, ErrorTable, type TableRun } from '../../../app/features/runs/components/error-table';
import { momentsGroup, tableGroups } from '../../../app/features/runs/model/error-table';

afterEach(cleanup);

const moments = { biasSquared: 0.04, variance: 1e-5, meanSquaredError: 0.04001, draws: 24, reason: null };

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

describe('error table', () => {
  const row = (level: number) => ({ level, count: 2, median: 0.2, mean: 0.2, sd: 0.01, p05: 0.19, p95: 0.21, worst: 0.21, medianDraw: 0, worstDraw: 1, draws: [0.19, 0.21], reason: null });
  const run: TableRun = { glyph: 0, ladder: [0.01, 0.1], modelErrorFloor: 0, table: { 'relative-l2-error': [row(0.01), row(0.1)] }, trivial: { 'relative-l2-error': 1 }, moments: [moments, null] };
  const props = { run, shown: new Set([momentsGroup]), current: 0, onLevel: vi.fn() };
  it('shows squared bias, variance and their sum by level, and says why a level has none', () => {
    render(<ErrorTable {...props} />);
    expect(screen.getAllByRole('columnheader').map((head) => head.textContent)).toEqual(expect.arrayContaining(['Bias and variance of the image, squares', 'bias²', 'variance', 'sum']));
    const [first, second] = screen.getAllByRole('row').slice(2);
    expect([...first!.querySelectorAll('td')].slice(-3).map((cell) => cell.textContent)).toEqual(['0.0400', '1.00\u00a0×\u00a010⁻⁵', '0.0400']);
    const last = [...second!.querySelectorAll('td')].slice(-3);
    expect(last.map((cell) => cell.textContent)).toEqual(['–', '–', '–']);
    expect(last[0]!.title).toMatch(/^Not computed/);
  });
  it('has them on a phone too', () => {
    render(<ErrorLevels {...props} />);
    expect(screen.getAllByText('bias²')).toHaveLength(2);
  });
});
