import { cleanup, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { BenchComparison, Ranking } from '../../../shared/contracts/benches';
import { MeanRankStrip } from '../../../app/components/charts/mean-rank-strip';
import { ParetoChart } from '../../../app/components/charts/pareto-chart';
import { ProfileChart } from '../../../app/components/charts/profile-chart';
import { rankingWords } from '../../../app/features/benches/components/ranking-panel';
import { Compared } from '../../../app/features/benches/components/who-beats-whom';
import { blockWords, ratioCell, testWords } from '../../../app/features/benches/model/comparison-view';

afterEach(cleanup);

const solver = (slug: string) => ({ slug, id: `SV-${slug}`, name: `Solver ${slug}`, version: 1 });
const test: BenchComparison['test'] = {
  name: 'Friedman with Nemenyi distance over 3 phantoms', blocks: 3, fewest: 3, enough: true, chiSquare: 6, statistic: null, pValue: 1 / 36, exact: true, criticalDifference: 1.91, separable: true, words: 'Two groups can be separated over three phantoms.',
};
const comparison: BenchComparison = {
  noise: 0.01, metric: 'relative-l2-error', over: 'level', level: 0.01, levels: [0.01], belowFloor: false, blocks: 'phantoms', phantom: null,
  solvers: [{ glyph: 0, solver: solver('a'), meanRank: 1, tieGroup: 0 }, { glyph: 1, solver: solver('b'), meanRank: 2, tieGroup: 0 }, { glyph: 2, solver: solver('c'), meanRank: 3, tieGroup: 1 }],
  test,
  pairs: [
    { first: 0, second: 1, wins: 1, pValue: 0.25, pHolm: 0.75, separable: false, ratio: { value: 0.8, low: 0.7, high: 0.95, firstBetter: 0.98, separable: true }, reason: null },
    { first: 0, second: 2, wins: 1, pValue: 0.25, pHolm: 0.75, separable: false, ratio: { value: 0.5, low: 0.4, high: 0.6, firstBetter: 1, separable: true }, reason: null },
    { first: 1, second: 2, wins: 1, pValue: 0.25, pHolm: 0.75, separable: false, ratio: null, reason: 'A median error is undefined or not positive: there is no ratio.' },
  ],
  fewestPairs: 7, pairWords: 'Not enough phantoms for signed ranks: 3, and with 3 pairs corrected at least 7 are needed to reach 5 %.', resamples: 1000,
  profile: { problems: 4, unsolved: 0, items: [{ solver: 0, ratios: [1, 1, 1, 1] }, { solver: 1, ratios: [1, 1.3, 1.8] }] }, profileWords: '4 problems.',
};
const row = (slug: string, tieGroup: number | null): Ranking['rows'][number] => ({
  glyph: 0, solver: solver(slug), group: { slug: 'holm', name: 'Holm' }, rank: tieGroup === null ? null : tieGroup + 1, tieGroup, meanRank: 1, median: 0.1, p05: 0.05, p95: 0.2, medians: {}, breakdown: null, breakdownNote: 'beyond', exponent: null,
  secondsPerReconstruction: 0.01, timeRatio: 1, onFront: true, dominatedBy: null, review: 'signed-off', reservations: [], runs: [], complete: true,
});
const ranking: Ranking = {
  noise: 0.01, metric: 'relative-l2-error', interpolated: false, level: 0.01, belowFloor: false, over: 'level', levels: [0.01], rows: [row('a', 0), row('b', 0), row('c', 1)], trivial: 1, test,
  wins: [[null, 0.75, 1], [0.25, null, 0.9], [0, 0.1, null]],
};
const show = (data: BenchComparison) => render(<MemoryRouter><Compared comparison={data} ranking={ranking} /></MemoryRouter>);

describe('who beats whom', () => {
  it('says what a block is and how p was found', () => {
    show(comparison);
    expect(screen.getByText('Two groups can be separated over three phantoms.')).toBeTruthy();
    expect(blockWords(comparison)).toMatch(/^A block is a phantom: its median over draws at 1/);
    expect(blockWords({ ...comparison, blocks: 'draws', phantom: { slug: 'p', name: 'Two lobes' } })).toMatch(/draw of Two lobes.*not for others/);
    expect(blockWords({ ...comparison, over: 'ladder', levels: [0.001, 0.1] })).toMatch(/the mean, over two levels/);
    expect(testWords(comparison)).toBe('Friedman with ties χ² = 6.00, p = 0.028 by counting all orders; Nemenyi distance 1.91.');
  });
  it('draws a bracket for each tie group in the order of the test, and has a table', () => {
    const { container } = show(comparison);
    expect(container.querySelectorAll('.tie-bracket')).toHaveLength(1);
    const table = screen.getByRole('table', { name: 'Mean rank of each solver with critical difference bars' });
    expect(within(table).getAllByRole('row').map((tr) => tr.textContent)).toEqual(['SolverMean rankTie group', 'Solver a1.001', 'Solver b2.001', 'Solver c3.002']);
  });
  it('tells a pair in a sentence, both ways round, and says where signed ranks cannot decide', () => {
    const names = ['A', 'B', 'C'];
    expect(ratioCell(comparison, names, 0, 2)).toMatchObject({ text: '0.50', separable: false, words: 'A to C: error × 0.50, 95 % interval 0.40 to 0.60, from 3 phantoms too short; smaller in 100 % of resamples. 3 phantoms: too few for signed ranks, which need 7.' });
    expect(ratioCell(comparison, names, 2, 0)).toMatchObject({ text: '2.00', ahead: 0 });
    expect(ratioCell(comparison, names, 2, 0)!.words).toMatch(/interval 1.67 to 2.50.*smaller in 0 %/);
    expect(ratioCell(comparison, names, 1, 2)!.words).toMatch(/no ratio/);
    const many = { ...comparison, test: { ...test, blocks: 12 }, pairs: comparison.pairs.map((pair) => ({ ...pair, pHolm: 0.004, separable: true })) };
    expect(ratioCell(many, names, 0, 1)).toMatchObject({ separable: true, words: expect.stringMatching(/Signed ranks over 12 phantoms: p = 0.004 corrected, separable\.$/) });
  });
  it('is walked with the arrow keys, one stop in the tab order', async () => {
    show(comparison);
    const user = userEvent.setup();
    const grid = screen.getByRole('table', { name: /^Ratio of errors/ });
    const cells = within(grid).getAllByRole('button');
    expect(cells.filter((cell) => cell.tabIndex === 0)).toHaveLength(1);
    cells.find((cell) => cell.tabIndex === 0)!.focus();
    await user.keyboard('{ArrowRight}');
    expect(document.activeElement?.textContent).toBe('0.50, not separable');
    expect(screen.getByText(/^Solver a to Solver c: error × 0\.50/)).toBeTruthy();
    await user.keyboard('{ArrowRight}');
    expect(document.activeElement?.textContent).toBe('0.50, not separable');
  });
  it('switches to draws won, of all phantoms together', async () => {
    show(comparison);
    await userEvent.setup().click(screen.getByRole('button', { name: 'Draws won, %' }));
    const grid = screen.getByRole('table', { name: /^Paired draws won/ });
    expect(within(grid).getAllByRole('button').map((cell) => cell.textContent?.split(',')[0])).toEqual(['75', '100', '25', '90', '0', '10']);
  });
  it('gives no bars and no winner where the phantoms are too few', () => {
    const words = 'Not enough phantoms to separate: one phantom, and for three solvers the tests need at least three to reach 5 %. No winner is named.';
    const few = { ...test, name: 'No test', blocks: 1, enough: false, chiSquare: null, pValue: null, exact: false, criticalDifference: null, separable: false, words };
    const { container } = show({ ...comparison, test: few, solvers: comparison.solvers.map((own) => ({ ...own, tieGroup: null })) });
    expect(screen.getByText(words)).toBeTruthy();
    expect(container.querySelector('.tie-bracket')).toBeNull();
    expect(rankingWords({ draws: 24, floorPhantom: null }, { ...ranking, test: few })).toContain('Not enough phantoms to separate: one phantom');
    expect(rankingWords({ draws: 24, floorPhantom: null }, ranking)).toContain('Brackets mark statistical ties over phantoms.');
    expect(rankingWords({ draws: 24, floorPhantom: null }, { ...ranking, over: 'ladder', levels: [0.01, 0.1] })).toContain('Ranks are of the mean over two levels.');
  });
});

describe('charts', () => {
  it('the strip keeps the order it is given', () => {
    render(<MeanRankStrip criticalDifference={null} items={[{ id: 'x', glyph: 0, name: 'X', meanRank: 1.5, tieGroup: null }, { id: 'y', glyph: 1, name: 'Y', meanRank: 1.5, tieGroup: null }]} />);
    expect(screen.getAllByRole('rowheader').map((cell) => cell.textContent)).toEqual(['X', 'Y']);
  });
  it('the profile has its figures in a table whose rows follow a solver', async () => {
    const onFocus = vi.fn();
    render(<ProfileChart label="Profiles" problems={4} focusId={null} onFocus={onFocus} curves={[{ id: 'a@1', glyph: 0, name: 'A', ratios: [1, 1, 1, 1] }, { id: 'b@1', glyph: 1, name: 'B', ratios: [1, 1.3, 1.8] }]} />);
    expect(screen.getByRole('img', { name: 'Profiles' })).toBeTruthy();
    // B: best in one of four, within 1.5 in two, within 2 in three, and one problem without an answer.
    expect(screen.getAllByRole('row').map((tr) => [...tr.querySelectorAll('td')].map((td) => td.textContent))).toEqual([[], ['100', '100', '100', '100', '100'], ['25', '50', '75', '75', '75']]);
    await userEvent.setup().click(screen.getByRole('button', { name: /B$/ }));
    expect(onFocus).toHaveBeenCalledWith('b@1');
  });
  it('the front says who is behind whom, and names what has no time', () => {
    const point = (id: string, error: number | null, seconds: number | null, onFront: boolean | null, dominatedBy: string | null = null) => ({ id, glyph: 0, name: id, error, seconds, onFront, dominatedBy });
    render(<ParetoChart label="Front" errorName="Relative L2" trivial={1} focusId={null} points={[point('Fast', 0.5, 0.01, true), point('Good', 0.1, 1, true), point('Poor', 0.6, 0.5, false, 'Fast'), point('Untimed', 0.2, null, null)]} />);
    expect(screen.getByText('Not placed, for want of a time or an error: Untimed.')).toBeTruthy();
    const cells = screen.getAllByRole('row').map((tr) => tr.lastElementChild?.textContent);
    expect(cells).toEqual(['Place', 'on the front', 'on the front', 'behind Fast', 'not placed']);
  });
  it('no point, no axes: the table alone', () => {
    render(<ParetoChart label="Front" errorName="Relative L2" trivial={null} focusId={null} points={[]} />);
    expect(screen.queryByRole('img')).toBeNull();
  });
});
