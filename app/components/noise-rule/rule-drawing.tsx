import { useId, type ReactNode } from 'react';
import { Marker, solverLook } from '../ui/solver-glyph';
import { useAxis } from './axis-context';
import { nearestLevel, toShare, type RuleScale } from './scale';

export interface RuleFocus {
  /** Stable index of the solver's entry. */
  glyph: number;
  /** Breakdown noise, a fraction; null when it holds over the whole ladder. */
  breakdown: number | null;
}

/** Space left and right of the scale inside the track, px. Charts that share the axis use it too. */
export const ruleInset = (width: number): number => (width < 500 ? 14 : 31);

const height = 72;
const mid = 36;

interface DrawingProps {
  width: number;
  scale: RuleScale;
  noise: number;
  floor: number | null;
  focus: RuleFocus | null;
}

export function RuleDrawing({ width, scale, noise, floor, focus }: DrawingProps) {
  const id = useId().replace(/[^\w-]/g, '');
  const axis = useAxis();
  const small = width < 500;
  const inset = ruleInset(width);
  const x = (v: number): number => inset + toShare(scale, v) * (width - 2 * inset);
  const cursor = x(noise);
  const near = nearestLevel(scale, noise);
  const floorInside = floor !== null && floor > scale.min && floor < scale.max ? floor : null;
  const floorX = floorInside === null ? null : x(floorInside);
  const breakdown = focus?.breakdown && focus.breakdown < scale.max ? Math.max(focus.breakdown, scale.min) : null;
  return (
    <svg width={width} height={height} aria-hidden="true" overflow="visible" style={{ display: 'block' }}>
      <defs>
        <pattern id={`${id}h`} width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <line x1="0" y1="0" x2="0" y2="6" stroke="var(--brick-mark)" strokeWidth="1.6" opacity=".55" />
        </pattern>
        <pattern id={`${id}d`} width="5" height="5" patternUnits="userSpaceOnUse">
          <circle cx="1.5" cy="1.5" r=".85" fill="var(--ink-3)" />
        </pattern>
      </defs>
      <rect x=".5" y="14.5" width={Math.max(0, width - 1)} height="43" fill="var(--sheet)" stroke="var(--hair-2)" rx="2" />
      {floorX === null ? null : (
        <g>
          <rect x="1" y="15" width={floorX - 1} height="42" fill="var(--inset)" />
          <rect x="1" y="15" width={floorX - 1} height="42" fill={`url(#${id}d)`} opacity=".75" />
          <line x1={floorX} x2={floorX} y1="15" y2="57" stroke="var(--ink-2)" strokeWidth="1.3" strokeDasharray="1.5 2.5" />
        </g>
      )}
      {breakdown === null ? null : (
        <g>
          <rect x={x(breakdown)} y="15" width={width - 1 - x(breakdown)} height="42" fill="var(--brick-wash)" />
          <rect x={x(breakdown)} y="15" width={width - 1 - x(breakdown)} height="42" fill={`url(#${id}h)`} opacity=".6" />
          <line x1={x(breakdown)} x2={x(breakdown)} y1="15" y2="57" stroke="var(--brick)" strokeWidth="1.5" />
        </g>
      )}
      <line x1="1" x2={width - 1} y1={mid} y2={mid} stroke="var(--ink)" />
      <PercentTicks scale={scale} x={x} small={small} />
      {axis.isNoise ? <DecibelTicks scale={scale} x={x} small={small} cursor={cursor} /> : null}
      {scale.levels.map((level) => {
        const current = near.on && level === near.level;
        const at = x(level);
        return (
          <g key={level}>
            {Math.abs(at - cursor) < (small ? 26 : 30) ? null : (
              <text className="nr-t1" x={at} y="10" textAnchor="middle">{small ? axis.digits(level).replace(/^0(?=.)/, '') : axis.format(level)}</text>
            )}
            <circle
              cx={at} cy={mid} r={current ? 4.5 : 3.4}
              fill={current ? 'var(--petrol)' : 'var(--sheet)'} stroke={current ? 'var(--petrol)' : 'var(--ink)'} strokeWidth="1.3"
              strokeDasharray={floorInside !== null && level < floorInside && !current ? '1.6 1.5' : undefined}
            />
          </g>
        );
      })}
      {floorX !== null && floorX > 159 && cursor > floorX + 24 ? (
        <g>
          <rect x="3" y="42" width={floorX - 6} height="13.5" fill="var(--inset)" />
          <text className="nr-fl" x="8" y="52.5">below the model-error floor</text>
        </g>
      ) : null}
      {breakdown !== null && focus?.breakdown && !small ? <BreakdownName x={x(breakdown)} cursor={cursor} width={width} glyph={focus.glyph} noise={focus.breakdown} /> : null}
      <Cursor at={cursor} width={small ? 30 : 46} noise={noise} />
    </svg>
  );
}

