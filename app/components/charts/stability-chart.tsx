import { useCallback, useId, useState, type ReactNode } from 'react';
import { formatError } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { useAxis } from '../noise-rule/axis-context';
import { ruleInset } from '../noise-rule/rule-drawing';
import { Marker, solverLook } from '../ui/solver-glyph';
import { ChartTable } from './chart-table';
import { bandPath, linePath, PlotPatterns } from './plot';
import { clamp, interpolate, logScale, logTicks, niceAbove, niceBelow, spread, tickText, type Scale } from './scales';

export interface CurvePoint {
  /** Relative noise, a fraction. */
  level: number;
  median: number | null;
  /** 5 % and 95 % of the draws. */
  low: number | null;
  high: number | null;
}
export interface Curve {
  id: string;
  glyph: number;
  name: string;
  /** Name on the chart's labels. */
  short?: string;
  points: readonly CurvePoint[];
  breakdown?: number | null;
}

export interface StabilityChartProps {
  label: string;
  curves: readonly Curve[];
  levels: readonly number[];
  noise: number;
  focusId?: string | null;
  /** Model-error floor, a fraction. */
  floor?: number | null;
  /** The trivial reconstruction's value; null where it has none for this metric. */
  trivial?: number | null;
  yLabel?: string;
  height?: number;
  /** Share the noise rule's axis, so that the cursor line stands below the cursor. */
  align?: boolean;
  /** Room for the labels at the right, px. */
  labelRoom?: number;
  /** Short name of the region above the trivial line. */
  terse?: boolean;
  tableHidden?: boolean;
}

