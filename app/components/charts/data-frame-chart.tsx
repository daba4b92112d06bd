import { Area, CartesianGrid, ComposedChart, Line, ReferenceArea, Scatter, XAxis, YAxis } from 'recharts';
import { formatNumber } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { ChartTable } from './chart-table';
import { axisLook, gridLook, lineLook } from './recharts-look';
import { linearTicks, tickText } from './scales';

export interface DataFrameChartProps {
  label: string;
  /** Pattern-major values without noise, already in `unit`. */
  values: readonly number[];
  /** Half width of the 90 % band of the noise, in `unit`; 0 draws none. */
  noiseBand?: number;
  /** One noisy draw or measured frame, in `unit`. */
  draw?: readonly number[];
  valuesPerPattern: number;
  patternNames: readonly string[];
  channelNames?: readonly (readonly string[])[];
  unit: string;
  /** Show one pattern only (phones), index from 0. */
  pattern?: number | null;
  height?: number;
}

/** Data by drive pattern: line without noise, band of 90 % of the noise, dots of one draw. */
export function DataFrameChart({ label, values, noiseBand = 0, draw, valuesPerPattern: per, patternNames, channelNames, unit, pattern = null, height = 230 }: DataFrameChartProps) {
  const [ref, width] = useWidth(900);
  const shownPatterns = pattern === null ? patternNames.map((_, p) => p) : [pattern];
  // A row without values between two patterns breaks the line there.
  const rows = shownPatterns.flatMap((p, at) => {
    const base = at * (per + 1);
    const inside = Array.from({ length: per }, (_, m) => {
      const i = p * per + m;
      const v = values[i] ?? null;
      return { at: base + m, clean: v, band: v === null ? null : [v - noiseBand, v + noiseBand], dot: draw?.[i] ?? null };
    });
    return [...inside, { at: base + per, clean: null, band: null, dot: null }];
  });
  const all = rows.flatMap((r) => [r.clean, r.dot, ...(r.band ?? [])]).filter((v): v is number => v !== null);
  const low = Math.min(0, ...all);
  const high = Math.max(0, ...all);
  const pad = (high - low || 1) * 0.05;
  const domain: [number, number] = [low - (low < 0 ? pad : 0), high + pad];
  const every = Math.max(1, Math.ceil(shownPatterns.length / Math.max(1, Math.floor(width / 58))));
  const patternTicks = shownPatterns.map((_, at) => at * (per + 1) + (per - 1) / 2).filter((_, at) => at % every === 0);
  const channelTicks = Array.from({ length: per }, (_, m) => m).filter((m) => m % Math.max(1, Math.ceil(per / 5)) === 0);
  const single = pattern !== null;
  const name = (at: number): string =>
    single ? (channelNames?.[pattern]?.[at] ?? String(at + 1)) : (patternNames[shownPatterns[Math.round((at - (per - 1) / 2) / (per + 1))] ?? 0] ?? '');
  return (
    <div className="ch" ref={ref}>
      <div role="img" aria-label={label}>
        <ComposedChart width={width} height={height} data={rows} margin={{ top: 10, right: 8, bottom: 18, left: 4 }} accessibilityLayer={false}>
          {single ? null : shownPatterns.filter((_, at) => at % 2 === 1).map((p) => <ReferenceArea key={p} x1={p * (per + 1) - 1} x2={(p + 1) * (per + 1) - 1} fill="var(--inset)" fillOpacity={0.6} stroke="none" />)}
          <CartesianGrid {...gridLook} vertical={false} />
          <XAxis
            {...axisLook} dataKey="at" type="number" domain={[-1, shownPatterns.length * (per + 1) - 1]} ticks={single ? channelTicks : patternTicks} tickFormatter={name} interval={0}
            label={{ value: single ? 'measured between electrodes' : `drive pattern; ${per} measurements in each`, position: 'insideBottom', offset: -12, fontSize: 11, fill: 'var(--ink-2)' }}
          />
          <YAxis {...axisLook} width={46} type="number" domain={domain} ticks={linearTicks(domain[0], domain[1], 4)} tickFormatter={tickText} label={{ value: unit, position: 'insideTopLeft', offset: 12, dx: 44, dy: -12, fontSize: 11, fill: 'var(--ink-2)' }} />
          {noiseBand > 0 ? <Area {...lineLook} dataKey="band" stroke="none" fill="var(--petrol)" fillOpacity={0.2} /> : null}
          <Line {...lineLook} dataKey="clean" stroke="var(--petrol)" strokeWidth={1.4} />
          {draw ? <Scatter isAnimationActive={false} dataKey="dot" shape={({ cx, cy, payload }: { cx?: number; cy?: number; payload?: { dot: number | null } }) => (cx === undefined || cy === undefined || Number.isNaN(cy) || payload?.dot === null ? <g /> : <circle cx={cx} cy={cy} r={1.9} fill="var(--ink)" />)} /> : null}
        </ComposedChart>
      </div>
      <ChartTable
        data={{
          caption: label, columns: ['Pattern', ...Array.from({ length: per }, (_, m) => m + 1)],
          rows: patternNames.map((p, i) => [p, ...Array.from({ length: per }, (_, m) => formatNumber(values[i * per + m] ?? null))]),
        }}
      />
    </div>
  );
}
