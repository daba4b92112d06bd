import { formatError } from '../../lib/format';
import { usePhone } from '../../lib/use-media';
import { useAxis } from '../noise-rule/axis-context';
import { Marker, solverLook } from '../ui/solver-glyph';
import { bandPath, linePath, Plot, type PlotArea } from './plot';
import { clamp, tickText } from './scales';
import { levelTicks, valueRange, type Curve } from './stability-chart';

export interface Interval {
  value: number;
  low: number;
  high: number;
}

export interface AnnotatedStabilityProps {
  label?: string;
  curve: Curve;
  /** Other phantoms, grey. */
  others?: readonly Curve[];
  levels: readonly number[];
  noise: number;
  /** Model-error floor of the phantom, a fraction. */
  modelFloor: number | null;
  trivial: number | null;
  exponent: Interval | null;
  /** Level to which the error falls, in the metric. */
  errorFloor: Interval | null;
  /** Relative noise, a fraction. */
  breakdown: Interval | null;
  breakdownNote?: 'beyond' | 'throughout' | null;
  height?: number;
}

const span = (i: Interval, text: (v: number) => string): string => `${text(i.low)} to ${text(i.high)}`;

/** A stability curve with its floor, exponent and breakdown drawn on it, each with name, value and interval. */
export function AnnotatedStability(props: AnnotatedStabilityProps) {
  const { label = 'Stability curve with fitted exponent, floor and breakdown', curve, others = [], levels, noise, modelFloor: modelErrorFloor, trivial, exponent, errorFloor, breakdown, height } = props;
  const axis = useAxis();
  const modelFloor = axis.isNoise ? modelErrorFloor : null;
  const phone = usePhone();
  const [y0, y1] = valueRange([curve, ...others], trivial);
  const xMin = levels[0] ?? 1e-4;
  const xMax = levels[levels.length - 1] ?? 0.3;
  const ticks = levelTicks(levels, axis.isNoise).map((l) => [l, axis.format(l)] as const);
  return (
    <Plot
      label={label} height={height ?? (phone ? 372 : 412)} margin={{ left: 42, right: phone ? 8 : 18, top: 16, bottom: phone ? 52 : 38 }}
      x={{ low: xMin, high: xMax, log: true, ticks }} y={{ low: y0, high: y1, log: true }}
      table={{
        caption: label, columns: [axis.head, 'Median', '5 %', '95 %'],
        rows: curve.points.map((p) => [axis.format(p.level), formatError(p.median), formatError(p.low), formatError(p.high)]),
      }}
    >
      {(a) => {
        const y = (v: number): number => a.y(clamp(v, y0 * 0.8, y1 * 1.05));
        const floorX = modelFloor !== null && modelFloor > xMin && modelFloor < xMax ? a.x(modelFloor) : null;
        const cursor = a.x(clamp(noise, xMin, xMax));
        const line = linePath(curve.points.map((p) => (p.median !== null && p.median > 0 ? [a.x(p.level), y(p.median)] : null)));
        const whole = curve.points.filter((p): p is typeof p & { low: number; high: number } => p.low !== null && p.high !== null && p.low > 0);
        const look = solverLook(curve.glyph);
        return (
          <>
            {trivial === null || y1 <= trivial ? null : (
              <g>
                <rect x={a.left} y={a.top} width={a.right - a.left} height={a.y(trivial) - a.top} fill={a.hatch} />
                <line x1={a.left} x2={a.right} y1={a.y(trivial)} y2={a.y(trivial)} stroke="var(--brick)" strokeWidth="1.2" strokeDasharray="6 3" />
              </g>
            )}
            {floorX === null ? null : (
              <g>
                <rect x={a.left} y={a.top} width={floorX - a.left} height={a.bottom - a.top} fill={a.dots} opacity=".55" />
                <line x1={floorX} x2={floorX} y1={a.top} y2={a.bottom} stroke="var(--ink-2)" strokeDasharray="1.5 2.5" />
              </g>
            )}
            <g clipPath={a.clip}>
              {others.map((o) => <path key={o.id} d={linePath(o.points.map((p) => (p.median !== null && p.median > 0 ? [a.x(p.level), y(p.median)] : null)))} fill="none" stroke="var(--line)" strokeWidth="1.2" />)}
              <path d={bandPath(whole.map((p) => [a.x(p.level), y(p.high)]), whole.map((p) => [a.x(p.level), y(p.low)]))} fill={look.colour} opacity=".16" />
              <path d={line} fill="none" stroke={look.colour} strokeWidth="2.6" />
            </g>
            <line x1={cursor} x2={cursor} y1={a.top - 5} y2={a.bottom + 2} stroke="var(--petrol)" strokeWidth="1.4" />
            <path d={`M${cursor - 5} ${a.top - 9}h10l-5 7z`} fill="var(--petrol)" />
            {errorFloor ? <FloorNote area={a} floor={errorFloor} phone={phone} y={y} levels={levels} /> : null}
            {exponent ? <SlopeNote area={a} exponent={exponent} curve={curve} y={y} errorFloor={errorFloor} breakdown={breakdown} levels={levels} phone={phone} /> : null}
            {trivial === null ? null : <BreakdownNote area={a} trivial={trivial} breakdown={breakdown} note={props.breakdownNote ?? null} xMin={xMin} xMax={xMax} phone={phone} />}
            {curve.points.map((p) => {
              if (p.median === null || p.median <= 0 || p.median > y1) return null;
              const hollow = modelFloor !== null && p.level < modelFloor;
              return <Marker key={p.level} shape={look.shape} x={a.x(p.level)} y={y(p.median)} r={4.2} fill={hollow ? 'var(--sheet)' : look.colour} stroke={hollow ? look.colour : 'var(--sheet)'} strokeWidth={hollow ? 1.2 : 1} />;
            })}
            {floorX === null ? null : (
              <g>
                <rect x={a.left + 0.5} y={a.height - 11.5} width="12" height="9" fill="var(--sheet)" stroke="var(--hair-2)" />
                <rect x={a.left + 0.5} y={a.height - 11.5} width="12" height="9" fill={a.dots} />
                <text className="ax" x={a.left + 18} y={a.height - 3}>below the model-error floor, {axis.format(modelFloor ?? 0)}</text>
              </g>
            )}
            {others.length && !phone ? <text className="ax" x={a.left + 260} y={a.height - 3}>grey: the other {others.length === 1 ? 'phantom' : `${others.length} phantoms`}</text> : null}
            <text className="ax" x={a.right} y={phone ? a.height - 19 : a.height - 3} textAnchor="end">{axis.label}</text>
          </>
        );
      }}
    </Plot>
  );
}

