import { CartesianGrid, ComposedChart, Line, ReferenceLine, Scatter, XAxis, YAxis } from 'recharts';
import { formatError, formatSeconds } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { Marker, solverLook } from '../ui/solver-glyph';
import { ChartTable } from './chart-table';
import { axisLook, gridLook, lineLook } from './recharts-look';
import { logTicks, niceAbove, niceBelow, spread, tickText } from './scales';

export interface ParetoPoint {
  id: string;
  glyph: number;
  name: string;
  error: number | null;
  seconds: number | null;
  onFront: boolean | null;
  /** Name of a solver that is at least as good in both. */
  dominatedBy: string | null;
}

interface ParetoProps {
  label: string;
  errorName: string;
  points: readonly ParetoPoint[];
  trivial: number | null;
  focusId: string | null;
  height?: number;
}

type Placed = ParetoPoint & { error: number; seconds: number };

/** Decades where they fit, else 1-2-5 steps. */
const secondsTick = (value: number): string => formatSeconds(value);

/** Median error against seconds per reconstruction: the front filled and joined by steps, the others hollow. */
export function ParetoChart({ label, errorName, points, trivial, focusId, height = 300 }: ParetoProps) {
  const [ref, width] = useWidth(560);
  const placed = points.filter((p): p is Placed => p.onFront !== null && p.error !== null && p.error > 0 && p.seconds !== null && p.seconds > 0);
  const left = points.filter((p) => !placed.some((own) => own.id === p.id));
  const state = (p: ParetoPoint): string => (p.onFront === null ? 'not placed' : p.onFront ? 'on the front' : `behind ${p.dominatedBy ?? 'another'}`);
  const table = <ChartTable data={{ caption: label, columns: ['Solver', 'Time each', errorName, 'Place'], rows: points.map((p) => [p.name, formatSeconds(p.seconds), formatError(p.error), state(p)]) }} />;
  const missing = left.length > 0 ? <p className="sm">Not placed, for want of a time or an error: {left.map((p) => p.name).join(', ')}.</p> : null;
  if (!placed.length) return <>{missing}{table}</>;
  const times = placed.map((p) => p.seconds);
  const errors = [...placed.map((p) => p.error), ...(trivial !== null && trivial > 0 ? [trivial] : [])];
  const x: [number, number] = [niceBelow(Math.min(...times) * 0.8), niceAbove(Math.max(...times) * 1.3)];
  const y: [number, number] = [niceBelow(Math.min(...errors) * 0.9), niceAbove(Math.max(...errors) * 1.05)];
  const front = placed.filter((p) => p.onFront).sort((a, b) => a.seconds - b.seconds || b.error - a.error);
  const steps = [{ seconds: front[0]!.seconds, error: y[1] }, ...front.map(({ seconds, error }) => ({ seconds, error })), { seconds: x[1], error: front[front.length - 1]!.error }];
  const plotHeight = height - 48;
  const toY = (error: number): number => 14 + plotHeight * (1 - Math.log(error / y[0]) / Math.log(y[1] / y[0]));
  // Labels of the front keep clear of each other; the others are named in the table.
  const labels = new Map(spread([...front].sort((a, b) => b.error - a.error).map((p) => ({ id: p.id, y: toY(p.error) })), 14, 20, height - 40).map((l) => [l.id, l.at - l.y]));
  return (
    <>
      <div className="ch" ref={ref}>
        <div role="img" aria-label={label}>
          <ComposedChart width={width} height={height} margin={{ top: 14, right: 14, bottom: 18, left: 4 }} accessibilityLayer={false}>
            <CartesianGrid {...gridLook} />
            <XAxis {...axisLook} dataKey="seconds" type="number" scale="log" domain={x} ticks={logTicks(x[0], x[1], width > 420 ? 7 : 4)} tickFormatter={secondsTick} allowDataOverflow label={{ value: 'seconds per reconstruction', position: 'insideBottomRight', offset: -12, fontSize: 11, fill: 'var(--ink-2)' }} />
            <YAxis {...axisLook} dataKey="error" width={42} type="number" scale="log" domain={y} ticks={logTicks(y[0], y[1], 6)} tickFormatter={tickText} allowDataOverflow />
            {trivial !== null && trivial > y[0] && trivial < y[1] ? <ReferenceLine y={trivial} stroke="var(--brick)" strokeDasharray="6 3" /> : null}
            <Line {...lineLook} type="stepAfter" data={steps} dataKey="error" stroke="var(--petrol)" strokeWidth={1.6} />
            {placed.map((p) => (
              <Scatter
                key={p.id} isAnimationActive={false} data={[{ seconds: p.seconds, error: p.error }]} dataKey="error"
                shape={({ cx = 0, cy = 0 }: { cx?: number; cy?: number }) => {
                  const look = solverLook(p.glyph);
                  const toLeft = cx > width * 0.62;
                  return (
                    <g>
                      {p.id === focusId ? <circle cx={cx} cy={cy} r={10} fill="none" stroke="var(--petrol)" strokeWidth={1.6} /> : null}
                      <Marker shape={look.shape} x={cx} y={cy} r={5.4} fill={p.onFront ? look.colour : 'var(--sheet)'} stroke={p.onFront ? 'var(--sheet)' : look.colour} strokeWidth={p.onFront ? 1.3 : 1.8} />
                      {p.onFront ? <text className="dl" x={cx + (toLeft ? -10 : 10)} y={cy + 4 + (labels.get(p.id) ?? 0)} textAnchor={toLeft ? 'end' : 'start'} style={{ paintOrder: 'stroke', stroke: 'var(--sheet)', strokeWidth: 4 }}>{p.name}</text> : null}
                    </g>
                  );
                }}
              />
            ))}
          </ComposedChart>
        </div>
      </div>
      {missing}
      {table}
    </>
  );
}
