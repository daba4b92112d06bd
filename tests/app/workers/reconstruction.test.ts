import { describe, expect, it } from 'vitest';
import { createReconstructionClient, ReconstructionRefused, type WorkerPort } from '../../../app/workers/reconstruction-client';
import { Cancelled, ReconstructionJobs, type JobControl } from '../../../app/workers/reconstruction-jobs';
import type { JobProgress, Request, Response } from '../../../app/workers/reconstruction-messages';
import type { Replay } from '../../../shared/contracts/runs';
import { encodeArray } from '../../../shared/domain/array-encoding';
import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { prepareRun, runLevel } from '../../../solvers/campaign/run';
import { runHash } from '../../../solvers/campaign/trial';
import { createEitInversion } from '../../../solvers/problems/electrical-impedance/inversion-problem';

const geometry: EitGeometry = {
  body: { kind: 'disc', radius: 0.1 }, electrodes: 8, electrodeCoverage: 0.5, firstElectrodeDeg: 90, numbering: 'clockwise', contactImpedance: 0.01,
  pattern: 'adjacent', current: 0.01, measurement: 'adjacent-undriven',
};
const configuration = { method: 'truncated-svd', parameters: {}, rule: { key: 'discrepancy' as const, safetyFactor: 1.05 } };
const control = (more: Partial<JobControl> = {}): JobControl => ({ cancelled: () => false, progress: () => undefined, pause: () => Promise.resolve(), now: () => 0, ...more });

/** What a server stores of a run of two levels and two draws. */
function storedRun(): Replay {
  const problem = createEitInversion(geometry, 1, 'difference');
  const truth = problem.background().map((v, i) => (i % 7 === 0 ? 1.2 * v : v));
  const clean = problem.evaluate(truth);
  const image = new Float64Array(problem.grid.inside.length);
  problem.toImage(truth, image);
  const phantom = { clean, noiseScale: 1e-3, truthImage: image, backgroundImage: new Float64Array(image.length).fill(1), targets: [] };
  const prepared = prepareRun({ problem, ...configuration });
  const ladder = [0.001, 0.01];
  const trials = ladder.flatMap((level, levelIndex) => runLevel(prepared, phantom, { benchSeed: 7, phantomHash: 'f'.repeat(64), levelIndex, level, draws: [0, 1] }));
  return {
    run: 'RN-1', phantomHash: 'f'.repeat(64), problem: { family: 'electrical-impedance', geometry, dataKind: 'difference', background: 1 }, configuration, noiseModel: 'gaussian', axis: { key: 'noise' }, cases: null, ladder, draws: 2, seed: 7, noiseScale: 1e-3,
    clean: encodeArray(clean), truth: encodeArray(image), targets: [], trials: trials.map((t) => ({ level: t.levelIndex, draw: t.drawIndex, imageHash: t.imageHash })), resultHash: runHash(trials.map((t) => t.imageHash)),
  };
}

describe('recomputing a run', () => {
  const replay = storedRun();
  it('gives the stored bits, one draw at a time, with the truth and without it', async () => {
    const progress: JobProgress[] = [];
    const answer = await new ReconstructionJobs().run({ kind: 'recompute', replay: { ...replay, truth: null, targets: null } }, control({ progress: (p) => void progress.push(p) }));
    expect(answer).toMatchObject({ equal: 4, firstDifference: null, resultHash: replay.resultHash });
    expect(progress.map((p) => p.done)).toEqual([1, 2, 3, 4]);
  });
  it('names the first draw that differs', async () => {
    const trials = replay.trials.map((t, i) => (i === 2 ? { ...t, imageHash: '0'.repeat(64) } : t));
    expect(await new ReconstructionJobs().run({ kind: 'recompute', replay: { ...replay, trials } }, control())).toMatchObject({ equal: 3, firstDifference: { level: 1, draw: 0 } });
  });
  it('ends between draws when it is cancelled', async () => {
    let asked = 0;
    await expect(new ReconstructionJobs().run({ kind: 'recompute', replay }, control({ cancelled: () => ++asked > 1 }))).rejects.toBeInstanceOf(Cancelled);
  });
});

describe('the client of the worker', () => {
  const fake = () => {
    const sent: Request[] = [];
    let stopped = false;
    const port: WorkerPort = { postMessage: (m) => void sent.push(m), terminate: () => { stopped = true; }, onmessage: null, onerror: null };
    return { port, sent, answer: (data: Response) => port.onmessage?.({ data } as MessageEvent<Response>), stopped: () => stopped };
  };
  const job = { problem: { family: 'electrical-impedance' as const, geometry, background: 1, dataKind: 'difference' as const }, configuration };

  it('matches answers to jobs and passes progress on', async () => {
    const worker = fake();
    const client = createReconstructionClient(() => worker.port);
    const seen: number[] = [];
    const first = client.prepare(job);
    const second = client.recompute({} as Replay, { onProgress: (p) => seen.push(p.done) });
    expect(worker.sent.map((m) => m.id)).toEqual([1, 2]);
    worker.answer({ id: 2, state: 'progress', progress: { done: 5, total: 10 } });
    worker.answer({ id: 2, state: 'done', answer: { resultHash: 'x', trials: [], equal: 0, firstDifference: null, seconds: 1 } });
    worker.answer({ id: 1, state: 'failed', message: 'It does not fit.', refusal: true });
    await expect(second).resolves.toMatchObject({ resultHash: 'x' });
    await expect(first).rejects.toBeInstanceOf(ReconstructionRefused);
    expect(seen).toEqual([5]);
  });
  it('tells the worker of a cancelled job and rejects at once', async () => {
    const worker = fake();
    const client = createReconstructionClient(() => worker.port);
    const abort = new AbortController();
    const pending = client.prepare(job, { signal: abort.signal });
    abort.abort();
    await expect(pending).rejects.toMatchObject({ name: 'AbortError' });
    expect(worker.sent.at(-1)).toEqual({ id: 1, cancel: true });
    client.dispose();
    expect(worker.stopped()).toBe(true);
  });
});
