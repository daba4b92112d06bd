import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { MikroORM } from '@mikro-orm/sqlite';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { toBlob } from '../../../api/entities/float64-blob.ts';
import { PhantomVersionEntity } from '../../../api/entities/phantom.ts';
import { RunEntity, RunImageEntity, TrialEntity } from '../../../api/entities/run.ts';
import { SimulationEntity } from '../../../api/entities/simulation.ts';
import { loadRunInput } from '../../../api/jobs/run-input.ts';
import { runSliceIn, simulatePhantom } from '../../../api/jobs/worker-tasks.ts';
import { databaseFile, openDatabase } from '../../../api/orm.ts';
import { methods } from '../../../solvers/methods/registry.ts';
import { sha256Hex } from '../../../solvers/core/hash.ts';
import { makeBench } from '../../support/registry-fixture.ts';
import { startTestApp } from '../../support/test-app.ts';

const ladder = Array.from({ length: 12 }, (_, level) => 0.001 * 1.5 ** level);
const draws = 120;
const total = ladder.length * draws;
const now = (): number => performance.now() / 1000;
let dataDir: string;
let orm: MikroORM;
let id: string;
let server: ChildProcess | null = null;

/** A database with one queued run on really simulated data, made beforehand so that the server has nothing else to do. */
beforeAll(async () => {
  dataDir = mkdtempSync(path.join(tmpdir(), 'hadamark-killed-'));
  const app = await startTestApp();
  const bench = await makeBench(app, { title: 'Killed bench', phantoms: 1, ladder, draws, entries: [{ solver: 'Killed solver', state: 'queued', figures: () => ({}) }] });
  id = bench.entries[0]!.runs[0]!;
  const em = app.orm.em.fork();
  const version = await em.findOneOrFail(PhantomVersionEntity, { phantom: { slug: bench.phantoms[0] } });
  const output = simulatePhantom({ definition: version.definition, arrayValues: null, checks: false }, now);
  await em.nativeUpdate(SimulationEntity, { contentHash: version.definitionHash }, {
    summary: output.summary, noiseScale: output.summary.noiseScale, frame: toBlob(output.frame), reference: toBlob(output.reference), clean: toBlob(output.clean), truthImage: toBlob(output.truthImage),
  });
  const method = methods.find(({ key }) => key === 'cgls')!;
  await em.nativeUpdate(RunEntity, { id }, { configuration: { method: method.key, parameters: method.parameters.parse({}), rule: { key: 'discrepancy', safetyFactor: 1.05 } } });
  await app.orm.em.getConnection().execute(`vacuum into '${databaseFile(dataDir)}'`);
  await app.stop();
  orm = await openDatabase(databaseFile(dataDir));
}, 180_000);
afterAll(async () => {
  server?.kill('SIGKILL');
  await orm.close(true);
  rmSync(dataDir, { recursive: true, force: true });
});

function startServer(): Promise<ChildProcess> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'api/main.ts'], {
    stdio: ['ignore', 'pipe', 'inherit'],
    env: { ...process.env, NODE_ENV: 'development', DATA_DIR: dataDir, PORT: '0', HOST: '127.0.0.1', WORKERS: '1', SEED_DEMO: '0', LOG_LEVEL: 'error' },
  });
  server = child;
  return new Promise((resolve, reject) => {
    child.stdout.on('data', (text: Buffer) => {
      if (text.toString().includes('Hadamark is at')) resolve(child);
    });
    child.once('exit', (code) => reject(new Error(`the server ended with ${code}`)));
  });
}
const stored = () => orm.em.fork().find(TrialEntity, { run: id }, { orderBy: { level: 'asc', draw: 'asc' } });
async function until(enough: () => Promise<boolean>, what: string): Promise<void> {
  for (let i = 0; i < 2_000; i++) {
    if (await enough()) return;
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  throw new Error(`waited in vain for ${what}`);
}

it('a server killed in the middle of a run goes on at the next start, without a lost or a doubled draw', async () => {
  const first = await startServer();
  await until(async () => (await stored()).length >= 4, 'the first draws');
  first.removeAllListeners('exit');
  const dead = new Promise((resolve) => first.once('exit', resolve));
  first.kill('SIGKILL');
  await dead;
  const before = await stored();
  expect(before.length).toBeLessThan(total);
  expect((await orm.em.fork().findOneOrFail(RunEntity, { id })).state).toBe('running');

  await startServer();
  await until(async () => (await orm.em.fork().findOneOrFail(RunEntity, { id })).state !== 'running' && (await stored()).length === total, 'the end of the run');
  const run = await orm.em.fork().findOneOrFail(RunEntity, { id }, { populate: ['entry', 'entry.bench', 'phantomVersion'] });
  expect(run, run.failure ?? '').toMatchObject({ state: 'finished', done: total, failure: null });
  const trials = await stored();
  expect(trials.map(({ level, draw }) => [level, draw])).toEqual(ladder.flatMap((_, level) => Array.from({ length: draws }, (_d, draw) => [level, draw])));
  // Rows from before the kill are the same rows.
  expect(before.every((row) => trials.some((trial) => trial.id === row.id && trial.imageHash === row.imageHash))).toBe(true);
  expect(run.resultHash).toBe(sha256Hex(trials.map((trial) => trial.imageHash).join('\n')));
  // Median and worst draw of each level, those of before the kill included.
  const images = await orm.em.fork().find(RunImageEntity, { run: id });
  expect(new Set(images.map((image) => image.level)).size).toBe(ladder.length);
  expect(run.checks?.find((check) => check.key === 'recomputation')).toMatchObject({ state: 'pass', figure: 0 });
  // Bias and variance of each level, whose images the kill partly lost: their sum is the mean of the squared errors of the stored draws.
  ladder.forEach((_, level) => {
    const own = trials.filter((trial) => trial.level === level).map((trial) => trial.metrics['relative-l2-error']! ** 2);
    const moments = run.levelMoments?.[level];
    expect(moments).toMatchObject({ draws, reason: null });
    // Rounding of sums over 120 images of some thousand pixels.
    expect(moments!.meanSquaredError! / (own.reduce((sum, value) => sum + value, 0) / draws)).toBeCloseTo(1, 10);
    expect(moments!.variance).toBeGreaterThan(0);
  });

  // The main thread of another process gives the bits that the worker stored, for a draw of before and of after the kill.
  const input = await loadRunInput(orm.em.fork(), run, run.phantomVersion.$);
  for (const trial of [trials[1]!, trials[total - 1]!]) {
    const [again] = runSliceIn({ run: input, level: trial.level, draws: [trial.draw] }, now).trials;
    expect(again!.imageHash).toBe(trial.imageHash);
  }
}, 400_000);
