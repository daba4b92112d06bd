/** Times of preparation, of single trials with all their metrics, and of a whole run: medians, in ms. `npm run bench` prints them. */
import { defaultDraws, defaultLadder } from '../../shared/domain/ladder';
import { phantomDefinitionSchema } from '../../shared/domain/phantom-definition';
import { prepareRun, runLevel, type RunConfiguration } from '../../solvers/campaign/run';
import type { SimulatedPhantom, Trial } from '../../solvers/campaign/trial';
import type { ForwardProblem } from '../../solvers/core/types';
import { createProblem, describeProblem, simulate } from '../../solvers/problems/registry';
import { metrics } from '../../solvers/metrics/registry';
import { deriveKey, RandomStream } from '../../solvers/core/random';
import type { RankedEntry } from '../../solvers/statistics/blocks';
import { rankAtNoise } from '../../solvers/statistics/ranking';
import { errorTable } from '../../solvers/statistics/error-table';
import { stabilitySheet } from '../../solvers/statistics/stability-sheet';
import { medianMs, type BenchRow } from './linear-algebra.bench';

const seed = { benchSeed: 1, phantomHash: 'bench' };
const draws = Array.from({ length: defaultDraws }, (_, draw) => draw);

/** Sixteen electrodes, adjacent patterns, 208 data, one conductive target. */
export function benchPhantom(dataKind: 'difference' | 'absolute'): { problem: ForwardProblem; simulated: SimulatedPhantom } {
  const definition = phantomDefinitionSchema.parse({
    family: 'electrical-impedance', dataKind, noiseReference: dataKind === 'difference' ? 'difference' : 'voltages',
    truth: { kind: 'shapes', background: 0.2, shapes: [{ kind: 'ellipse', label: 'target', value: 0.4, x: 0.05, y: 0.04, semiAxisA: 0.03, semiAxisB: 0.03 }] },
    geometry: { body: { kind: 'disc', radius: 0.14 }, electrodes: 16, electrodeCoverage: 0.5, contactImpedance: 2e-4, current: 0.005, pattern: 'adjacent', measurement: 'adjacent-undriven' },
  });
  const problem = createProblem(describeProblem(definition));
  return { problem, simulated: simulate(definition, undefined, problem) };
}

function wholeRun(problem: ForwardProblem, simulated: SimulatedPhantom, configuration: RunConfiguration): Trial[] {
  const prepared = prepareRun({ problem, ...configuration });
  return defaultLadder.flatMap((level, levelIndex) => runLevel(prepared, simulated, { ...seed, levelIndex, level, draws }));
}

const discrepancy = { key: 'discrepancy', safetyFactor: 1.05 } as const;
const linearConfigurations: readonly RunConfiguration[] = [
  { method: 'truncated-svd', parameters: {}, rule: discrepancy },
  { method: 'tikhonov', parameters: { penalty: 'gradient' }, rule: discrepancy },
  { method: 'tikhonov', parameters: { penalty: 'gradient' }, rule: { key: 'gcv' } },
  { method: 'tikhonov', parameters: { penalty: 'gradient' }, rule: { key: 'l-curve' } },
  { method: 'cgls', parameters: {}, rule: discrepancy },
];

/** Preparation, trials of every linear method, a whole linear run with its table and sheets. */
export function timeLinearMethods(): BenchRow[] {
  const { problem, simulated } = benchPhantom('difference');
  const size = `${problem.dataSize} data, ${problem.unknowns} cells, ${problem.grid.inside.length} pixels`;
  // A decomposition is kept with its problem object, so each preparation gets a fresh one.
  const fresh = (): ForwardProblem => ({ ...problem });
  const rows: BenchRow[] = [
    { name: 'method: preparation, truncated SVD', milliseconds: medianMs(3, () => prepareRun({ problem: fresh(), ...linearConfigurations[0] })), size },
    { name: 'method: preparation, Tikhonov with gradient', milliseconds: medianMs(3, () => prepareRun({ problem: fresh(), ...linearConfigurations[1] })), size },
  ];
  for (const configuration of linearConfigurations) {
    const prepared = prepareRun({ problem, ...configuration });
    const level = { ...seed, levelIndex: 5, level: 0.01, draws };
    rows.push({ name: `linear trial with all metrics: ${configuration.method}, ${configuration.rule?.key}`, milliseconds: medianMs(9, () => runLevel(prepared, simulated, level)) / draws.length, size });
  }
  rows.push({ name: 'whole linear run: preparation and 240 trials', milliseconds: medianMs(3, () => wholeRun(fresh(), simulated, linearConfigurations[1])), size });
  const trials = wholeRun(problem, simulated, linearConfigurations[1]);
  rows.push({
    name: 'error tables and stability sheets of a run',
    milliseconds: medianMs(5, () => metrics.forEach((metric) => {
      const table = errorTable(trials, defaultLadder, metric);
      if (metric.better === 'lower') stabilitySheet({ ladder: defaultLadder, draws: table.map((row) => row.draws), trivial: 1, seed: metric.key });
    })),
    size: `${trials.length} trials, ${metrics.length} metrics`,
  });
  return rows;
}

/** One reconstruction of each method that iterates on images. */
export function timeIterativeMethods(): BenchRow[] {
  const difference = benchPhantom('difference');
  const absolute = benchPhantom('absolute');
  const at = { ...seed, levelIndex: 4, level: 0.005, draws: [0] };
  const variation = prepareRun({ problem: difference.problem, method: 'total-variation', parameters: {}, rule: discrepancy });
  const newton = prepareRun({ problem: absolute.problem, method: 'gauss-newton', parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.1 } });
  const { iterations, forwardSolves } = runLevel(newton, absolute.simulated, at)[0];
  return [
    { name: 'total variation: one reconstruction', milliseconds: medianMs(5, () => runLevel(variation, difference.simulated, at)), size: `${difference.problem.dataSize} data, ${difference.problem.unknowns} cells` },
    { name: 'Gauss-Newton: one reconstruction', milliseconds: medianMs(3, () => runLevel(newton, absolute.simulated, at)), size: `${iterations} iterations, ${forwardSolves} forward solves` },
  ];
}

/** What a bench page asks for: 8 solvers on 4 phantoms, 24 draws a level. Aim 50 ms. */
export function timeRanking(): BenchRow[] {
  const stream = new RandomStream(deriveKey('bench', 'ranking'));
  const entries: RankedEntry[] = Array.from({ length: 8 }, (_, i) => ({
    id: `s${i}`,
    values: Array.from({ length: 4 }, () => defaultLadder.map((level) => draws.map(() => (0.1 + 0.05 * i + level) * Math.exp(0.2 * stream.nextNormal())))),
  }));
  return [{ name: 'ranking at a noise', milliseconds: medianMs(9, () => rankAtNoise({ ladder: defaultLadder, noise: 0.015, better: 'lower', entries })), size: '8 solvers, 4 phantoms, 24 draws' }];
}
