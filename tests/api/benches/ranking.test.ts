import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { RunEntity } from '../../../api/entities/run.ts';
import { comparisonSchema, rankingSchema, seriesSchema, type BenchComparison, type Ranking } from '../../../shared/contracts/benches.ts';
import { makeBench, type MadeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let bench: MadeBench;
const ladder = [0.001, 0.003, 0.01, 0.03, 0.1, 0.3];
const draws = 6;
const phantoms = 3;

/** Figures by formula: E = C noise^0.5 with a small deterministic scatter over draws, the same for all solvers (paired draws). */
const scatter = (phantom: number, draw: number): number => 1 + 0.02 * (((7 * phantom + 3 * draw) % 11) - 5);
const error = (constant: number) => (at: { phantom: number; draw: number; noise: number }): number => constant * Math.sqrt(at.noise) * scatter(at.phantom, at.draw) * (1 + 0.1 * at.phantom);
/** Beta is better than Gamma in exactly every second draw, so the two cannot be told apart. */
const beta = error(2);
const gamma = (at: { phantom: number; draw: number; noise: number }): number => beta(at) * (at.draw % 2 === 0 ? 1.001 : 0.999);

beforeAll(async () => {
  app = await startTestApp();
  bench = await makeBench(app, {
    title: 'Ranking bench', phantoms, ladder, draws, floor: 0.002,
    trivial: { 'relative-l2-error': 1, 'position-error': 0.5 },
    entries: [
      { solver: 'Alpha', figures: (at) => ({ 'relative-l2-error': error(1)(at), 'position-error': 0.01 + at.noise }), review: 'signed-off' },
      { solver: 'Beta', figures: (at) => ({ 'relative-l2-error': beta(at), 'position-error': null }), review: 'signed-off-with-reservation', reservation: 'Trained on these levels.' },
      { solver: 'Gamma', figures: (at) => ({ 'relative-l2-error': gamma(at), 'position-error': 0.02 }), review: 'returned' },
      { solver: 'Half done', figures: (at) => ({ 'relative-l2-error': error(0.1)(at) }), unfinished: [2] },
      { solver: 'Declined', figures: (at) => ({ 'relative-l2-error': error(0.01)(at) }), review: 'declined' },
    ],
  });
});
afterAll(() => app.stop());

const read = async (query: string): Promise<Ranking> => {
  const answer = await app.visitor.get(`/api/v1/benches/${bench.slug}/ranking?${query}`);
  expect(answer.status, answer.text).toBe(200);
  return rankingSchema.parse(answer.body);
};

/** Quantile of type 7 (Hyndman and Fan 1996), written out again here: the definition is position (n - 1) p, linear between. */
function quantile(values: readonly number[], p: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  const position = (sorted.length - 1) * p;
  const below = Math.floor(position);
  return sorted[below]! + (position - below) * ((sorted[below + 1] ?? sorted[below]!) - sorted[below]!);
}
const pool = (of: (at: { phantom: number; draw: number; noise: number }) => number, noise: number): number[] =>
  Array.from({ length: phantoms * draws }, (_, i) => of({ phantom: Math.floor(i / draws), draw: i % draws, noise }));

describe('ranking', () => {
  it('has the medians and ranges of the formula, pooled over phantoms and draws', async () => {
    const ranking = await read('noise=0.01');
    expect(ranking).toMatchObject({ level: 0.01, interpolated: false, belowFloor: false, metric: 'relative-l2-error', trivial: 1 });
    const alpha = ranking.rows.find((row) => row.solver.name === 'Alpha')!;
    const values = pool(error(1), 0.01);
    // Rounding of a few sums of 18 doubles.
    expect(alpha.median).toBeCloseTo(quantile(values, 0.5), 12);
    expect(alpha.p05).toBeCloseTo(quantile(values, 0.05), 12);
    expect(alpha.p95).toBeCloseTo(quantile(values, 0.95), 12);
    expect(alpha.medians['position-error']).toBeCloseTo(0.02, 12);
    expect(alpha.secondsPerReconstruction).toBeCloseTo(0.001, 12);
  });

  it('does not take draws for phantoms: three phantoms are three blocks, whatever their draws', async () => {
    const ranking = await read('noise=0.01');
    // Alpha wins on each phantom, and the median draw of Beta and Gamma is decided by six draws: mean ranks over three blocks.
    expect(ranking.test).toMatchObject({ name: 'Friedman with Nemenyi distance over 3 phantoms', blocks: 3, fewest: 3, enough: true, exact: true });
    expect(ranking.test.words).toContain('three phantoms');
    // Demsar 2006, table 5: q at 0.05 for three methods is 2.343; the published entry is off by 7e-4, which the root leaves below 5e-3.
    expect(ranking.test.criticalDifference).toBeCloseTo(2.343 * Math.sqrt((3 * 4) / (6 * 3)), 2);
    expect(ranking.rows.map((row) => row.solver.name).at(0)).toBe('Alpha');
    expect(ranking.rows.at(-1)).toMatchObject({ solver: { name: 'Half done' }, rank: null, tieGroup: null, meanRank: null });
    const meanRanks = Object.fromEntries(ranking.rows.map((row) => [row.solver.name, row.meanRank]));
    expect(meanRanks['Alpha']).toBe(1);
    expect(meanRanks['Beta']! + meanRanks['Gamma']!).toBe(5);
    // Six orders of three: the same one in all blocks has p = 1 / 36, the only one below 5 %.
    const same = meanRanks['Beta'] === 2 || meanRanks['Beta'] === 3;
    expect(ranking.test.separable).toBe(same);
    if (same) expect(ranking.test.pValue).toBeCloseTo(1 / 36, 12);
    expect(ranking.levels).toEqual([0.01]);
  });

  it('ranks over the ladder above the floor where asked', async () => {
    const ranking = await read('noise=0.001&over=ladder');
    // The floor is 0.2 %: the level of 0.1 % is left out, and the noise at the cursor does not matter to the ranks.
    expect(ranking).toMatchObject({ over: 'ladder', levels: ladder.slice(1), belowFloor: false });
    expect(ranking.rows[0]).toMatchObject({ solver: { name: 'Alpha' }, meanRank: 1 });
  });

  it('says which rows no other beats in both error and time', async () => {
    const ranking = await read('noise=0.01');
    const by = (name: string) => ranking.rows.find((row) => row.solver.name === name)!;
    // Times are 1, 2, 3, 4 ms in the order of entry; errors C = 1, 2, 2, and 0.1 for the one that lacks a run.
    expect([by('Alpha').onFront, by('Beta').onFront, by('Half done').onFront]).toEqual([true, false, true]);
    expect(ranking.rows[by('Beta').dominatedBy!]!.solver.name).toBe('Alpha');
  });

  it('counts paired wins', async () => {
    const ranking = await read('noise=0.01');
    const place = (name: string) => ranking.rows.findIndex((row) => row.solver.name === name);
    const wins = (row: string, column: string) => ranking.wins[place(row)]![place(column)];
    expect([wins('Alpha', 'Beta'), wins('Beta', 'Alpha'), wins('Beta', 'Gamma')]).toEqual([1, 0, 0.5]);
    expect(ranking.wins[0]![0]).toBeNull();
  });

  it('interpolates between levels in log-log and says so', async () => {
    const noise = Math.sqrt(0.003 * 0.01);
    const ranking = await read(`noise=${noise}`);
    expect(ranking.interpolated).toBe(true);
    const at = (level: number) => quantile(pool(error(1), level), 0.5);
    // The middle in log-log is the geometric mean.
    expect(ranking.rows[0]!.median).toBeCloseTo(Math.sqrt(at(0.003) * at(0.01)), 10);
  });

  it('gives no ranks below the model-error floor, and says why', async () => {
    const ranking = await read('noise=0.001');
    expect(ranking.belowFloor).toBe(true);
    expect(ranking.rows.every((row) => row.rank === null && row.tieGroup === null && row.meanRank === null)).toBe(true);
    expect(ranking.rows[0]!.median).not.toBeNull();
    expect(ranking.test.separable).toBe(false);
    expect(ranking.test.words).toContain('Below the model-error floor of 0.2 %');
  });

  it('leaves declined runs out, keeps returned ones with their state, and shows reservations', async () => {
    const ranking = await read('noise=0.01');
    expect(ranking.rows.map((row) => row.solver.name)).not.toContain('Declined');
    const by = (name: string) => ranking.rows.find((row) => row.solver.name === name)!;
    expect(by('Gamma').review).toBe('returned');
    expect(by('Beta')).toMatchObject({ review: 'signed-off-with-reservation', reservations: ['Trained on these levels.'] });
    expect(by('Half done')).toMatchObject({ complete: false, rank: null });
  });

  it('takes an undefined figure as the worst, and shows no median where none is defined', async () => {
    const ranking = await read('noise=0.01&metric=position-error');
    expect(ranking.rows[0]!.solver.name).toBe('Alpha');
    expect(ranking.rows.find((row) => row.solver.name === 'Beta')!.median).toBeNull();
    expect(ranking.trivial).toBe(0.5);
  });

  it('gives the breakdown where the median crosses the trivial reconstruction', async () => {
    const ranking = await read('noise=0.01');
    const medians = ladder.map((noise) => quantile(pool(beta, noise), 0.5));
    const above = medians.findIndex((value) => value >= 1);
    // Beta is a power law over the whole ladder, so log-log interpolation is exact between levels: E = 1.
    const share = Math.log(1 / medians[above - 1]!) / Math.log(medians[above]! / medians[above - 1]!);
    const expected = ladder[above - 1]! * (ladder[above]! / ladder[above - 1]!) ** share;
    expect(ranking.rows.find((row) => row.solver.name === 'Beta')!.breakdown).toBeCloseTo(expected, 10);
    expect(ranking.rows.find((row) => row.solver.name === 'Alpha')!).toMatchObject({ breakdown: null, breakdownNote: 'beyond' });
  });

  it('refuses an unknown metric and a noise out of range', async () => {
    expect((await app.visitor.get(`/api/v1/benches/${bench.slug}/ranking?metric=charm`)).status).toBe(422);
    expect((await app.visitor.get(`/api/v1/benches/${bench.slug}/ranking?noise=-1`)).status).toBe(422);
    expect((await app.visitor.get('/api/v1/benches/no-such-bench/ranking')).status).toBe(404);
  });

  it('answers from memory once computed, and anew when a verdict changes what it says', async () => {
    const first = await read('noise=0.02');
    expect(await read('noise=0.02')).toEqual(first);
    const em = app.orm.em.fork();
    const run = await em.findOneOrFail(RunEntity, { id: bench.entries[1]!.runs[0]! });
    run.reservation = 'Another word.';
    await em.flush();
    const again = await read('noise=0.02');
    expect(again.rows.find((row) => row.solver.name === 'Beta')!.reservations).toEqual(['Another word.', 'Trained on these levels.']);
  });
});

describe('series', () => {
  it('has one row a level for every entry, over all phantoms or one', async () => {
    const all = seriesSchema.parse((await app.visitor.get(`/api/v1/benches/${bench.slug}/series`)).body);
    expect(all).toMatchObject({ metric: 'relative-l2-error', ladder, trivial: 1, modelErrorFloor: 0.002 });
    const alpha = all.items.find((item) => item.solver.name === 'Alpha')!;
    expect(alpha.levels.map((level) => level.count)).toEqual(ladder.map(() => phantoms * draws));
    // The law of the formula: exponent 0.5; a floor that is fitted too leaves it a little off.
    expect(alpha.sheet.exponent!.value).toBeGreaterThan(0.45);
    expect(alpha.sheet.exponent!.value).toBeLessThan(0.55);
    const one = seriesSchema.parse((await app.visitor.get(`/api/v1/benches/${bench.slug}/series?phantom=${bench.phantoms[1]}`)).body);
    const values = Array.from({ length: draws }, (_, draw) => error(1)({ phantom: 1, draw, noise: 0.1 }));
    expect(one.items.find((item) => item.solver.name === 'Alpha')!.levels[4]!.median).toBeCloseTo(quantile(values, 0.5), 12);
    expect((await app.visitor.get(`/api/v1/benches/${bench.slug}/series?phantom=elsewhere`)).status).toBe(422);
  });
});

describe('one phantom', () => {
  it('says that phantoms are too few, how many are needed, and gives no winner', async () => {
    const small = await makeBench(app, {
      title: 'Small bench', phantoms: 1, ladder, draws: 3,
      entries: [{ solver: 'First', figures: (at) => ({ 'relative-l2-error': error(1)(at) }) }, { solver: 'Second', figures: (at) => ({ 'relative-l2-error': error(3)(at) }) }],
    });
    const ranking = rankingSchema.parse((await app.visitor.get(`/api/v1/benches/${small.slug}/ranking?noise=0.01`)).body);
    expect(ranking.test).toMatchObject({ separable: false, pValue: null, enough: false, blocks: 1, fewest: 6, criticalDifference: null });
    expect(ranking.test.words).toBe('Not enough phantoms to separate: one phantom, and for two solvers the tests need at least six to reach 5 %. No winner is named.');
    expect(ranking.rows.map((row) => [row.solver.name, row.rank, row.tieGroup])).toEqual([['First', null, null], ['Second', null, null]]);
  });
});

describe('comparison', () => {
  const compare = async (query: string): Promise<BenchComparison> => {
    const answer = await app.visitor.get(`/api/v1/benches/${bench.slug}/comparison?${query}`);
    expect(answer.status, answer.text).toBe(200);
    return comparisonSchema.parse(answer.body);
  };
  it('has the order, the groups and the test of the ranking', async () => {
    const [ranking, found] = [await read('noise=0.01'), await compare('noise=0.01')];
    const complete = ranking.rows.filter((row) => row.complete);
    expect(found.solvers.map(({ solver, meanRank, tieGroup, glyph }) => [solver.name, meanRank, tieGroup, glyph])).toEqual(complete.map((row) => [row.solver.name, row.meanRank, row.tieGroup, row.glyph]));
    expect(found.test).toEqual(ranking.test);
    expect(found).toMatchObject({ blocks: 'phantoms', phantom: null, level: 0.01, levels: [0.01], fewestPairs: 7 });
    expect(found.pairWords).toBe('Not enough phantoms for signed ranks: 3, and with 3 pairs corrected at least 7 are needed to reach 5 %.');
    expect(found.pairs.every((pair) => !pair.separable)).toBe(true);
  });
  it('gives the ratio of errors with an interval by a paired bootstrap', async () => {
    const found = await compare('noise=0.01');
    const place = (name: string) => found.solvers.findIndex(({ solver }) => solver.name === name);
    const pair = found.pairs.find(({ first, second }) => first === place('Alpha') && second === place('Beta'))!;
    // Beta's error is twice Alpha's in every draw: so is every resampled median.
    for (const value of [pair.ratio!.value, pair.ratio!.low, pair.ratio!.high]) expect(value).toBeCloseTo(0.5, 12);
    expect(pair.ratio).toMatchObject({ firstBetter: 1, separable: true });
    expect(await compare('noise=0.01')).toEqual(found);
  });
  it('has profiles over the phantoms and the levels above the floor', async () => {
    const { profile, profileWords, solvers } = await compare('noise=0.01');
    expect(profile!.problems).toBe(phantoms * (ladder.length - 1));
    const alpha = profile!.items.find((item) => solvers[item.solver]!.solver.name === 'Alpha')!;
    expect(alpha.ratios).toEqual(Array.from({ length: 15 }, () => 1));
    expect(profileWords).toBe('15 problems: 3 phantoms at 5 noise levels from the model-error floor of 0.2 % up, median over draws.');
    expect((await compare('noise=0.01&metric=ssim-score')).profile).toBeNull();
  });
  it('within one phantom its draws are the blocks', async () => {
    const found = await compare(`noise=0.01&phantom=${bench.phantoms[1]}`);
    expect(found).toMatchObject({ blocks: 'draws', phantom: { slug: bench.phantoms[1] }, profile: null, test: { blocks: draws, enough: true } });
    // All three on the phantom that 'Half done' has finished too.
    expect(found.solvers.map(({ solver }) => solver.name)).toContain('Half done');
    expect(found.test.words).toMatch(/six draws/);
    expect((await app.visitor.get(`/api/v1/benches/${bench.slug}/comparison?phantom=elsewhere`)).status).toBe(422);
  });
  it('compares nothing below the floor', async () => {
    const found = await compare('noise=0.001');
    expect(found).toMatchObject({ belowFloor: true, pairs: [] });
    expect(found.solvers.every(({ meanRank }) => meanRank === null)).toBe(true);
    expect(found.test.words).toContain('Below the model-error floor');
  });
});
