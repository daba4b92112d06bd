import type { EntityManager } from '@mikro-orm/sqlite';
import type { Run } from '../../entities/run.ts';
import { BoundedCache } from './bounded-cache.ts';

/** Every figure of a finished run: by metric, `levels * draws` values, NaN where undefined or not done. */
export interface RunFigures {
  readonly levels: number;
  readonly draws: number;
  /** By metric key, at `level * draws + draw`. */
  readonly values: ReadonlyMap<string, Float64Array>;
  /** Why a metric is undefined at a level, the first reason met; by metric key, then level. */
  readonly reasons: ReadonlyMap<string, ReadonlyMap<number, string>>;
}

interface TrialRow {
  readonly level: number;
  readonly draw: number;
  readonly metrics: string;
  readonly reasons: string | null;
}

const cache = new BoundedCache<RunFigures>(400);

/** The trials of a run that ended do not change, so its figures are kept under its result hash. A run under way is read anew. */
export async function loadRunFigures(em: EntityManager, run: Pick<Run, 'id' | 'resultHash' | 'ladder' | 'draws'>): Promise<RunFigures> {
  const key = run.resultHash ? `${run.id}:${run.resultHash}` : null;
  const kept = key ? cache.get(key) : undefined;
  if (kept) return kept;
  const rows: TrialRow[] = await em.execute('select level, draw, metrics, reasons from trial where run_id = ? order by level, draw', [run.id]);
  const levels = run.ladder.length;
  const values = new Map<string, Float64Array>();
  const reasons = new Map<string, Map<number, string>>();
  for (const row of rows) {
    if (row.level >= levels || row.draw >= run.draws) continue;
    for (const [metric, value] of Object.entries(readRecord<number | null>(row.metrics))) {
      let column = values.get(metric);
      if (!column) values.set(metric, (column = new Float64Array(levels * run.draws).fill(NaN)));
      if (value !== null) column[row.level * run.draws + row.draw] = value;
    }
    if (row.reasons === null) continue;
    for (const [metric, reason] of Object.entries(readRecord<string>(row.reasons))) {
      let byLevel = reasons.get(metric);
      if (!byLevel) reasons.set(metric, (byLevel = new Map()));
      if (!byLevel.has(row.level)) byLevel.set(row.level, reason);
    }
  }
  const figures: RunFigures = { levels, draws: run.draws, values, reasons };
  return key ? cache.set(key, figures) : figures;
}

/** JSON that this server wrote into its own column. */
function readRecord<V>(text: string | Record<string, V>): Record<string, V> {
  return typeof text === 'string' ? (JSON.parse(text) as Record<string, V>) : text;
}