interface NoteProps {
  area: PlotArea;
  phone: boolean;
}

function Words({ x, y, anchor = 'start', colour, name, rest }: { x: number; y: number; anchor?: 'start' | 'end'; colour: string; name: string; rest: string }) {
  return (
    <text x={x} y={y} textAnchor={anchor} className="dl" style={{ fill: colour, fontWeight: 600, paintOrder: 'stroke', stroke: 'var(--sheet)', strokeWidth: 5 }}>
      {name}
      <tspan dx="6" style={{ fontWeight: 400, fill: 'var(--ink-2)' }}>{rest}</tspan>
    </text>
  );
}

function FloorNote({ area: a, floor, phone, y, levels }: NoteProps & { floor: Interval; y: (v: number) => number; levels: readonly number[] }) {
  const end = a.x(levels[Math.floor(levels.length / 2)] ?? 0.005);
  return (
    <g>
      <rect x={a.left} y={y(floor.high)} width={Math.max(0, end - a.left)} height={Math.max(1, y(floor.low) - y(floor.high))} fill="var(--petrol)" opacity=".16" />
      <line x1={a.left} x2={end + 20} y1={y(floor.value)} y2={y(floor.value)} stroke="var(--petrol)" strokeWidth="1.3" strokeDasharray="5 3" />
      <Words x={phone ? a.left + 8 : a.left + (a.right - a.left) * 0.22} y={Math.min(y(floor.low) + 22, a.bottom - 8)} colour="var(--petrol)" name={`floor b ${tickText(Number(floor.value.toPrecision(2)))}`} rest={span(floor, (v) => tickText(Number(v.toPrecision(2))))} />
    </g>
  );
}

