import { formatError } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { solverLook } from '../ui/solver-glyph';
import { clamp, logScale } from './scales';

/** A fixed scatter across the strip, the same for the same draw, so that equal values stay apart. */
const scatter = (draw: number): number => ((draw * 0.618034) % 1) - 0.5;

interface DotStripProps {
  /** Values of all draws in draw order. */
  draws: readonly (number | null)[];
  median: number | null;
  low: number;
  high: number;
  trivial?: number | null;
  glyph: number;
  /** A draw to point at (index from 0), with its name. */
  flagged?: { draw: number; name?: string } | null;
  height?: number;
}

/** All draws of a level as dots on a log axis, median as a stroke, trivial value dashed. */
export function DotStrip({ draws, median, low, high, trivial = 1, glyph, flagged = null, height = 24 }: DotStripProps) {
  const [ref, width] = useWidth(190);
  const x = logScale(low, high, 6, width - 6);
  const at = (v: number): number => x(clamp(v, low, high));
  const mid = height / 2;
  const { colour } = solverLook(glyph);
  const known = draws.filter((v): v is number => v !== null);
  const flag = flagged ? draws[flagged.draw] : null;
  const words = known.length ? `${known.length} draws from ${formatError(Math.min(...known))} to ${formatError(Math.max(...known))}, median ${formatError(median)}` : 'No draws';
  return (
    <div className="ch" ref={ref}>
      <svg width={width} height={height} role="img" aria-label={words}>
        <line x1="6" x2={width - 6} y1={mid} y2={mid} stroke="var(--hair)" />
        {trivial !== null && trivial > low && trivial < high ? <line x1={at(trivial)} x2={at(trivial)} y1="1" y2={height - 1} stroke="var(--brick-mark)" strokeDasharray="3 2" /> : null}
        {draws.map((v, i) => (v === null || v <= 0 ? null : <circle key={i} cx={at(v)} cy={mid + scatter(i) * 11} r="2.3" fill={colour} fillOpacity=".55" />))}
        {median !== null && median > 0 ? <line x1={at(median)} x2={at(median)} y1="4" y2={height - 4} stroke="var(--ink)" strokeWidth="1.6" /> : null}
        {flag ? (
          <>
            <circle cx={at(flag)} cy={mid} r="5" fill="none" stroke="var(--amber-mark)" strokeWidth="1.8" />
            {flagged?.name ? <text className="ax" x={at(flag) > width - 62 ? at(flag) - 9 : at(flag) + 9} y={mid + 4} textAnchor={at(flag) > width - 62 ? 'end' : 'start'}>{flagged.name}</text> : null}
          </>
        ) : null}
      </svg>
    </div>
  );
}