/** Log-log error against noise: bands for the focused solver and the best at the cursor, direct labels, no legend. */
export function StabilityChart(props: StabilityChartProps) {
  const axis = useAxis();
  const { label, curves, levels, noise, focusId = null, floor: modelErrorFloor = null, trivial = 1, yLabel = 'relative L2 error', height = 400, align = false, labelRoom = 128, terse = false, tableHidden = false } = props;
  const floor = axis.isNoise ? modelErrorFloor : null;
  const [ref, width] = useWidth(640);
  const [axisRef, ruleAxis] = useRuleAxis();
  const shared = align && width > 700 ? ruleAxis : null;
  const id = useId().replace(/[^\w-]/g, '');
  const left = shared?.left ?? 38;
  const right = shared ? width - shared.right : width - labelRoom;
  const top = 10;
  const narrow = !shared && right - left < 236;
  const bottom = height - (narrow && floor ? 49 : 34);
  const area = { left, right, top, bottom };
  const [y0, y1] = valueRange(curves, trivial);
  const xMin = levels[0] ?? 1e-4;
  const xMax = levels[levels.length - 1] ?? 0.3;
  const x = logScale(xMin, xMax, left, right);
  const raw = logScale(y0, y1, bottom, top);
  // Curves that leave the frame are cut a little outside it, so that the clip and not a flat line ends them.
  const y: Scale = (v) => raw(clamp(v, y0 * 0.8, y1 * 1.05));
  const best = bestAt(curves, noise);
  const order = [...curves].sort((a, b) => Number(a.id === focusId) - Number(b.id === focusId));
  const cursor = x(clamp(noise, xMin, xMax));
  const floorX = floor !== null && floor > xMin && floor < xMax ? x(floor) : null;
  const drawable = right - left > 20 && curves.length > 0;
  return (
    <div className="ch" ref={ref}>
      <div ref={axisRef} />
      <svg width={width} height={height} role="img" aria-label={label}>
        <PlotPatterns id={id} area={area} />
        <StabilityGround id={id} area={area} x={x} y={raw} y0={y0} y1={y1} levels={levels} trivial={trivial} floorX={floorX} axisRight={shared !== null} height={height} />
        {drawable ? (
          <>
            <g clipPath={`url(#${id}c)`}>
              {order.filter((c) => c.id === focusId || c.id === best?.id).map((c) => (
                <Band key={c.id} curve={c} x={x} y={y} opacity={c.id === focusId ? 0.26 : focusId ? 0.13 : 0.2} />
              ))}
            </g>
            {floorX === null ? null : (
              <defs>
                <clipPath id={`${id}l`}><rect x={left} y={top} width={floorX - left} height={bottom - top} /></clipPath>
                <clipPath id={`${id}r`}><rect x={floorX} y={top} width={right - floorX} height={bottom - top} /></clipPath>
              </defs>
            )}
            {floorX === null ? (
              <g clipPath={`url(#${id}c)`}><Lines curves={order} x={x} y={y} focusId={focusId} /></g>
            ) : (
              <>
                <g clipPath={`url(#${id}l)`} strokeDasharray="1.6 3.2"><Lines curves={order} x={x} y={y} focusId={focusId} /></g>
                <g clipPath={`url(#${id}r)`}><Lines curves={order} x={x} y={y} focusId={focusId} /></g>
              </>
            )}
            <g clipPath={`url(#${id}c)`}><Dots curves={order} x={x} y={y} y1={y1} focusId={focusId} floor={floorX === null ? null : floor} /></g>
            {trivial === null ? null : <BreakdownRings curves={order} x={x} y={raw(trivial)} focusId={focusId} xMin={xMin} xMax={xMax} />}
          </>
        ) : null}
        <line x1={cursor} x2={cursor} y1={top - 6} y2={bottom + 2} stroke="var(--petrol)" strokeWidth="1.4" />
        <path d={`M${cursor - 5} ${top - 7}h10l-5 7z`} fill="var(--petrol)" />
        {trivial !== null && y1 > trivial * 1.2 ? (
          <g>
            <rect x={left + 6} y={raw(trivial) - 19} width={terse ? 103 : 200} height="15" fill="var(--sheet)" />
            <text className="ax brick" x={left + 9} y={raw(trivial) - 8}>{terse ? 'worse than trivial' : 'worse than the trivial reconstruction'}</text>
          </g>
        ) : null}
        {shared ? (
          <>
            <Labels curves={curves} y={y} side="left" edge={left} top={top} bottom={bottom} focusId={focusId} gap={20} />
            <text className="ax" x={left - 8} y={top + 12} textAnchor="end">{yLabel}</text>
          </>
        ) : labelRoom > 40 ? (
          <Labels curves={curves} y={y} side="right" edge={right} top={top} bottom={bottom} focusId={focusId} gap={19} />
        ) : null}
        <text className="ax" x={floorX === null && !shared ? (left + right) / 2 : right} y={narrow && floor ? height - 17 : height - 3} textAnchor={floorX === null && !shared ? 'middle' : 'end'}>{axis.label}</text>
        {floorX === null ? null : (
          <g>
            <rect x={left + 0.5} y={height - 11.5} width="12" height="9" fill="var(--sheet)" stroke="var(--hair-2)" />
            <rect x={left + 0.5} y={height - 11.5} width="12" height="9" fill={`url(#${id}d)`} />
            <text className="ax" x={left + 18} y={height - 3}>below the model-error floor</text>
          </g>
        )}
      </svg>
      <ChartTable
        hidden={tableHidden}
        data={{
          caption: `${label}: median by ${axis.isNoise ? 'noise level' : `level of ${axis.label}`}`,
          columns: ['Solver', ...levels.map((l) => axis.format(l))],
          rows: curves.map((c) => [c.name, ...levels.map((l) => formatError(c.points.find((p) => p.level === l)?.median))]),
        }}
      />
    </div>
  );
}

/** Axis ends of the rule's track, measured from the edges of the element that gets the ref; null where they do not fit. */
function useRuleAxis(): [(node: HTMLElement | null) => (() => void) | undefined, { left: number; right: number } | null] {
  const [axis, setAxis] = useState<{ left: number; right: number } | null>(null);
  const ref = useCallback((node: HTMLElement | null) => {
    if (!node || typeof ResizeObserver === 'undefined') return undefined;
    const observer = new ResizeObserver(() => {
      const track = document.querySelector('.nr-track')?.getBoundingClientRect();
      if (!track) return setAxis(null);
      const own = node.getBoundingClientRect();
      const inset = ruleInset(track.width);
      const left = track.left + inset - own.left;
      const right = own.right - (track.right - inset);
      setAxis(left > 120 && right > 30 ? { left, right } : null);
    });
    observer.observe(node);
    return () => observer.disconnect();
  }, []);
  return [ref, axis];
}