/** A slope triangle over half a decade below the curve, in the growing part. */
function SlopeNote({ area: a, exponent, curve, y, errorFloor, breakdown, levels }: NoteProps & { exponent: Interval; curve: Curve; y: (v: number) => number; errorFloor: Interval | null; breakdown: Interval | null; levels: readonly number[] }) {
  const last = levels[levels.length - 1] ?? 0.3;
  const to = Math.min(last, breakdown?.value ?? last) / 1.1;
  const from = to / 10 ** 0.54;
  const at = [...curve.points].reverse().find((p) => p.level <= from && p.median !== null)?.median ?? errorFloor?.value;
  if (!at || at <= 0) return null;
  const x0 = a.x(from);
  const x1 = a.x(to);
  const base = Math.min(y(at) + 26, a.bottom - 24);
  const decade = a.y(1) - a.y(10);
  const rise = (v: number): number => Math.max(a.top, base - v * Math.log10(to / from) * decade);
  return (
    <g>
      <path d={`M${x0} ${base}H${x1}V${rise(exponent.value)}Z`} fill="var(--sheet)" stroke="var(--petrol)" strokeWidth="1.3" />
      <path d={`M${x0} ${base}L${x1} ${rise(exponent.low)}V${rise(exponent.high)}Z`} fill="var(--petrol)" opacity=".22" />
      <Words x={x1 + 3} y={base + 18} anchor="end" colour="var(--petrol)" name={`exponent ν ${exponent.value.toFixed(2)}`} rest={span(exponent, (v) => v.toFixed(2))} />
    </g>
  );
}

function BreakdownNote({ area: a, trivial, breakdown, note, xMin, xMax, phone }: NoteProps & { trivial: number; breakdown: Interval | null; note: 'beyond' | 'throughout' | null; xMin: number; xMax: number }) {
  const axis = useAxis();
  const y = a.y(trivial);
  const words = (
    <text className="ax brick" x={a.left + 9} y={y + 16} style={{ paintOrder: 'stroke', stroke: 'var(--sheet)', strokeWidth: 5 }}>{phone ? 'worse than trivial' : 'worse than the trivial reconstruction'}</text>
  );
  if (!breakdown) {
    return (
      <g>
        {words}
        <text className="dl" textAnchor="end" x={a.right - 8} y={y - 20} style={{ fill: 'var(--brick)', fontWeight: 600, paintOrder: 'stroke', stroke: 'var(--sheet)', strokeWidth: 5 }}>
          {note === 'throughout' ? 'worse than trivial throughout' : `no breakdown up to ${axis.format(xMax)}`}
        </text>
      </g>
    );
  }
  const at = (v: number): number => a.x(clamp(v, xMin, xMax));
  return (
    <g>
      <line x1={at(breakdown.value)} x2={at(breakdown.value)} y1={a.bottom} y2={y} stroke="var(--brick)" strokeWidth="1.2" strokeDasharray="3 3" />
      <path d={`M${at(breakdown.low)} ${y}H${at(breakdown.high)}M${at(breakdown.low)} ${y - 6}v12M${at(breakdown.high)} ${y - 6}v12`} stroke="var(--brick)" strokeWidth="2.4" />
      <circle cx={at(breakdown.value)} cy={y} r="4.6" fill="var(--sheet)" stroke="var(--brick)" strokeWidth="1.8" />
      {words}
      <Words x={at(breakdown.value) - 26} y={y - 20} anchor="end" colour="var(--brick)" name={`breakdown ${axis.format(breakdown.value)}`} rest={span(breakdown, axis.format)} />
    </g>
  );
}
