/**
 * `npm run bench`: speed of the numerics, never a test. First against numpy and scipy on the same data in one run: medians of both
 * sides taken in turns, and their ratio beside the largest that is aimed at; then every part on its own, over a yardstick timed in the
 * same run, so that the figures hold on another machine and under another load. One thread unless said.
 *
 * `npm run bench -- against-scipy` stops after the first table; `-- campaign=2` takes two of the eight phantoms of the campaign.
 */
import { cpus } from 'node:os';
import { performance } from 'node:perf_hooks';
import { xrayGeometrySchema } from '../../shared/domain/geometry/x-ray';
import { kernels } from '../../solvers/kernels/kernel-memory';
import { systemMatrix, xrayCells } from '../../solvers/problems/x-ray/system-matrix';
import { Matrix, SVD } from 'ml-matrix';
import { uniform } from '../support/sparse-matrices';
import { compareBatch } from './against-scipy/batch.bench';
import { compareCampaign } from './against-scipy/campaign.bench';
import type { Comparison } from './against-scipy/compare';
import { compareProjection, compareSvd } from './against-scipy/dense.bench';
import { compareDerivative, compareSimulation } from './against-scipy/impedance.bench';
import { PeerProcess } from './against-scipy/peer-process';
import { compareSparseCholesky } from './against-scipy/sparse-cholesky.bench';
import { coreSizes } from './bundle-size';
import { timeInversion } from './inversion.bench';
import { medianMs, timeDense, timeSparseCholesky, type BenchRow } from './linear-algebra.bench';
import { benchPhantom, timeIterativeMethods, timeLinearMethods, timeRanking } from './methods.bench';
import { benchGeometry, timeSimulation } from './simulation.bench';

/** A general package on the same sizes, and the yardstick that every other figure is divided by. */
function timePeers(): { yardstick: number; rows: BenchRow[] } {
  const next = uniform(3);
  const square = Matrix.from1DArray(500, 500, Array.from({ length: 250_000 }, next));
  const wide = Matrix.from1DArray(1600, 208, Array.from({ length: 208 * 1600 }, () => next() - 0.5));
  const product = medianMs(5, () => square.mmul(square));
  return {
    yardstick: product,
    rows: [
      { name: 'ml-matrix: matrix product (the yardstick)', milliseconds: product, size: '500 x 500 x 500' },
      { name: 'ml-matrix: SVD', milliseconds: medianMs(3, () => new SVD(wide, { computeLeftSingularVectors: true, computeRightSingularVectors: true })), size: '208 x 1600, full rank' },
    ],
  };
}

function simulationRows(electrodes: 16 | 32): BenchRow[] {
  const times = timeSimulation(3, benchGeometry(electrodes));
  const size = `${electrodes} electrodes, ${times.unknowns} unknowns, ${times.elements} elements`;
  const stages = ['mesh', 'conductivity', 'assembly', 'analysis', 'factorisation', 'solve', 'whole'] as const;
  return stages.map((stage) => ({ name: stage === 'whole' ? 'simulation: whole, mesh to data' : `simulation: ${stage}`, milliseconds: 1000 * times[stage], size }));
}

const aims: readonly (readonly [row: string, milliseconds: number, words: string])[] = [
  ['simulation: whole, mesh to data', 3000, 'a simulation of 16 patterns under 3 s'],
  ['inversion model: forward solve with derivative', 200, 'forward solve with derivative under 200 ms'],
  ['linear trial with all metrics: tikhonov, discrepancy', 1, 'a linear trial with all its metrics under 1 ms'],
  ['whole linear run: preparation and 240 trials', 1500, 'a whole linear run under 1.5 s'],
  ['ranking at a noise', 50, 'a ranking under 50 ms'],
];

const options = process.argv.slice(2);
const phantoms = Number(/^campaign=(\d+)$/.exec(options.find((option) => option.startsWith('campaign=')) ?? '')?.[1] ?? 8);
const milliseconds = (value: number): string => (value < 1 ? `${(1000 * value).toFixed(0)} µs` : `${value.toFixed(value < 10 ? 2 : value < 100 ? 1 : 0)} ms`);

