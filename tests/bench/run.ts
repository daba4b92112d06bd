/**
 * `npm run bench`: speed of the numerics, one process, one thread. Every figure is a median; ratios are against general
 * packages and a yardstick timed in the same run, so that they hold on another machine and under another load. Never a test.
 */
import { cpus } from 'node:os';
import { Matrix, SVD } from 'ml-matrix';
import { uniform } from '../support/sparse-matrices';
import { timeInversion } from './inversion.bench';
import { medianMs, timeDense, timeSparseCholesky, type BenchRow } from './linear-algebra.bench';
import { timeIterativeMethods, timeLinearMethods, timeRanking } from './methods.bench';
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

console.log(`Node ${process.version}, ${cpus()[0]?.model.trim() ?? 'unknown processor'}, one thread. Ratio: over the yardstick.`);
const first = new Map<string, number>();
for (const [title, measure] of groups) {
  console.log(`\n${title}`);
  for (const row of measure()) {
    if (!first.has(row.name)) first.set(row.name, row.milliseconds);
    const time = row.milliseconds < 1 ? `${(1000 * row.milliseconds).toFixed(0)} µs` : `${row.milliseconds.toFixed(row.milliseconds < 10 ? 2 : 0)} ms`;
    console.log(`  ${row.name.padEnd(62)} ${time.padStart(10)}  ratio ${(row.milliseconds / yardstick).toPrecision(3).padStart(8)}  ${row.size}`);
  }
}
console.log('\nAims (16 electrodes)');
for (const [row, bound, words] of aims) {
  const measured = first.get(row);
  console.log(`  ${words}: ${measured === undefined ? 'not measured' : `${measured.toPrecision(3)} ms, ${measured <= bound ? 'met' : 'missed'}`}`);
}
console.log(`  peak memory ${(process.resourceUsage().maxRSS / 1024).toFixed(0)} MiB`);
