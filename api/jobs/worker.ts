/**
 * Entry of a worker thread. It imports the numerical library only: no database, no network, no files. A fault of the
 * content comes back as a refusal; whatever else goes wrong is thrown and ends the task, not the server.
 */
import { workerData } from 'node:worker_threads';
import { move, transferableSymbol, valueSymbol } from 'piscina';
import { axisCaseOf, runSliceIn, sensitivityOf, simulatePhantom } from './worker-tasks.ts';
import { checkFinishedRun } from './worker-checks.ts';
import type { Answer, CaseInput, CaseTask, RunChecksOutput, RunChecksTask, SensitivityOutput, SensitivityTask, SimulateTask, SimulationOutput, SliceOutput, SliceTask, VerifyOutput, VerifyTask } from './tasks.ts';
import { getVerificationCheck } from '../../solvers/verification/registry';
import { TruthError } from '../../solvers/truth/truth-error';

const now = (): number => performance.now() / 1000;

/** Heap limits of a thread do not count typed arrays, so they are looked at after each task. */
function requireMemory(): void {
  const limitMb = (workerData as { memoryLimitMb?: number } | null)?.memoryLimitMb;
  if (limitMb !== undefined && process.memoryUsage().arrayBuffers > limitMb * 1024 * 1024) throw new Error('MemoryLimit');
}

function answer<T extends object>(work: () => T): Answer<T> {
  try {
    const result = work();
    requireMemory();
    return { ok: true, ...result };
  } catch (error) {
    if (error instanceof TruthError) return { ok: false, message: error.message, path: ['definition', ...error.path] };
    // Invalid lengths come from an allocation that is too large, not from the content.
    if (error instanceof RangeError && !/array length|allocation failed|call stack/i.test(error.message)) return { ok: false, message: error.message, path: ['definition'] };
    throw error;
  }
}

/** Hands the buffers over instead of copying them. Two arrays may share one. */
function handOver<T extends object>(result: T, arrays: readonly Float64Array[]): T {
  const buffers = [...new Set(arrays.map((array) => array.buffer))].filter((buffer) => buffer instanceof ArrayBuffer);
  return move({
    get [transferableSymbol]() {
      return buffers;
    },
    get [valueSymbol]() {
      return result;
    },
  }) as unknown as T;
}

export function simulate(task: SimulateTask): Answer<SimulationOutput> {
  const result = answer(() => simulatePhantom(task, now));
  return result.ok ? handOver(result, [result.frame, result.reference, result.clean, result.truthImage]) : result;
}
export function axisCase(task: CaseTask): Answer<CaseInput> {
  const result = answer(() => axisCaseOf(task));
  return result.ok ? handOver(result, [result.clean, result.truthImage]) : result;
}
export function runSlice(task: SliceTask): Answer<SliceOutput> {
  const result = answer(() => runSliceIn(task, now));
  return result.ok ? handOver(result, result.trials.map((trial) => trial.image)) : result;
}
export const checkRun = (task: RunChecksTask): Answer<RunChecksOutput> => answer(() => checkFinishedRun(task, now));
export const sensitivity = (task: SensitivityTask): Answer<SensitivityOutput> => answer(() => sensitivityOf(task));
export const verify = ({ key }: VerifyTask): Answer<VerifyOutput> =>
  answer(() => {
    const begin = now();
    const outcome = getVerificationCheck(key).run();
    return { outcome, seconds: now() - begin };
  });
