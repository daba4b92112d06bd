import { Area, CartesianGrid, ComposedChart, Line, ReferenceArea, Scatter, XAxis, YAxis } from 'recharts';
import { formatNumber } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { ChartTable } from './chart-table';
import { axisLook, gridLook, lineLook } from './recharts-look';
import { linearTicks, tickText } from './scales';

export interface DataFrameChartProps {
  label: string;
  /** Values without noise, group after group, already in `unit`. */
  values: readonly number[];
  /** Half width of the 90 % band of the noise, in `unit`; 0 draws none. */
  noiseBand?: number;
  /** One noisy draw or measured frame, in `unit`. */
  draw?: readonly number[];
  /** Names of the groups, and of the values within each. */
  patternNames: readonly string[];
  channelNames: readonly (readonly string[])[];
  unit: string;
  /** What a group and a value are, for the axes. */
  words?: { readonly group: string; readonly value: string };
  /** Show one group only (phones), index from 0. */
  pattern?: number | null;
  height?: number;
}

const impedanceWords = { group: 'drive pattern', value: 'measured between electrodes' };

/** Data group by group: line without noise, band of 90 % of the noise, dots of one draw. */
export function DataFrameChart({ label, values, noiseBand = 0, draw, patternNames, channelNames, unit, words = impedanceWords, pattern = null, height = 230 }: DataFrameChartProps) {
  const [ref, width] = useWidth(900);
  const shownPatterns = pattern === null ? patternNames.map((_, p) => p) : [pattern];
  const sizes = channelNames.map((names) => names.length);
  const starts = sizes.map((_, p) => sizes.slice(0, p).reduce((sum, size) => sum + size, 0));
  // A row without values between two groups breaks the line there.
  const places = shownPatterns.map((_, at) => shownPatterns.slice(0, at).reduce((sum, p) => sum + (sizes[p] ?? 0) + 1, 0));
  const end = shownPatterns.reduce((sum, p) => sum + (sizes[p] ?? 0) + 1, 0);
  const rows = shownPatterns.flatMap((p, at) => {
    const base = places[at] ?? 0;
    const per = sizes[p] ?? 0;
    const inside = Array.from({ length: per }, (_, m) => {
      const i = (starts[p] ?? 0) + m;
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
  const centres = shownPatterns.map((p, at) => (places[at] ?? 0) + ((sizes[p] ?? 1) - 1) / 2);
  const single = pattern !== null;
  const per = sizes[pattern ?? 0] ?? 0;
  const ticks = single ? Array.from({ length: per }, (_, m) => m).filter((m) => m % Math.max(1, Math.ceil(per / 5)) === 0) : centres.filter((_, at) => at % every === 0);
  const name = (at: number): string => (single ? (channelNames[pattern]?.[at] ?? String(at + 1)) : (patternNames[shownPatterns[centres.indexOf(at)] ?? 0] ?? ''));
  const same = sizes.every((size) => size === per);
  return (
    <div className="ch" ref={ref}>
      <div role="img" aria-label={label}>
        <ComposedChart width={width} height={height} data={rows} margin={{ top: 10, right: 8, bottom: 18, left: 4 }} accessibilityLayer={false}>
          {single ? null : shownPatterns.map((p, at) => (at % 2 === 0 ? null : <ReferenceArea key={p} x1={(places[at] ?? 0) - 1} x2={(places[at] ?? 0) + (sizes[p] ?? 0)} fill="var(--inset)" fillOpacity={0.6} stroke="none" />))}
          <CartesianGrid {...gridLook} vertical={false} />
          <XAxis
            {...axisLook} dataKey="at" type="number" domain={[-1, end - 1]} ticks={ticks} tickFormatter={name} interval={0}
            label={{ value: single ? words.value : `${words.group}${same ? `; ${per} values in each` : ''}`, position: 'insideBottom', offset: -12, fontSize: 11, fill: 'var(--ink-2)' }}
          />
          <YAxis {...axisLook} width={46} type="number" domain={domain} ticks={linearTicks(domain[0], domain[1], 4)} tickFormatter={tickText} label={{ value: unit, position: 'insideTopLeft', offset: 12, dx: 44, dy: -12, fontSize: 11, fill: 'var(--ink-2)' }} />
          {noiseBand > 0 ? <Area {...lineLook} dataKey="band" stroke="none" fill="var(--petrol)" fillOpacity={0.2} /> : null}
          <Line {...lineLook} dataKey="clean" stroke="var(--petrol)" strokeWidth={1.4} />
          {draw ? <Scatter isAnimationActive={false} dataKey="dot" shape={({ cx, cy, payload }: { cx?: number; cy?: number; payload?: { dot: number | null } }) => (cx === undefined || cy === undefined || Number.isNaN(cy) || payload?.dot === null ? <g /> : <circle cx={cx} cy={cy} r={1.9} fill="var(--ink)" />)} /> : null}
        </ComposedChart>
      </div>
      <ChartTable
        data={{
          caption: label, columns: [words.group.charAt(0).toUpperCase() + words.group.slice(1), ...Array.from({ length: Math.max(0, ...sizes) }, (_, m) => m + 1)],
          rows: patternNames.map((p, i) => [p, ...Array.from({ length: sizes[i] ?? 0 }, (_, m) => formatNumber(values[(starts[i] ?? 0) + m] ?? null))]),
        }}
      />
    </div>
  );
}
