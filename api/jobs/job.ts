import { axisWords, type AxisSetting } from '../../shared/domain/axes.ts';
import type { SliceSchedule } from './slice-schedule.ts';
import type { RunInput, SliceOutput } from './tasks.ts';
import type { WorkerPool } from './worker-pool.ts';
import type { WorkerFailure } from './worker-pool.ts';

/** A run or a recomputation while it is worked on. */
export interface Job {
  /** Of the row it works on. */
  readonly id: string;
  readonly input: RunInput;
  readonly schedule: SliceSchedule;
  /** Writes a batch in one short transaction. False when the row is no longer to be worked on. */
  readonly store: (output: SliceOutput) => Promise<boolean>;
  /** Once every draw is stored. May ask the pool for more. */
  readonly finish: (pool: Pick<WorkerPool, 'run'>, signal: AbortSignal) => Promise<void>;
  readonly fail: (reason: string) => Promise<void>;
}

/** Words for the developer: what happened, where, and what to do about it. */
export function failureReason(failure: WorkerFailure, ladder: readonly number[], at?: { readonly level: number; readonly draws: readonly number[] }, axis: AxisSetting = { key: 'noise' }): string {
  const level = at === undefined ? undefined : ladder[at.level];
  const place = at === undefined || level === undefined ? 'In the checks' : `At ${levelWords(axis, level)}, ${drawWords(at.draws)}`;
  switch (failure.kind) {
    case 'memory':
      return `${place}: ${failure.message} Choose parameters that need less memory, then queue it again.`;
    case 'time':
      return `${place}: ${failure.message} Allow fewer iterations or a looser tolerance, then queue it again.`;
    default:
      return `${place}: ${failure.message}`;
  }
}

function levelWords({ key }: AxisSetting, level: number): string {
  if (key === 'noise') return `noise level ${percent(level)}`;
  const { name, print } = axisWords[key];
  return `level ${print === 'share' ? percent(level) : String(level)} of the axis '${name.toLowerCase()}'`;
}
const percent = (level: number): string => `${Number((100 * level).toPrecision(3))} %`;
function drawWords(draws: readonly number[]): string {
  const first = draws[0] ?? 0;
  const last = draws.at(-1) ?? first;
  return first === last ? `draw ${first + 1}` : `draws ${first + 1} to ${last + 1}`;
}
