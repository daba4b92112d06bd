import { CartesianGrid, ComposedChart, Line, ReferenceLine, Scatter, XAxis, YAxis } from 'recharts';
import { formatError, formatSeconds } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { Marker, solverLook } from '../ui/solver-glyph';
import { ChartTable } from './chart-table';
import { axisLook, gridLook, lineLook } from './recharts-look';
import { linearTicks, logTicks, niceAbove, niceBelow, spread, tickText } from './scales';

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
  const errors = placed.map((p) => p.error);
  const worst = Math.max(...errors);
  // The line of the trivial reconstruction comes in where it is near; far above it would press the points together.
  const top = trivial !== null && trivial > worst && trivial < 1.6 * worst ? trivial : worst;
  const x: [number, number] = [niceBelow(Math.min(...times) * 0.8), niceAbove(Math.max(...times) * 1.3)];
  const y: [number, number] = [Math.min(...errors) * 0.9, top * 1.06];
  const steep = y[1] / y[0] > 5;
  const front = placed.filter((p) => p.onFront).sort((a, b) => a.seconds - b.seconds || b.error - a.error);
  const steps = [{ seconds: front[0]!.seconds, error: y[1] }, ...front.map(({ seconds, error }) => ({ seconds, error })), { seconds: x[1], error: front[front.length - 1]!.error }];
  const plotHeight = height - 48;
  const toY = (error: number): number => 14 + plotHeight * (1 - Math.log(error / y[0]) / Math.log(y[1] / y[0]));
  // Labels stand above the step that leaves their point, or below it where another one is there; what is behind the front is named in the table.
  const labels = new Map(spread([...front].sort((a, b) => b.error - a.error).map((p) => ({ id: p.id, y: toY(p.error) - 9 })), 15, 24, height - 50).map((l) => [l.id, l.at - l.y > 4 ? Math.max(l.at - l.y - 9, 12) : l.at - l.y - 9]));
  return (
    <>
      <div className="ch" ref={ref}>
        <div role="img" aria-label={label}>
          <ComposedChart width={width} height={height} margin={{ top: 14, right: 14, bottom: 18, left: 4 }} accessibilityLayer={false}>
            <CartesianGrid {...gridLook} />
            <XAxis {...axisLook} dataKey="seconds" type="number" scale="log" domain={x} ticks={logTicks(x[0], x[1], width > 420 ? 7 : 4)} tickFormatter={(value: number) => formatSeconds(value)} allowDataOverflow label={{ value: 'seconds per reconstruction', position: 'insideBottomRight', offset: -12, fontSize: 11, fill: 'var(--ink-2)' }} />
            <YAxis {...axisLook} dataKey="error" width={42} type="number" scale="log" domain={y} ticks={steep ? logTicks(y[0], y[1], 6) : linearTicks(y[0], y[1], 5)} tickFormatter={tickText} allowDataOverflow />
            {trivial !== null && trivial > y[0] && trivial < y[1] ? <ReferenceLine y={trivial} stroke="var(--brick)" strokeDasharray="6 3" /> : null}
            <Line {...lineLook} type="stepAfter" data={steps} dataKey="error" stroke="var(--petrol)" strokeWidth={1.6} />
            {front.map((p) => (
              <Scatter
                key={`${p.id} name`} isAnimationActive={false} data={[{ seconds: p.seconds, error: p.error }]} dataKey="error"
                shape={({ cx = 0, cy = 0 }: { cx?: number; cy?: number }) => {
                  const toLeft = cx > width * 0.62;
                  return <text className="dl" x={cx + (toLeft ? -9 : 9)} y={cy + (labels.get(p.id) ?? 0) + 3} textAnchor={toLeft ? 'end' : 'start'} style={{ paintOrder: 'stroke', stroke: 'var(--sheet)', strokeWidth: 4 }}>{p.name}</text>;
                }}
              />
            ))}
            {placed.map((p) => (
              <Scatter
                key={p.id} isAnimationActive={false} data={[{ seconds: p.seconds, error: p.error }]} dataKey="error"
                shape={({ cx = 0, cy = 0 }: { cx?: number; cy?: number }) => {
                  const look = solverLook(p.glyph);
                  return (
                    <g>
                      {p.id === focusId ? <circle cx={cx} cy={cy} r={10} fill="none" stroke="var(--petrol)" strokeWidth={1.6} /> : null}
                      <Marker shape={look.shape} x={cx} y={cy} r={5.4} fill={p.onFront ? look.colour : 'var(--sheet)'} stroke={p.onFront ? 'var(--sheet)' : look.colour} strokeWidth={p.onFront ? 1.3 : 1.8} />
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