/** Decades where the levels span any; on another axis whose levels lie close together its first, middle and last. */
export function levelTicks(levels: readonly number[], decadesOnly: boolean): number[] {
  const first = levels[0] ?? 1e-4;
  const last = levels[levels.length - 1] ?? 0.3;
  const decades = logTicks(first, last, 24).filter((v) => v >= first * 0.99 && v <= last * 1.01 && Math.abs(Math.log10(v) - Math.round(Math.log10(v))) < 1e-9);
  if (decadesOnly || decades.length > 2) return decades;
  return [...new Set([first, levels[Math.floor(levels.length / 2)] ?? first, last])];
}

/** Nice bounds around the medians; the top stays within twice the trivial value, beyond which nothing is worth reading. */
export function valueRange(curves: readonly Curve[], trivial: number | null): [low: number, high: number] {
  const values = curves.flatMap((c) => c.points.map((p) => p.median)).filter((v): v is number => v !== null && v > 0);
  const least = values.length ? Math.min(...values) : (trivial ?? 1) / 20;
  const most = Math.max(...values, ...(trivial === null ? [] : [trivial * 1.5]), least * 2);
  const high = niceAbove(trivial === null ? most : Math.min(most, trivial * 2));
  return [Math.max(niceBelow(least * 0.95), high * 1e-4), high];
}

export const bestAt = (curves: readonly Curve[], noise: number): Curve | null => {
  let best: Curve | null = null;
  let least = Infinity;
  for (const c of curves) {
    const v = medianAt(c, noise);
    if (v !== null && v < least) {
      least = v;
      best = c;
    }
  }
  return best;
};

/** Median of a curve at a noise, interpolated between levels. */
export const medianAt = (curve: Curve, noise: number): number | null => interpolate(curve.points.map((p) => ({ level: p.level, value: p.median })), noise);

interface Drawn {
  x: Scale;
  y: Scale;
}

function Band({ curve, x, y, opacity }: Drawn & { curve: Curve; opacity: number }) {
  const whole = curve.points.filter((p): p is CurvePoint & { low: number; high: number } => p.low !== null && p.high !== null && p.low > 0);
  return <path d={bandPath(whole.map((p) => [x(p.level), y(p.high)]), whole.map((p) => [x(p.level), y(p.low)]))} fill={solverLook(curve.glyph).colour} opacity={opacity} />;
}

function Lines({ curves, x, y, focusId, width = 1.5 }: Drawn & { curves: readonly Curve[]; focusId: string | null; width?: number }) {
  return (
    <>
      {curves.map((c) => (
        <path key={c.id} d={linePath(c.points.map((p) => (p.median !== null && p.median > 0 ? [x(p.level), y(p.median)] : null)))} fill="none" stroke={solverLook(c.glyph).colour} strokeWidth={c.id === focusId ? 2.6 : width} />
      ))}
    </>
  );
}

function Dots({ curves, x, y, y1, focusId, floor }: Drawn & { curves: readonly Curve[]; y1: number; focusId: string | null; floor: number | null }) {
  const dots: ReactNode[] = [];
  for (const c of curves) {
    const look = solverLook(c.glyph);
    for (const p of c.points) {
      if (p.median === null || p.median <= 0 || p.median > y1) continue;
      const hollow = floor !== null && p.level < floor;
      dots.push(
        <Marker
          key={`${c.id}-${p.level}`} shape={look.shape} x={x(p.level)} y={y(p.median)} r={c.id === focusId ? 4 : 2.7}
          fill={hollow ? 'var(--sheet)' : look.colour} stroke={hollow ? look.colour : 'var(--sheet)'} strokeWidth={hollow ? 1.2 : 0.9}
        />,
      );
    }
  }
  return <>{dots}</>;
}

/** Where a curve crosses the trivial reconstruction. */
function BreakdownRings({ curves, x, y, focusId, xMin, xMax }: { curves: readonly Curve[]; x: Scale; y: number; focusId: string | null; xMin: number; xMax: number }) {
  return (
    <>
      {curves.map((c) =>
        c.breakdown && c.breakdown >= xMin && c.breakdown <= xMax ? (
          <circle key={c.id} cx={x(c.breakdown)} cy={y} r={c.id === focusId ? 5.5 : 3.6} fill="none" stroke={solverLook(c.glyph).colour} strokeWidth={c.id === focusId ? 2 : 1.3} />
        ) : null,
      )}
    </>
  );
}

