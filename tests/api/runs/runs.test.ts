import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { toBlob } from '../../../api/entities/float64-blob.ts';
import { RunEntity, RunImageEntity } from '../../../api/entities/run.ts';
import { certificateSchema } from '../../../shared/contracts/certificates.ts';
import { replaySchema, runDetailSchema, runImageSchema, runListSchema, trialListSchema } from '../../../shared/contracts/runs.ts';
import { decodeArray } from '../../../shared/domain/array-encoding.ts';
import { makeBench, type MadeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let bench: MadeBench;
let run: string;
const ladder = [0.01, 0.03, 0.1];
const draws = 5;
const image = Float64Array.of(1, 1.25, 1.5, 2);

beforeAll(async () => {
  app = await startTestApp();
  bench = await makeBench(app, {
    title: 'Shown bench', phantoms: 1, ladder, draws, trivial: { 'relative-l2-error': 1 }, sealedUntil: '2999-01-01',
    entries: [
      { solver: 'Shown', figures: ({ noise, draw }) => ({ 'relative-l2-error': noise * (1 + draw), 'sup-error': 0.5, 'position-error': null }) },
      { solver: 'Broken', figures: () => ({}), state: 'failed' },
    ],
  });
  run = bench.entries[0]!.runs[0]!;
  const em = app.orm.em.fork();
  em.create(RunImageEntity, { run: em.getReference(RunEntity, run), level: 1, draw: 2, values: toBlob(image) });
  em.create(RunImageEntity, { run: em.getReference(RunEntity, run), level: 1, draw: 4, values: toBlob(image) });
  await em.flush();
});
afterAll(() => app.stop());

describe('a run', () => {
  it('shows a table for each metric, the trivial figure, provenance and what the reader may do', async () => {
    const shown = runDetailSchema.parse((await app.visitor.get(`/api/v1/runs/${run}`)).body);
    expect(shown).toMatchObject({ id: run, state: 'finished', review: 'unreviewed', draws, ladder, unit: 'S/m', background: 1, trivial: { 'relative-l2-error': 1 } });
    const row = shown.table['relative-l2-error']![1]!;
    // Draws 1 to 5 times 0.03: median 3, mean 3, sd sqrt(2.5), 5 % quantile 1.2, 95 % 4.8 (type 7), all times 0.03.
    expect(row).toMatchObject({ level: 0.03, count: 5, medianDraw: 2, worstDraw: 4 });
    for (const [key, value] of [['median', 3], ['mean', 3], ['sd', Math.sqrt(2.5)], ['p05', 1.2], ['p95', 4.8], ['worst', 5]] as const) expect(row[key], key).toBeCloseTo(0.03 * value, 12);
    expect(shown.table['position-error']![0]).toMatchObject({ median: null, count: 0 });
    expect(shown.may).toEqual({ cancel: false, recompute: false, review: false, comment: false, requeue: false });
    expect(shown.provenance.map((item) => item.what)).toEqual(['Phantom', 'Simulation', 'Inversion model', 'Solver', 'Bench', 'Noise', 'Code', 'Result']);
    expect(shown.provenance.at(-1)!.hash).toBe(shown.resultHash);
    expect(shown.problem).toMatchObject({ family: 'electrical-impedance', background: 1, geometry: { electrodes: 16, electrodeCoverage: 0.5, firstElectrodeDeg: 90, numbering: 'clockwise' } });
  });

  it('tells reviewers and developers apart', async () => {
    const reviewer = await app.signInAs('reviewer-demo');
    expect((await reviewer.get(`/api/v1/runs/${run}`)).body).toMatchObject({ may: { review: true, recompute: true, comment: true, cancel: false } });
    const developer = await app.signInAs('developer-demo');
    const failed = bench.entries[1]!.runs[0]!;
    const shown = runDetailSchema.parse((await developer.get(`/api/v1/runs/${failed}`)).body);
    expect(shown).toMatchObject({ state: 'failed', may: { requeue: true, review: false, cancel: false }, sheets: {} });
    expect(shown.progress.failure).toContain('made to fail by the test');
    expect(shown.table['relative-l2-error']![0]!.reason).toBe('No draw has finished.');
    expect((await app.visitor.get('/api/v1/runs/RN-999')).status).toBe(404);
  });

  it('is listed by state, bench, solver and phantom', async () => {
    const list = async (query: string) => runListSchema.parse((await app.visitor.get(`/api/v1/runs?${query}`)).body).items.map((item) => item.id);
    expect(await list('state=finished')).toEqual([run]);
    expect(await list(`bench=${bench.slug}&solver=broken`)).toEqual(bench.entries[1]!.runs);
    expect((await list(`phantom=${bench.phantoms[0]}`)).sort()).toEqual(bench.entries.flatMap((entry) => entry.runs).sort());
    expect(await list('review=declined')).toEqual([]);
    expect((await app.visitor.get('/api/v1/runs?state=asleep')).status).toBe(422);
  });

  it('gives every draw', async () => {
    const all = trialListSchema.parse((await app.visitor.get(`/api/v1/runs/${run}/trials`)).body).items;
    expect(all).toHaveLength(ladder.length * draws);
    const level = trialListSchema.parse((await app.visitor.get(`/api/v1/runs/${run}/trials?level=1`)).body).items;
    expect(level.map((trial) => [trial.draw, trial.imageStored])).toEqual([[0, false], [1, false], [2, true], [3, false], [4, true]]);
    expect(level[4]!.metrics['relative-l2-error']).toBeCloseTo(0.15, 12);
  });

  it('gives the stored images, and the truth only to those who may see it', async () => {
    const median = runImageSchema.parse((await app.visitor.get(`/api/v1/runs/${run}/images?level=1&draw=median`)).body);
    expect(median).toMatchObject({ draw: 2, stored: true, truth: null });
    expect(decodeArray(median.image)).toEqual(image);
    expect(runImageSchema.parse((await app.visitor.get(`/api/v1/runs/${run}/images?level=1&draw=worst`)).body).draw).toBe(4);
    const reviewer = await app.signInAs('reviewer-demo');
    const seen = runImageSchema.parse((await reviewer.get(`/api/v1/runs/${run}/images?level=1&draw=4`)).body);
    expect(decodeArray(seen.truth!)).toEqual(Float64Array.of(1, 1, 2, 2));
    expect((await app.visitor.get(`/api/v1/runs/${run}/images?level=1&draw=17`)).status).toBe(404);
    expect((await app.visitor.get(`/api/v1/runs/${run}/images?level=9&draw=median`)).status).toBe(404);
  });

  it('can be replayed elsewhere, without the sealed truth', async () => {
    const replay = replaySchema.parse((await app.visitor.get(`/api/v1/runs/${run}/replay`)).body);
    expect(replay).toMatchObject({ run, truth: null, targets: null, seed: 1, noiseScale: 1, problem: { family: 'electrical-impedance', dataKind: 'difference' } });
    expect(replay.trials).toHaveLength(ladder.length * draws);
    expect(decodeArray(replay.clean)).toEqual(Float64Array.of(0, 1));
  });

  it('is downloaded as CSV and JSON with the caution', async () => {
    const table = await app.visitor.get(`/api/v1/runs/${run}/table.csv`);
    const rows: Record<string, string>[] = parse(table.text, { columns: true, comment: '#' });
    const row = rows.find((item) => item['metric'] === 'relative-l2-error' && item['noise'] === '0.1')!;
    expect(Number(row['median'])).toBeCloseTo(0.3, 12);
    expect(row['worst_draw']).toBe('5');
    expect(table.text).toContain('not for diagnosis');
    const trials: Record<string, string>[] = parse((await app.visitor.get(`/api/v1/runs/${run}/trials.csv`)).text, { columns: true, comment: '#' });
    expect(trials).toHaveLength(ladder.length * draws);
    expect(trials[0]!['image_sha256']).toMatch(/^[0-9a-f]{64}$/);
    const json = (await app.visitor.get(`/api/v1/runs/${run}/run.json`)).body as { caution: string[]; trials: unknown[] };
    expect(json.trials).toHaveLength(ladder.length * draws);
    expect(json.caution).toHaveLength(2);
  });

  it('has a certificate once it is finished', async () => {
    const certificate = certificateSchema.parse((await app.visitor.get(`/api/v1/runs/${run}/certificate`)).body);
    expect(certificate.standing).toBeNull();
    expect(certificate.citation).toContain('Not reviewed');
    expect(certificate.url).toBe(`${app.url}/runs/${run}`);
    expect((await app.visitor.get(`/api/v1/runs/${bench.entries[1]!.runs[0]!}/certificate`)).status).toBe(409);
  });

  it('has no recomputation until a reviewer asks for one', async () => {
    expect((await app.visitor.get(`/api/v1/runs/${run}/recomputations`)).body).toBeNull();
    const developer = await app.signInAs('developer-demo');
    expect((await developer.post(`/api/v1/runs/${run}/recomputations`)).status).toBe(403);
    const reviewer = await app.signInAs('reviewer-demo');
    expect((await reviewer.post(`/api/v1/runs/${bench.entries[1]!.runs[0]!}/recomputations`)).status).toBe(409);
    const asked = await reviewer.post(`/api/v1/runs/${run}/recomputations`);
    expect(asked.status).toBe(202);
    expect(asked.body).toMatchObject({ total: ladder.length * draws, requestedBy: { handle: 'reviewer-demo' } });
    expect((await app.visitor.get(`/api/v1/runs/${run}/recomputations`)).body).toMatchObject({ id: (asked.body as { id: string }).id });
  });
});
