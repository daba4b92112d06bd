import { buildSync } from 'esbuild';
import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import { readStockPhantom, stockFolder } from '../../../api/services/seed/stock-phantoms';
import { defaultDraws, defaultLadder } from '../../../shared/domain/ladder';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';
import type { RunConfiguration } from '../../../solvers/campaign/run';
import type { SimulatedPhantom } from '../../../solvers/campaign/trial';
import { denseMatrix } from '../../../solvers/core/matrix-operator';
import type { ForwardProblem, PenaltyKey } from '../../../solvers/core/types';
import { penaltyMatrix } from '../../../solvers/methods/penalty';
import { createProblem, describeProblem, simulate } from '../../../solvers/problems/registry';
import type { CampaignShare } from './campaign-worker';
import { requireClose, type Comparison } from './compare';
import type { PeerProcess } from './peer-process';

const penalties: readonly PenaltyKey[] = ['identity', 'gradient', 'laplacian'];
const discrepancy = { key: 'discrepancy', safetyFactor: 1.05 } as const;
const gcv = { key: 'gcv' } as const;

/** Twenty linear configurations; `peer_campaign.py` has the same list. */
export const campaignConfigurations: readonly RunConfiguration[] = [
  ...penalties.flatMap((penalty): RunConfiguration[] => [discrepancy, gcv, { key: 'l-curve' } as const, { key: 'quasi-optimality' } as const].map((rule) => ({ method: 'tikhonov', parameters: { penalty }, rule }))),
  ...[discrepancy, gcv].flatMap((rule): RunConfiguration[] => [
    { method: 'truncated-svd', parameters: {}, rule },
    { method: 'iterated-tikhonov', parameters: { penalty: 'gradient' }, rule },
    { method: 'exponential-filter', parameters: { penalty: 'gradient' }, rule },
  ]),
  { method: 'cgls', parameters: { penalty: 'identity' }, rule: discrepancy },
  { method: 'cgls', parameters: { penalty: 'gradient' }, rule: discrepancy },
];

interface Case {
  readonly name: string;
  readonly definition: PhantomDefinition;
  readonly problem: ForwardProblem;
  readonly simulated: SimulatedPhantom;
}

/** The first stock phantoms of electrical impedance, by name, that need no file of values. */
async function stockCases(count: number): Promise<Case[]> {
  const cases: Case[] = [];
  for (const name of readdirSync(stockFolder()).sort()) {
    if (cases.length === count) break;
    const { definition } = await readStockPhantom(name);
    if (definition.family !== 'electrical-impedance' || definition.truth.kind === 'array') continue;
    const problem = createProblem(describeProblem(definition));
    const { clean, noiseScale, truthImage, backgroundImage, targets } = simulate(definition, undefined, problem);
    cases.push({ name, definition, problem, simulated: { clean, noiseScale, truthImage, backgroundImage, targets } });
  }
  return cases;
}

function handCase(peer: PeerProcess, index: number, { problem, simulated }: Case): void {
  const hand = (what: string, values: Float64Array | Int32Array): void => peer.hand(`campaign-${index}-${what}`, values);
  hand('jacobian', denseMatrix(problem.linearise(problem.background())));
  for (const kind of penalties) {
    const { colStart, rows, values } = penaltyMatrix(problem, kind);
    hand(`${kind}-columns`, colStart);
    hand(`${kind}-rows`, rows);
    hand(`${kind}-values`, values);
  }
  const { grid, unknowns } = problem;
  const pixels = grid.inside.length;
  // The map to pixels, column by column: it is linear.
  const entries: number[][] = Array.from({ length: pixels }, () => []);
  const unit = new Float64Array(unknowns);
  const image = new Float64Array(pixels);
  for (let j = 0; j < unknowns; j++) {
    unit[j] = 1;
    problem.toImage(unit, image);
    unit[j] = 0;
    for (let k = 0; k < pixels; k++) if (image[k] !== 0) entries[k].push(j, image[k]);
  }
  const starts = new Int32Array(pixels + 1);
  entries.forEach((row, k) => (starts[k + 1] = starts[k] + row.length / 2));
  hand('pixel-rows', starts);
  hand('pixel-columns', Int32Array.from(entries.flatMap((row) => row.filter((_, i) => i % 2 === 0))));
  hand('pixel-values', Float64Array.from(entries.flatMap((row) => row.filter((_, i) => i % 2 === 1))));
  hand('clean', simulated.clean);
  hand('truth', simulated.truthImage);
  hand('background', simulated.backgroundImage);
  hand('inside', grid.inside);
  hand('shape', Float64Array.of(grid.nx, grid.ny, grid.xMin, grid.xMax, grid.yMin, grid.yMax, grid.bodyRadius, simulated.noiseScale, problem.background()[0], problem.dataKind === 'difference' ? 0 : 1));
  hand('offset', problem.dataKind === 'difference' ? new Float64Array(problem.dataSize) : problem.evaluate(problem.background()));
  hand('targets', Float64Array.from(simulated.targets.flatMap(({ x, y, area, contrast }) => [x, y, area, contrast])));
}

