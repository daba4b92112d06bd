import { cleanup, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { Ranking } from '../../../shared/contracts/benches';
import { barAxis } from '../../../app/components/charts/interval-bar';
import { rankingColumns, RankingTable, standardColumns } from '../../../app/features/benches/components/ranking-table';
import { shortNames } from '../../../app/features/benches/model/names';
import { rankingGroups } from '../../../app/features/benches/model/ranking-groups';
import { advise, marginWords, tieWords } from '../../../app/features/benches/model/advice';
import { toBenchRequest, emptyBenchForm } from '../../../app/features/benches/model/bench-form';

afterEach(cleanup);

type Row = Ranking['rows'][number];
const row = (slug: string, rank: number | null, tieGroup: number | null, median: number, extra: Partial<Row> = {}): Row => ({
  glyph: 0, solver: { slug, id: `SV-${slug}`, name: `Solver ${slug}`, version: 1 }, group: { slug: 'holm', name: 'Holm' }, rank, tieGroup, meanRank: rank,
  median, p05: median * 0.8, p95: median * 1.2, medians: { 'relative-l2-error': median, 'sup-error': 0.3, 'position-error': 0.02 }, breakdown: null, breakdownNote: 'beyond', exponent: 0.5,
  secondsPerReconstruction: 0.012, timeRatio: 1.2, onFront: true, dominatedBy: null, review: 'signed-off', reservations: [], runs: [{ run: `RN-${slug}`, phantom: 'lobes', state: 'finished', review: 'signed-off' }], complete: true, ...extra,
});
const ranking = (rows: Row[], extra: Partial<Ranking> = {}): Ranking => ({
  noise: 0.01, metric: 'relative-l2-error', interpolated: false, level: 0.01, belowFloor: false, over: 'level', levels: [0.01], rows, trivial: 1,
  test: { name: 'Friedman', blocks: 6, fewest: 3, enough: true, chiSquare: 8, statistic: 1, pValue: 0.01, exact: true, criticalDifference: 1, separable: true, words: '' }, wins: [], ...extra,
});
const three = [row('a', 1, 1, 0.146), row('b', 1, 1, 0.153), row('c', 3, 2, 0.264, { breakdown: 0.074, breakdownNote: null, review: 'signed-off-with-reservation', reservations: ['Above 2 % not trained.'] })];

function show(data: Ranking, onFocus = vi.fn(), focus: string | null = null) {
  render(
    <MemoryRouter>
      <RankingTable ranking={data} axis={barAxis([0.1, 0.4], 1)} ladderEnd={0.3} focus={focus} onFocus={onFocus} rowPath={(r) => `/runs/${r.runs[0]?.run}`} columns={rankingColumns('relative-l2-error', 0.3, data).filter((c) => standardColumns.has(c.key))} />
    </MemoryRouter>,
  );
  return onFocus;
}

describe('ranking table', () => {
  it('gives one rank to a tie group and says how many are tied', () => {
    show(ranking(three));
    const [first, second, third] = screen.getAllByRole('row').slice(1);
    expect(first?.querySelector('td.rank')).toMatchObject({ rowSpan: 2, textContent: '12 tied' });
    expect(second?.querySelector('td.rank')).toBeNull();
    expect(third?.querySelector('td.rank')?.textContent).toBe('3');
  });

  it('shows both norms, the breakdown and the review in words', () => {
    show(ranking(three));
    const rowOf = (name: string): HTMLElement => {
      const found = screen.getByText(name).closest('tr');
      if (!found) throw new Error(`${name} stands in no row.`);
      return found;
    };
    const last = within(rowOf('Solver c'));
    expect(last.getByText('0.264')).toBeTruthy();
    expect(last.getByText('0.300')).toBeTruthy();
    expect(last.getByText(/^7\.4/)).toBeTruthy();
    expect(last.getByText('With a reservation')).toBeTruthy();
    expect(within(rowOf('Solver a')).getByText(/> 30/)).toBeTruthy();
  });

  it('ends with the trivial reconstruction', () => {
    show(ranking(three));
    const rows = screen.getAllByRole('row');
    expect(rows[rows.length - 1]?.textContent).toContain('Trivial, plain background1.00');
  });

  it('keeps the rows and drops ranks and brackets below the model-error floor', () => {
    show(ranking(three.map((r) => ({ ...r, rank: null, tieGroup: null })), { belowFloor: true }));
    expect(screen.getAllByRole('row')).toHaveLength(5);
    expect(document.querySelector('.tie')).toBeNull();
    expect(screen.getAllByText('no rank')).toHaveLength(3);
  });

  it('is focused by mouse and by keyboard', async () => {
    const onFocus = show(ranking(three));
    const user = userEvent.setup();
    await user.click(screen.getByText('0.153'));
    expect(onFocus).toHaveBeenLastCalledWith('b');
    screen.getByRole('button', { name: 'Follow Solver a in the charts' }).focus();
    await user.keyboard('{Enter}');
    expect(onFocus).toHaveBeenLastCalledWith('a');
    expect(onFocus).toHaveBeenCalledTimes(2);
  });

  it('says what keeps a row from its rank', () => {
    show(ranking([row('a', null, null, 0.2, { complete: false, runs: [{ run: 'RN-1', phantom: 'lobes', state: 'failed', review: 'unreviewed' }] })]));
    expect(screen.getByText('Failed on 1 phantom')).toBeTruthy();
  });
});

describe('model of the bench pages', () => {
  it('groups neighbours of one tie group only', () => {
    expect(rankingGroups([...three, row('d', null, null, 1), row('e', null, null, 2)]).map((g) => g.rows.length)).toEqual([2, 1, 1, 1]);
  });

  it('tells solvers of one method apart in short names', () => {
    const short = shortNames(['Tikhonov, gradient penalty', 'Tikhonov, identity penalty', 'CGLS, early stopping', 'Learned post-processing']);
    expect(['Tikhonov, gradient penalty', 'CGLS, early stopping', 'Learned post-processing'].map(short)).toEqual(['Tikhonov, gradient', 'CGLS', 'Learned post-proce\u2026']);
  });

  it('advises within the time budget and by what matters', () => {
    const rows = [row('slow', 1, 1, 0.1, { secondsPerReconstruction: 20 }), row('fast', 2, 2, 0.2, { secondsPerReconstruction: 0.004, breakdown: 0.05, breakdownNote: null }), row('useless', 3, 3, 0.95, { secondsPerReconstruction: 0.001 })];
    const data = ranking(rows);
    expect(advise(data, 'overall', Infinity).map((r) => r.solver.slug)).toEqual(['slow', 'fast', 'useless']);
    expect(advise(data, 'overall', 1).map((r) => r.solver.slug)).toEqual(['fast', 'useless']);
    expect(advise(data, 'time', Infinity).map((r) => r.solver.slug)).toEqual(['fast', 'slow']);
    expect(advise(data, 'worse-noise', Infinity).map((r) => r.solver.slug)).toEqual(['slow', 'fast']);
  });

  it('says how near the breakdown is and what cannot be separated', () => {
    expect(marginWords({ breakdown: 0.074, breakdownNote: null }, 0.05, 0.3)).toMatch(/^Near its limit/);
    expect(marginWords({ breakdown: 0.02, breakdownNote: null }, 0.05, 0.3)).toMatch(/^Past its breakdown/);
    expect(marginWords({ breakdown: null, breakdownNote: 'beyond' }, 0.05, 0.3)).toMatch(/^Holds up to 30/);
    expect(tieWords(three[0]!, ranking(three))).toBe('Cannot be separated from one other.');
    expect(tieWords(three[2]!, ranking(three))).toBe('');
    const few = { ...ranking(three).test, blocks: 2, enough: false };
    expect(tieWords({ ...three[0]!, tieGroup: null }, ranking(three, { test: few }))).toBe('2 phantoms are too few to separate it from others.');
  });

  it('reads a bench form, levels in per cent', () => {
    const form = { ...emptyBenchForm('tarn', 7), title: 'Buried inclusions', question: 'Which method recovers them?', phantoms: ['lobes@2'], ladder: '0.1, 1 10' };
    expect(toBenchRequest(form).request).toMatchObject({ phantoms: [{ slug: 'lobes', version: 2 }], ladder: [0.001, 0.01, 0.1], draws: 24, seed: 7 });
    const faulty = toBenchRequest({ ...form, phantoms: [], ladder: '1, 0.1', draws: '' });
    expect([...(faulty.errors?.keys() ?? [])].sort()).toEqual(['draws', 'ladder', 'phantoms']);
  });
});
