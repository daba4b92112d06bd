import type { TrialWire } from '../../../../shared/contracts/runs';
import type { AxisSetting } from '../../../../shared/domain/axes';
import { axisView } from '../../../lib/axis-words';
import { formatError } from '../../../lib/format';

export interface RunTrials {
  readonly run: string;
  readonly phantom: { readonly name: string; readonly slug: string; readonly version: number; readonly sealed: boolean };
  /** What the levels vary; the noise where absent. */
  readonly axis?: AxisSetting;
  readonly ladder: readonly number[];
  readonly trials: readonly TrialWire[];
  /** Relative L2 of the trivial reconstruction. */
  readonly trivial: number | null;
  /** Lower end of what the rule may choose, where the configuration sets one. */
  readonly smallestParameter: number | null;
}

export interface Failure {
  readonly kind: 'diverged' | 'worse-than-nothing' | 'target-lost' | 'at-the-limit' | 'outlier' | 'stopped-early';
  readonly title: string;
  readonly text: string;
  readonly state: 'fail' | 'caution';
  readonly run: string;
  readonly phantom: RunTrials['phantom'];
  readonly level: number;
  readonly draw: number;
  /** Larger is worse; orders failures of one kind. */
  readonly weight: number;
}

const l2 = 'relative-l2-error';
const position = 'position-error';
const order: readonly Failure['kind'][] = ['diverged', 'worse-than-nothing', 'target-lost', 'at-the-limit', 'outlier', 'stopped-early'];
/** A draw this many times its level's median is worth a look. */
const outlierRatio = 1.6;

const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[sorted.length >> 1] ?? Number.NaN;
};
const worstOf = (trials: readonly TrialWire[]): TrialWire => trials.reduce((a, b) => ((b.metrics[l2] ?? 0) > (a.metrics[l2] ?? 0) ? b : a));

function ofLevel(run: RunTrials, level: number): Failure[] {
  const trials = run.trials.filter((t) => t.level === level);
  if (trials.length === 0) return [];
  const noise = run.ladder[level] ?? 0;
  const axis = axisView(run.axis);
  const at = `${run.phantom.name} at ${axis.isNoise ? axis.format(noise) : axis.at(noise)}`;
  const count = (some: readonly TrialWire[]): string => `${some.length} of ${trials.length} draws`;
  const found: Failure[] = [];
  const add = (kind: Failure['kind'], title: string, state: Failure['state'], some: readonly TrialWire[], text: string, weight: number): void => {
    const worst = worstOf(some);
    found.push({ kind, title, state, text, weight, run: run.run, phantom: run.phantom, level, draw: worst.draw });
  };
  const errors = trials.map((t) => t.metrics[l2]).filter((v): v is number => v !== null && v !== undefined);
  const middle = median(errors);

  const diverged = trials.filter((t) => t.stop === 'diverged');
  if (diverged.length) add('diverged', 'Diverged', 'fail', diverged, `${at}, ${count(diverged)}. The iteration left the numbers that can be held; the background is stored in its place.`, diverged.length);

  const lost = trials.filter((t) => run.trivial !== null && (t.metrics[l2] ?? 0) > run.trivial);
  if (lost.length) add('worse-than-nothing', 'Worse than nothing', 'fail', lost, `${at}, ${count(lost)}. The error, ${formatError(worstOf(lost).metrics[l2])} at worst, is above that of the background alone.`, lost.length * 100 + middle);

  const placed = trials.filter((t) => position in t.metrics);
  const unplaced = placed.filter((t) => t.metrics[position] === null);
  if (unplaced.length && run.trials.some((t) => t.metrics[position] !== null && t.metrics[position] !== undefined))
    add('target-lost', 'A target lost', 'caution', unplaced, `${at}, ${count(unplaced)}. No component stands for a declared target, so its position error is not defined.`, unplaced.length);

  const { smallestParameter } = run;
  const limited = smallestParameter === null ? [] : trials.filter((t) => t.parameter !== null && t.parameter <= smallestParameter * 1.001);
  if (limited.length) add('at-the-limit', 'Under-regularised', 'caution', limited, `${at}, ${count(limited)}. The rule took the smallest value it is allowed.`, limited.length * 100 + middle);

  if (errors.length >= 8) {
    const worst = worstOf(trials);
    const ratio = (worst.metrics[l2] ?? 0) / middle;
    if (ratio > outlierRatio) add('outlier', 'One draw stands out', 'caution', [worst], `${at}, draw ${worst.draw + 1}. Its error is ${ratio.toFixed(1)} times the median of its level.`, ratio);
  }
  const unfinished = trials.filter((t) => t.stop === 'maxIterations');
  if (unfinished.length) add('stopped-early', 'Out of iterations', 'caution', unfinished, `${at}, ${count(unfinished)}. The most iterations allowed came before convergence.`, unfinished.length);
  return found;
}

/** Kinds of failure over all trials, the worst place of each, the gravest kind first. */
export function findFailures(runs: readonly RunTrials[]): { failures: Failure[]; trials: number } {
  const all = runs.flatMap((run) => run.ladder.flatMap((_, level) => ofLevel(run, level)));
  const failures = order.flatMap((kind) => {
    const some = all.filter((f) => f.kind === kind);
    return some.length ? [some.reduce((a, b) => (b.weight > a.weight ? b : a))] : [];
  });
  return { failures, trials: runs.reduce((sum, run) => sum + run.trials.length, 0) };
}
