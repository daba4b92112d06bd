import type { Series } from '../../../../shared/contracts/benches';
import type { Curve } from '../../../components/charts/stability-chart';
import { shortNames } from './names';

/** The series of a bench as curves of the charts. */
export function toCurves(series: Series): Curve[] {
  const short = shortNames(series.items.map((item) => item.solver.name));
  return series.items.map((item) => ({
    id: item.solver.slug,
    glyph: item.glyph,
    name: item.solver.name,
    short: short(item.solver.name),
    points: item.levels.map((l) => ({ level: l.level, median: l.median, low: l.p05, high: l.p95 })),
    breakdown: item.sheet.breakdown?.value ?? null,
  }));
}