interface WorkerAnswer {
  readonly error: number;
  readonly similarity: number;
  readonly trials: number;
  readonly peak: number;
}

/** Two workers, the phantoms dealt out in turn; seconds from the first run to the last, models built before. */
async function runOurs(cases: readonly Case[]): Promise<WorkerAnswer & { milliseconds: number }> {
  const folder = mkdtempSync(join(tmpdir(), 'hadamark-campaign-'));
  const bundled = join(folder, 'worker.mjs');
  buildSync({
    entryPoints: [join(import.meta.dirname, 'campaign-worker.ts')], bundle: true, platform: 'node', format: 'esm', outfile: bundled, logLevel: 'error',
    banner: { js: "import { createRequire as requireHere } from 'node:module'; const require = requireHere(import.meta.url);" },
  });
  const workers = [0, 1].map((w) => {
    const share: CampaignShare = {
      phantoms: cases.filter((_, i) => i % 2 === w).map(({ name, definition, simulated }) => ({ name, definition, simulated })), configurations: campaignConfigurations, draws: defaultDraws,
    };
    return new Worker(bundled, { workerData: share });
  });
  const next = (worker: Worker): Promise<unknown> => new Promise((resolve, reject) => worker.once('message', resolve).once('error', reject));
  await Promise.all(workers.map(next));
  const start = performance.now();
  const answers = (await Promise.all(workers.map((worker) => {
    worker.postMessage('go');
    return next(worker);
  }))) as WorkerAnswer[];
  const milliseconds = performance.now() - start;
  await Promise.all(workers.map((worker) => worker.terminate()));
  rmSync(folder, { recursive: true, force: true });
  const sum = (of: (answer: WorkerAnswer) => number): number => answers.reduce((total, answer) => total + of(answer), 0);
  return { error: sum((a) => a.error), similarity: sum((a) => a.similarity), trials: sum((a) => a.trials), peak: Math.max(...answers.map((a) => a.peak)), milliseconds };
}

/**
 * 20 configurations, 8 stock phantoms, the default ladder and draws, all metrics: on two threads on both sides.
 * @param peer a process of its own, whose products use one thread: it runs two tasks at a time
 * @param phantoms fewer give a share, which the row says
 */
export async function compareCampaign(peer: PeerProcess | null, phantoms = 8): Promise<Comparison> {
  const cases = await stockCases(phantoms);
  const ours = await runOurs(cases);
  let milliseconds: number | null = null;
  if (peer) {
    cases.forEach((item, index) => handCase(peer, index, item));
    const { seconds, figures } = await peer.ask('campaign', { repetitions: 1, phantoms: cases.length, draws: defaultDraws, levels: defaultLadder.length });
    milliseconds = 1000 * seconds.campaign[0];
    // The draws are others, and the peer's L-curve and quasi-optimality only look at a grid: the means differ by some per cent.
    requireClose('campaign, mean relative L2 error (at most 1 each)', ours.error / ours.trials, figures.error, 0.15);
    requireClose('campaign, mean structural similarity', ours.similarity / ours.trials, figures.similarity, 0.15);
  }
  const share = cases.length === 8 ? '' : `a share: ${cases.length} of 8 phantoms; `;
  return {
    name: 'a whole stock campaign with all metrics, two cores', ours: ours.milliseconds, peer: milliseconds, aim: 1,
    size: `${share}${campaignConfigurations.length} configurations, ${cases.length} phantoms, ${ours.trials} trials, ${((1000 * ours.milliseconds * Math.min(2, cases.length)) / ours.trials).toFixed(0)} µs of a core each, peak ${(ours.peak / 1048576).toFixed(0)} MiB`,
  };
}
