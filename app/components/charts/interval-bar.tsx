import { formatError } from '../../lib/format';
import { Marker, solverLook } from '../ui/solver-glyph';
import { clamp, tickText } from './scales';

/** A shared log axis for the bars of one table. */
export interface BarAxis {
  low: number;
  high: number;
}

const share = (axis: BarAxis, v: number): number => clamp(Math.log(v / axis.low) / Math.log(axis.high / axis.low), 0, 1) * 100;

/** An axis that holds all the intervals and the trivial value with a little room. */
export function barAxis(values: readonly (number | null)[], trivial: number | null): BarAxis {
  const known = values.filter((v): v is number => v !== null && v > 0);
  const all = trivial === null ? known : [...known, trivial];
  if (all.length === 0) return { low: 0.05, high: 1.6 };
  const low = Math.min(...all) / 1.3;
  return { low, high: Math.max(Math.max(...all) * (trivial === null ? 1.2 : 1.1), low * 4) };
}

/** Median as the solver's marker on its 5 to 95 % bar; dashed brick line at the trivial value. */
export function IntervalBar({ glyph, low, median, high, axis, trivial = null }: { glyph: number; low: number | null; median: number | null; high: number | null; axis: BarAxis; trivial?: number | null }) {
  const look = solverLook(glyph);
  const whole = low !== null && high !== null && low > 0;
  const from = whole ? share(axis, low) : 0;
  const to = whole ? share(axis, high) : 0;
  return (
    <span className="ib-bar" role="img" aria-label={whole ? `90 per cent interval ${formatError(low)} to ${formatError(high)}` : 'No interval'}>
      {trivial === null ? null : <i className="tr" style={{ left: `${share(axis, trivial)}%` }} />}
      {whole ? <i className="iv" style={{ left: `${from}%`, width: `${Math.max(to - from, 1)}%`, '--c': look.colour }} /> : null}
      {median !== null && median > 0 ? (
        <svg className="md" style={{ left: `${share(axis, median)}%` }} width="14" height="14" viewBox="-8 -8 16 16" aria-hidden="true">
          <Marker shape={look.shape} x={0} y={0} r={5.2} fill={look.colour} stroke="var(--sheet)" strokeWidth={1.4} />
        </svg>
      ) : null}
    </span>
  );
}

/** The axis under a column head: a few round values. */
export function BarAxisTicks({ axis }: { axis: BarAxis }) {
  const ticks: number[] = [];
  for (let e = Math.floor(Math.log10(axis.low)); e <= Math.log10(axis.high); e++) {
    for (const m of [1, 3]) {
      const v = Number((m * 10 ** e).toPrecision(2));
      if (v > axis.low * 1.1 && v < axis.high * 0.97) ticks.push(v);
    }
  }
  const kept = ticks.length > 5 ? ticks.filter((v) => Math.abs(Math.log10(v) % 1) < 1e-9) : ticks;
  return <div className="axis">{kept.map((v) => <span key={v} style={{ left: `${share(axis, v)}%` }}>{tickText(v)}</span>)}</div>;
}
