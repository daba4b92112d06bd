import { describe, expect, it } from 'vitest';
import { levelTable, runSheet } from '../../../api/services/figures/run-tables.ts';

/** A run finished before a metric existed has no column for it. */
describe('a metric that is younger than the run', () => {
  const ladder = [0.001, 0.01, 0.1];
  const figures = { draws: 2, values: new Map([['relative-l2-error', Float64Array.of(0.1, 0.2, 0.3, 0.4, 0.5, 0.6)]]), reasons: new Map() } as unknown as Parameters<typeof levelTable>[0];
  it('has an empty row a level', () => {
    for (const key of ['ssim-score', 'relative-h1-error', 'ringing']) {
      const rows = levelTable(figures, ladder, key);
      expect(rows).toHaveLength(3);
      for (const row of rows) expect([row.count, row.median, row.reason]).toEqual([0, null, expect.any(String)]);
    }
    expect(levelTable(figures, ladder, 'relative-l2-error')[0]?.count).toBe(2);
  });
  it('has a stability sheet that says why it is empty', () => {
    const sheet = runSheet({ id: 'run', axis: null, ladder, trivial: { 'relative-l2-error': 1 } }, figures, 'relative-h1-error');
    expect(JSON.stringify(sheet)).not.toMatch(/NaN|Infinity/);
  });
});