function printComparison({ name, size, ours, peer, aim }: Comparison): void {
  const ratio = peer === null ? 'peer not on this machine' : `${milliseconds(peer).padStart(9)}  ratio ${(ours / peer).toPrecision(3).padStart(6)}`;
  const verdict = aim === null ? '' : peer === null ? `  aim ${aim}` : `  aim ${aim}: ${ours / peer <= aim ? 'met' : 'missed'}`;
  console.log(`  ${name.padEnd(64)} ${milliseconds(ours).padStart(9)}  ${ratio}${verdict}  (${size})`);
}

/** What the first call pays: compiling the kernels, and the first model before the engine has optimised anything. */
function firstCalls(): string {
  const start = performance.now();
  const compiled = kernels() !== null;
  const loaded = performance.now();
  benchPhantom('difference');
  const first = performance.now();
  benchPhantom('difference');
  const second = performance.now();
  return `kernels ${compiled ? `compiled in ${(loaded - start).toFixed(1)} ms` : 'refused: TypeScript twins'}; first model and simulation ${milliseconds(first - loaded)}, the next ${milliseconds(second - first)}`;
}

async function compareWithScipy(): Promise<void> {
  const peer = await PeerProcess.start(1);
  console.log(`\nAgainst ${peer ? `numpy ${peer.facts.numpy} and scipy ${peer.facts.scipy} (Python ${peer.facts.python})` : 'numpy and scipy: peer not on this machine'}. Ours, theirs, ours over theirs.`);
  const projection = xrayGeometrySchema.parse({ body: { kind: 'disc', radius: 1 }, beam: 'parallel', views: 180, arcDeg: 180, detectors: 185, detectorSpacing: 2 / 128, cells: 128 });
  const { problem, simulated } = benchPhantom('difference');
  const stages: readonly (() => Promise<Comparison | Comparison[]>)[] = [
    () => compareSparseCholesky(peer),
    () => compareSimulation(peer),
    () => compareDerivative(peer),
    () => compareProjection(peer, systemMatrix(projection, xrayCells(projection))),
    () => compareBatch(peer, problem, simulated.clean),
    () => compareSvd(peer, 208, 1600, 2.2, 5),
    () => compareSvd(peer, 1000, 1300, null, 1),
    () => compareCampaign(peer, phantoms),
  ];
  for (const stage of stages) for (const row of [await stage()].flat()) printComparison(row);
  await peer?.stop();
}

console.log(`Node ${process.version}, ${cpus()[0]?.model.trim() ?? 'unknown processor'}, ${cpus().length} cores.`);
console.log(`  ${firstCalls()}`);
const sizes = coreSizes();
console.log(`  core as the browser gets it, gzip, without expressions: ${sizes.core.toFixed(0)} kB (aim 60 kB) for one family; every family and method ${sizes.everything.toFixed(0)} kB, with schemas ${sizes.withSchemas.toFixed(0)} kB`);
await compareWithScipy();
if (options.includes('against-scipy')) process.exit(0);

const { yardstick, rows: peers } = timePeers();
const groups: readonly (readonly [title: string, measure: () => BenchRow[]])[] = [
  ['General package on the same machine', () => peers],
  ['Linear algebra', () => [...timeSparseCholesky(), ...timeDense()]],
  ['Simulation, 16 electrodes', () => simulationRows(16)],
  ['Simulation, 32 electrodes', () => simulationRows(32)],
  ['Inversion model, 16 electrodes', () => timeInversion(16)],
  ['Inversion model, 32 electrodes', () => timeInversion(32)],
  ['Methods, 16 electrodes', timeLinearMethods],
  ['Methods that iterate on images', timeIterativeMethods],
  ['Statistics', timeRanking],
];

console.log('\nEvery part on its own, one thread. Ratio: over the yardstick.');
const first = new Map<string, number>();
for (const [title, measure] of groups) {
  console.log(`\n${title}`);
  for (const row of measure()) {
    if (!first.has(row.name)) first.set(row.name, row.milliseconds);
    console.log(`  ${row.name.padEnd(62)} ${milliseconds(row.milliseconds).padStart(10)}  ratio ${(row.milliseconds / yardstick).toPrecision(3).padStart(8)}  ${row.size}`);
  }
}
console.log('\nAims (16 electrodes)');
for (const [row, bound, words] of aims) {
  const measured = first.get(row);
  console.log(`  ${words}: ${measured === undefined ? 'not measured' : `${measured.toPrecision(3)} ms, ${measured <= bound ? 'met' : 'missed'}`}`);
}
console.log(`  peak memory ${(process.resourceUsage().maxRSS / 1024).toFixed(0)} MiB`);
