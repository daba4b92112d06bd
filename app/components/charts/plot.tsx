import { useId, type ReactNode } from 'react';
import { useWidth } from '../../lib/use-size';
import { ChartTable, type ChartTableData } from './chart-table';
import { linearScale, linearTicks, logScale, logTicks, tickText, type Scale } from './scales';

export interface Axis {
  low: number;
  high: number;
  log?: boolean;
  label?: string;
  /** Values, or values with their own text. Round ones when absent; an empty list draws none. */
  ticks?: readonly (number | readonly [value: number, text: string])[];
}

export interface PlotArea {
  x: Scale;
  y: Scale;
  left: number;
  right: number;
  top: number;
  bottom: number;
  width: number;
  height: number;
  /** `url(#...)` of hatching (worse than trivial), dots (below the floor), and of the clip to the frame. */
  hatch: string;
  dots: string;
  clip: string;
  id: string;
}

interface PlotProps {
  /** Spoken name of the figure. */
  label: string;
  x: Axis;
  y: Axis;
  height: number;
  margin?: { left?: number; right?: number; top?: number; bottom?: number };
  /** Vertical label inside the frame's corner instead of none. */
  table: ChartTableData;
  tableHidden?: boolean;
  children: (area: PlotArea) => ReactNode;
}

const scaleOf = (axis: Axis, from: number, to: number): Scale =>
  axis.log ? logScale(axis.low, axis.high, from, to) : linearScale(axis.low, axis.high, from, to);

const ticksOf = (axis: Axis, room: number): (readonly [number, string])[] => {
  const own = axis.ticks ?? (axis.log ? logTicks(axis.low, axis.high, Math.max(3, room)) : linearTicks(axis.low, axis.high, Math.max(2, room)));
  return own.map((t) => (typeof t === 'number' ? ([t, tickText(t)] as const) : t)).filter(([v]) => v >= axis.low - 1e-12 && v <= axis.high * (1 + 1e-9) + 1e-12);
};

/** A plain frame with grid, ticks and clip; what is drawn inside comes from `children`. */
export function Plot({ label, x, y, height, margin = {}, table, tableHidden = false, children }: PlotProps) {
  const [ref, width] = useWidth(480);
  const id = useId().replace(/[^\w-]/g, '');
  const left = margin.left ?? 40;
  const right = width - (margin.right ?? 10);
  const top = margin.top ?? 10;
  const bottom = height - (margin.bottom ?? 34);
  const X = scaleOf(x, left, right);
  const Y = scaleOf(y, bottom, top);
  const area: PlotArea = { x: X, y: Y, left, right, top, bottom, width, height, hatch: `url(#${id}h)`, dots: `url(#${id}d)`, clip: `url(#${id}c)`, id };
  return (
    <div className="ch" ref={ref}>
      <svg width={width} height={height} role="img" aria-label={label}>
        <PlotPatterns id={id} area={area} />
        {ticksOf(y, (bottom - top) / 34).map(([v, text]) => (
          <g key={text}>
            <line x1={left} x2={right} y1={Y(v)} y2={Y(v)} stroke="var(--hair)" />
            <text className="ax" x={left - 7} y={Y(v) + 4} textAnchor="end">{text}</text>
          </g>
        ))}
        {ticksOf(x, (right - left) / 64).map(([v, text]) => (
          <g key={text}>
            <line x1={X(v)} x2={X(v)} y1={top} y2={bottom} stroke="var(--hair)" />
            <text className="ax" x={X(v)} y={bottom + 15} textAnchor={X(v) - left < 14 ? 'start' : right - X(v) < 14 ? 'end' : 'middle'}>{text}</text>
          </g>
        ))}
        {x.label ? <text className="ax" x={right} y={height - 3} textAnchor="end">{x.label}</text> : null}
        <rect x={left} y={top} width={Math.max(0, right - left)} height={bottom - top} fill="none" stroke="var(--hair-2)" />
        {right - left > 20 ? children(area) : null}
        {y.label ? <text className="ax" x={left + 6} y={top + 13} style={{ paintOrder: 'stroke', stroke: 'var(--sheet)', strokeWidth: 4 }}>{y.label}</text> : null}
      </svg>
      <ChartTable data={table} hidden={tableHidden} />
    </div>
  );
}

export function PlotPatterns({ id, area }: { id: string; area: Pick<PlotArea, 'left' | 'right' | 'top' | 'bottom'> }) {
  return (
    <defs>
      <clipPath id={`${id}c`}><rect x={area.left} y={area.top} width={Math.max(0, area.right - area.left)} height={Math.max(0, area.bottom - area.top)} /></clipPath>
      <pattern id={`${id}h`} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
        <line x1="0" x2="0" y1="0" y2="7" stroke="var(--brick-mark)" strokeWidth="1" opacity=".32" />
      </pattern>
      <pattern id={`${id}d`} width="5" height="5" patternUnits="userSpaceOnUse">
        <circle cx="1.5" cy="1.5" r=".8" fill="var(--ink-3)" />
      </pattern>
    </defs>
  );
}

/** Path through points; a null breaks the line. */
export function linePath(points: readonly (readonly [x: number, y: number] | null)[]): string {
  let d = '';
  let pen = false;
  for (const p of points) {
    if (!p || !Number.isFinite(p[0]) || !Number.isFinite(p[1])) {
      pen = false;
      continue;
    }
    d += `${pen ? 'L' : 'M'}${p[0].toFixed(1)} ${p[1].toFixed(1)}`;
    pen = true;
  }
  return d;
}

/** Closed area between an upper and a lower line given at the same places. */
export function bandPath(upper: readonly (readonly [number, number])[], lower: readonly (readonly [number, number])[]): string {
  if (upper.length < 2) return '';
  return `${linePath(upper)}L${[...lower].reverse().map((p) => `${p[0].toFixed(1)} ${p[1].toFixed(1)}`).join('L')}Z`;
}
