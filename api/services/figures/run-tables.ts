import type { LevelStatistics, StabilitySheetWire } from '../../../shared/contracts/common';
import type { AxisKey } from '../../../shared/domain/axes';
import { getMetric, metrics } from '../../../solvers/metrics/registry';
import { levelStatistics } from '../../../solvers/statistics/error-table';
import { stabilitySheet, type StabilitySheet } from '../../../solvers/statistics/stability-sheet';
import type { Run } from '../../entities/run.ts';
import type { RunFigures } from './load-run-figures.ts';

const tables = new WeakMap<RunFigures, Map<string, LevelStatistics[]>>();
const sheets = new WeakMap<RunFigures, Record<string, StabilitySheetWire>>();

/** Values of the draws of a level, null where undefined or not done. */
export function drawsAt(figures: RunFigures, metric: string, level: number): (number | null)[] {
  const column = figures.values.get(metric);
  const draws: (number | null)[] = [];
  for (let draw = 0; draw < figures.draws; draw++) {
    const value = column?.[level * figures.draws + draw] ?? NaN;
    draws.push(Number.isNaN(value) ? null : value);
  }
  return draws;
}

/** The error table of one metric. Computed once for figures that are kept. */
export function levelTable(figures: RunFigures, ladder: readonly number[], metric: string): LevelStatistics[] {
  const own = tables.get(figures) ?? new Map<string, LevelStatistics[]>();
  tables.set(figures, own);
  const kept = own.get(metric);
  if (kept) return kept;
  const { better } = getMetric(metric);
  const table = ladder.map((noise, level) => {
    const reason = figures.reasons.get(metric)?.get(level) ?? null;
    const draws = drawsAt(figures, metric, level);
    const started = reason !== null || draws.some((value) => value !== null);
    return levelStatistics(noise, started ? draws : [], better, reason);
  });
  own.set(metric, table);
  return table;
}

/** How each error grows with the noise, for metrics where smaller is better. Only a finished run has them. */
export function runSheets(run: Pick<Run, 'id' | 'state' | 'ladder' | 'trivial' | 'axis'>, figures: RunFigures): Record<string, StabilitySheetWire> {
  if (run.state !== 'finished') return {};
  const kept = sheets.get(figures);
  if (kept) return kept;
  const made = Object.fromEntries(metrics.filter(({ better }) => better === 'lower').map(({ key }) => [key, runSheet(run, figures, key)]));
  sheets.set(figures, made);
  return made;
}

export function runSheet(run: Pick<Run, 'id' | 'ladder' | 'trivial' | 'axis'>, figures: RunFigures, metric: string): StabilitySheetWire {
  return makeSheet({
    metric, axis: run.axis?.key ?? 'noise', ladder: run.ladder, draws: run.ladder.map((_, level) => drawsAt(figures, metric, level)), trivial: run.trivial?.[metric] ?? null, seed: `${run.id}/${metric}`,
  });
}

/** The law is fitted below a noise of 100 %: at and beyond it a logarithmic law means nothing. */
export function makeSheet(input: {
  readonly metric: string;
  readonly axis: AxisKey;
  readonly ladder: readonly number[];
  readonly draws: readonly (readonly (number | null)[])[];
  readonly trivial: number | null;
  readonly seed: string;
}): StabilitySheetWire {
  const { metric, axis, trivial, seed } = input;
  if (axis === 'contrast') return toSheet(metric, none('The errors are relative to the contrast itself: there is no law in it to fit.'));
  const levels = input.ladder.filter((level) => level < 1).length;
  if (levels === 0) return toSheet(metric, none('No level lies below 100 %.'));
  return toSheet(metric, stabilitySheet({ ladder: input.ladder.slice(0, levels), draws: input.draws.slice(0, levels), trivial, seed }));
}

const none = (reason: string): StabilitySheet => ({ model: 'none', exponent: null, floor: null, constant: null, breakdown: null, breakdownNote: null, aiccDifference: null, reason });

function toSheet(metric: string, { model, exponent, floor, constant, breakdown, breakdownNote, reason }: StabilitySheet): StabilitySheetWire {
  return { metric, model, exponent, floor, constant, breakdown, breakdownNote, reason };
}
