import { CartesianGrid, ComposedChart, Line, ReferenceArea, ReferenceLine, Scatter, XAxis, YAxis } from 'recharts';
import { formatNumber } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { ChartTable } from './chart-table';
import { axisLook, gridLook, lineLook } from './recharts-look';
import { linearTicks, logTicks, tickText } from './scales';

export interface PicardChartProps {
  label?: string;
  singularValues: readonly number[];
  /** |u_i^T y|. */
  coefficients: readonly number[];
  noisePerCoefficient: number;
  /** Number (from 1) at which the noise takes over; null when it never does. */
  crossing: number | null;
  height?: number;
}

const colours = { data: 'color-mix(in oklab, var(--s1) 78%, var(--ink))', ratio: 'color-mix(in oklab, var(--s2) 78%, var(--ink))' } as const;

/** Discrete Picard view: singular values as a line, data coefficients as dots, their ratio as crosses. */
export function PicardChart({ label = 'Singular values, data coefficients and their ratio', singularValues, coefficients, noisePerCoefficient, crossing, height = 290 }: PicardChartProps) {
  const [ref, width] = useWidth(560);
  const rows = singularValues.map((sigma, i) => {
    const c = coefficients[i] ?? NaN;
    return { k: i + 1, sigma: sigma > 0 ? sigma : null, data: c > 0 ? c : null, ratio: sigma > 0 && c > 0 ? c / sigma : null };
  });
  const all = rows.flatMap((r) => [r.sigma, r.data, r.ratio]).filter((v): v is number => v !== null);
  if (!all.length) return <p className="sm">This method has no singular values to show.</p>;
  const low = 10 ** Math.floor(Math.log10(Math.max(Math.min(...all), Math.max(...all) * 1e-16)));
  const high = 10 ** Math.ceil(Math.log10(Math.max(...all)));
  const last = rows.length;
  const every = Math.max(1, Math.floor(last / 24));
  return (
    <div className="ch" ref={ref}>
      <div role="img" aria-label={label}>
        <ComposedChart width={width} height={height} data={rows} margin={{ top: 14, right: 12, bottom: 18, left: 4 }} accessibilityLayer={false}>
          <CartesianGrid {...gridLook} />
          {crossing === null ? null : <ReferenceArea x1={crossing} x2={last} fill="var(--brick-wash)" fillOpacity={0.6} stroke="none" />}
          <XAxis {...axisLook} dataKey="k" type="number" domain={[1, last]} ticks={[1, ...linearTicks(2, last, 6)]} label={{ value: 'singular value number', position: 'insideBottomRight', offset: -12, fontSize: 11, fill: 'var(--ink-2)' }} />
          <YAxis {...axisLook} width={42} type="number" scale="log" domain={[low, high]} ticks={logTicks(low, high, 8)} tickFormatter={tickText} allowDataOverflow />
          <ReferenceLine y={noisePerCoefficient} stroke="var(--brick)" strokeWidth={1.2} strokeDasharray="6 3" />
          {crossing === null ? null : <ReferenceLine x={crossing} stroke="var(--brick)" strokeWidth={1.3} label={{ value: `noise takes over at ${crossing}`, position: crossing > last * 0.6 ? 'insideBottomRight' : 'insideBottomLeft', fontSize: 12, fontWeight: 600, fill: 'var(--brick)' }} />}
          <Line {...lineLook} dataKey="sigma" stroke="var(--s7)" strokeWidth={2} />
          <Scatter isAnimationActive={false} dataKey="data" shape={({ cx, cy }: { cx?: number; cy?: number }) => (cx === undefined || cy === undefined || Number.isNaN(cy) ? <g /> : <circle cx={cx} cy={cy} r={2.1} fill="var(--s1)" />)} />
          <Scatter isAnimationActive={false} dataKey="ratio" shape={({ cx, cy }: { cx?: number; cy?: number }) => (cx === undefined || cy === undefined || Number.isNaN(cy) ? <g /> : <path d={`M${cx - 2.6} ${cy}h5.2M${cx} ${cy - 2.6}v5.2`} stroke="var(--s2)" strokeWidth={1.2} />)} />
        </ComposedChart>
        <p className="sm flex gap-x4 flex-wrap" style={{ paddingLeft: 46 }}>
          <span>line: σ, singular values</span>
          <span style={{ color: colours.data }}>dots: |u·y|, data</span>
          <span style={{ color: colours.ratio }}>crosses: |u·y| / σ</span>
        </p>
      </div>
      <ChartTable
        data={{
          caption: label, columns: ['Number', 'σ', '|u·y|', '|u·y| / σ'],
          rows: rows.filter((_, i) => i % every === 0).map((r) => [r.k, formatNumber(r.sigma), formatNumber(r.data), formatNumber(r.ratio)]),
        }}
      />
    </div>
  );
}
