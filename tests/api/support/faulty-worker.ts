/**
 * A worker entry for tests of the queue: it computes nothing, answers at once, and misbehaves on request. What a run asks
 * for is in its seed, so that several runs of one queue can differ.
 */
import { sha256Hex } from '../../../solvers/core/hash.ts';
import type { RunChecksTask, SimulateTask, SliceTask } from '../../../api/jobs/tasks.ts';

export const seeds = {
  plain: 1,
  /** 30 ms a draw. */
  slow: 2,
  throwsAtLevelOne: 3,
  hangsAtLevelOne: 4,
  eatsMemoryAtLevelOne: 5,
  refusesAtLevelOne: 6,
  /** Gives other bits every time. */
  drifts: 7,
} as const;

let calls = 0;
const sleep = (ms: number): void => void Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, ms);

export function runSlice({ run, level, draws }: SliceTask): unknown {
  const { seed } = run;
  if (level >= 1) {
    if (seed === seeds.throwsAtLevelOne) throw new Error('the factorisation broke down');
    if (seed === seeds.refusesAtLevelOne) return { ok: false, message: 'The data have 3 values, the problem 2.', path: [] };
    if (seed === seeds.hangsAtLevelOne) for (;;) sleep(1000);
    if (seed === seeds.eatsMemoryAtLevelOne) {
      const held: number[][] = [];
      for (;;) held.push(new Array<number>(2_000_000).fill(0.5 + held.length));
    }
  }
  calls++;
  if (seed === seeds.slow) sleep(30 * draws.length);
  const trials = draws.map((draw) => {
    const image = Float64Array.from({ length: run.truthImage.length }, (_, i) => 1 + 0.001 * level + 0.0001 * draw + i + (seed === seeds.drifts ? calls : 0));
    return {
      level, draw, metrics: { 'relative-l2-error': 0.1 * (level + 1) + 0.01 * ((draw * 7) % 5), 'position-error': null }, reasons: { 'position-error': 'No target.' }, supAt: [0.01, 0.02],
      parameter: 0.1, iterations: 1, forwardSolves: 0, stop: 'direct', noiseNorm: 1, imageHash: sha256Hex(image), image,
    };
  });
  return { ok: true, trials, seconds: (seed === seeds.slow ? 0.03 : 0.001) * draws.length, prepareSeconds: 0 };
}

export function checkRun({ stored }: RunChecksTask): unknown {
  return {
    ok: true, trivial: { 'relative-l2-error': 1 }, secondsPerReconstruction: 0.001, timeRatio: 1,
    checks: [{ key: 'recomputation', name: 'Recomputation', state: 'pass', figure: stored.length, bound: 0, comparison: 'equal', unit: 'draws', meaning: 'made up by a test', source: 'test' }],
  };
}

/** Hangs where the ground truth is the expression 'x', throws otherwise. */
export function simulate({ definition }: SimulateTask): unknown {
  if (definition.truth.kind === 'expression' && definition.truth.expression === 'x') for (;;) sleep(1000);
  throw new Error('the mesh broke down');
}
export const sensitivity = simulate;