function PercentTicks({ scale, x, small }: { scale: RuleScale; x: (v: number) => number; small: boolean }) {
  const ticks: ReactNode[] = [];
  const from = Math.floor(Math.log10(scale.min) + 1e-9);
  const to = Math.ceil(Math.log10(scale.max) - 1e-9);
  for (let e = from; e < to; e++) {
    for (let k = 10; k < 100; k++) {
      const v = (k / 10) * 10 ** e;
      if (v < scale.min * 0.999 || v > scale.max * 1.001) continue;
      if (k >= 30 && k % 5) continue;
      if (k >= 20 && k < 30 && k % 2) continue;
      if (small && k % 10) continue;
      const length = k === 10 ? 15 : k % 10 === 0 ? (k === 50 ? 12 : 9) : k % 5 === 0 ? 6 : 4;
      ticks.push(<line key={`${e}.${k}`} x1={x(v)} x2={x(v)} y1={mid} y2={mid - length} stroke="var(--ink)" strokeWidth={k === 10 ? 1.3 : 0.8} opacity={k % 10 ? 0.55 : 1} />);
    }
  }
  return <>{ticks}</>;
}

function DecibelTicks({ scale, x, small, cursor }: { scale: RuleScale; x: (v: number) => number; small: boolean; cursor: number }) {
  const ticks: ReactNode[] = [];
  const high = Math.floor(-20 * Math.log10(scale.min) + 1e-6);
  const low = Math.ceil(-20 * Math.log10(scale.max) - 1e-6);
  for (let d = high; d >= low; d--) {
    if (small && d % 5) continue;
    const at = x(10 ** (-d / 20));
    const length = d % 10 === 0 ? 12 : d % 5 === 0 ? 8 : 4;
    ticks.push(<line key={d} x1={at} x2={at} y1={mid} y2={mid + length} stroke="var(--ink-3)" strokeWidth=".8" opacity={d % 5 ? 0.55 : 1} />);
    if (d % 10 === 0 && Math.abs(at - cursor) > 22) {
      ticks.push(<text key={`t${d}`} className="nr-t2" x={at + (d === high ? 3 : 0)} y="69" textAnchor="middle">{d}{d === high && !small ? ' dB' : ''}</text>);
    }
  }
  return <>{ticks}</>;
}

/** The name stands where it hides neither the cursor nor the frame. */
function BreakdownName({ x, cursor, width, glyph, noise }: { x: number; cursor: number; width: number; glyph: number; noise: number }) {
  const w = 112;
  const hidden = (left: number): boolean => cursor > left - 26 && cursor < left + w + 26;
  const left = [x + 4, cursor + 27, x - w - 4, cursor - 27 - w].find((l) => !hidden(l) && l + w < width - 2 && l > 2) ?? x + 4;
  const look = solverLook(glyph);
  const axis = useAxis();
  return (
    <g>
      <rect x={left} y="41.5" width={w} height="14.5" fill={left >= x ? 'var(--brick-wash)' : 'var(--sheet)'} />
      <Marker shape={look.shape} x={left + 9} y={49} r={4.2} fill={look.colour} />
      <text className="nr-b" x={left + 18} y="53">breakdown {axis.format(noise)}</text>
    </g>
  );
}

function Cursor({ at, width, noise }: { at: number; width: number; noise: number }) {
  const axis = useAxis();
  return (
    <g className="nr-cur">
      <rect x={at - width / 2} y="12" width={width} height="48" rx="3" fill="var(--glass)" stroke="var(--petrol)" strokeWidth="1.2" />
      <line x1={at} x2={at} y1="14" y2="66" stroke="var(--petrol)" strokeWidth="1.6" />
      <rect x={at - width / 2} y="-.5" width={width} height="15" rx="2.5" fill="var(--petrol)" />
      <text className="nr-flag" x={at} y="10.6" textAnchor="middle">{axis.format(noise)}</text>
    </g>
  );
}