function Labels({ curves, y, side, edge, top, bottom, focusId, gap }: { curves: readonly Curve[]; y: Scale; side: 'left' | 'right'; edge: number; top: number; bottom: number; focusId: string | null; gap: number }) {
  const ends = curves
    .flatMap((curve) => {
      const points = curve.points.filter((p) => p.median !== null && p.median > 0);
      const end = side === 'left' ? points[0] : points[points.length - 1];
      return end?.median ? [{ curve, y: clamp(y(end.median), top, bottom), order: end.median }] : [];
    })
    .sort((a, b) => a.y - b.y || b.order - a.order);
  const placed = spread(ends, gap, top + (side === 'left' ? 30 : 8), bottom - 2);
  const out = side === 'left' ? -1 : 1;
  return (
    <>
      {placed.map((l) => {
        const look = solverLook(l.curve.glyph);
        return (
          <g key={l.curve.id}>
            <path d={`M${edge} ${l.y}L${edge + out * (side === 'left' ? 12 : 8)} ${l.at}H${edge + out * (side === 'left' ? 16 : 12)}`} fill="none" stroke={look.colour} strokeWidth="1" />
            <Marker shape={look.shape} x={edge + out * (side === 'left' ? 24 : 19)} y={l.at} r={4.3} fill={look.colour} />
            <text className={l.curve.id === focusId ? 'dl f' : 'dl'} x={edge + out * (side === 'left' ? 34 : 28)} y={l.at + 4} textAnchor={side === 'left' ? 'end' : 'start'}>{l.curve.short ?? l.curve.name}</text>
          </g>
        );
      })}
    </>
  );
}

interface GroundProps extends Drawn {
  id: string;
  area: { left: number; right: number; top: number; bottom: number };
  y0: number;
  y1: number;
  levels: readonly number[];
  trivial: number | null;
  floorX: number | null;
  axisRight: boolean;
  height: number;
}

/** Grid, ladder ticks, hatching above the trivial line, dotted ground below the floor. */
function StabilityGround({ id, area, x, y, y0, y1, levels, trivial, floorX, axisRight }: GroundProps) {
  const { left, right, top, bottom } = area;
  const axis = useAxis();
  const decades = levelTicks(levels, axis.isNoise);
  const sparse = right - left <= 200;
  return (
    <g>
      {logTicks(y0, y1, 14).map((v) => (
        <g key={v}>
          <line x1={left} x2={right} y1={y(v)} y2={y(v)} stroke="var(--hair)" />
          <text className="ax" x={axisRight ? right + 6 : left - 7} y={y(v) + 4} textAnchor={axisRight ? 'start' : 'end'}>{tickText(v)}</text>
        </g>
      ))}
      {decades.map((v, i) => (
        <g key={v}>
          <line x1={x(v)} x2={x(v)} y1={top} y2={bottom} stroke="var(--hair)" />
          {sparse && i % 2 === 1 ? null : <text className="ax" x={x(v)} y={bottom + 15} textAnchor={i === 0 && x(v) - left < 10 ? 'start' : 'middle'}>{axis.format(v)}</text>}
        </g>
      ))}
      {levels.map((l) => <line key={l} x1={x(l)} x2={x(l)} y1={bottom} y2={bottom - 4} stroke="var(--ink-3)" />)}
      {trivial !== null && y1 > trivial ? (
        <g>
          <rect x={left} y={top} width={Math.max(0, right - left)} height={Math.max(0, y(trivial) - top)} fill={`url(#${id}h)`} />
          <line x1={left} x2={right} y1={y(trivial)} y2={y(trivial)} stroke="var(--brick)" strokeWidth="1.2" strokeDasharray="6 3" />
        </g>
      ) : null}
      <rect x={left} y={top} width={Math.max(0, right - left)} height={bottom - top} fill="none" stroke="var(--hair-2)" />
      {floorX === null ? null : (
        <g>
          <rect x={left} y={top} width={floorX - left} height={bottom - top} fill={`url(#${id}d)`} opacity=".55" />
          <line x1={floorX} x2={floorX} y1={top} y2={bottom} stroke="var(--ink-2)" strokeDasharray="1.5 2.5" />
        </g>
      )}
    </g>
  );
}

interface SmallProps {
  label: string;
  curves: readonly Curve[];
  levels: readonly number[];
  noise: number;
  floor?: number | null;
  height?: number;
  /** Common axis of several tiles. */
  range?: readonly [low: number, high: number];
}

/** The bench tile's chart: curves without labels, the best at the cursor marked. */
export function SmallStability({ label, curves, levels, noise, floor: modelErrorFloor = null, height = 126, range = [0.02, 2] }: SmallProps) {
  const axis = useAxis();
  const floor = axis.isNoise ? modelErrorFloor : null;
  const [ref, width] = useWidth(290);
  const id = useId().replace(/[^\w-]/g, '');
  const area = { left: 28, right: width - 8, top: 8, bottom: height - 20 };
  const [y0, y1] = range;
  const xMin = levels[0] ?? 1e-4;
  const xMax = levels[levels.length - 1] ?? 0.3;
  const x = logScale(xMin, xMax, area.left, area.right);
  const raw = logScale(y0, y1, area.bottom, area.top);
  const y: Scale = (v) => raw(clamp(v, y0 * 0.8, y1 * 1.05));
  const best = bestAt(curves, noise);
  const value = best ? medianAt(best, noise) : null;
  const cursor = x(clamp(noise, xMin, xMax));
  const floorX = floor !== null && floor > xMin && floor < xMax ? x(floor) : null;
  const look = best ? solverLook(best.glyph) : null;
  return (
    <div className="ch" ref={ref}>
      <svg width={width} height={height} role="img" aria-label={label}>
        <PlotPatterns id={id} area={area} />
        {[0.1, 1].map((v) => (
          <g key={v}>
            <line x1={area.left} x2={area.right} y1={raw(v)} y2={raw(v)} stroke="var(--hair)" />
            <text className="ax" x={area.left - 6} y={raw(v) + 4} textAnchor="end">{v}</text>
          </g>
        ))}
        {levelTicks(levels, axis.isNoise).map((v, i, all) => (
          <g key={v}>
            <line x1={x(v)} x2={x(v)} y1={area.top} y2={area.bottom} stroke="var(--hair)" />
            {width < 220 && i % 2 === 1 ? null : <text className="ax" x={x(v)} y={area.bottom + 15} textAnchor={i === 0 ? 'start' : i === all.length - 1 && area.right - x(v) < 10 ? 'end' : 'middle'}>{axis.format(v)}</text>}
          </g>
        ))}
        <rect x={area.left} y={area.top} width={Math.max(0, area.right - area.left)} height={raw(1) - area.top} fill={`url(#${id}h)`} />
        <line x1={area.left} x2={area.right} y1={raw(1)} y2={raw(1)} stroke="var(--brick)" strokeWidth="1.2" strokeDasharray="6 3" />
        {floorX === null ? null : <rect x={area.left} y={area.top} width={floorX - area.left} height={area.bottom - area.top} fill={`url(#${id}d)`} opacity=".55" />}
        <rect x={area.left} y={area.top} width={Math.max(0, area.right - area.left)} height={area.bottom - area.top} fill="none" stroke="var(--hair-2)" />
        <g clipPath={`url(#${id}c)`}>
          {best ? <Band curve={best} x={x} y={y} opacity={0.2} /> : null}
          <Lines curves={curves} x={x} y={y} focusId={null} width={1.4} />
        </g>
        <line x1={cursor} x2={cursor} y1={area.top - 6} y2={area.bottom + 2} stroke="var(--petrol)" strokeWidth="1.4" />
        {look && value !== null ? <Marker shape={look.shape} x={cursor} y={clamp(y(value), area.top, area.bottom)} r={4.6} fill={look.colour} stroke="var(--sheet)" strokeWidth={1.2} /> : null}
      </svg>
      <ChartTable hidden data={{ caption: label, columns: ['Solver', ...levels.map((l) => axis.format(l))], rows: curves.map((c) => [c.name, ...c.points.map((p) => formatError(p.median))]) }} />
    </div>
  );
}
