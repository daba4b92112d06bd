import { useWidth } from '../../lib/use-size';
import { Marker, solverLook } from '../ui/solver-glyph';
import { ChartTable } from './chart-table';
import { clamp } from './scales';

export interface MeanRank {
  id: string;
  glyph: number;
  name: string;
  meanRank: number;
  /** Members of one tie group stand together; null where no groups are given. */
  tieGroup: number | null;
}

/** Neighbours of one tie group: first and last place, and how many. */
function brackets(items: readonly MeanRank[]): { from: number; to: number }[] {
  const found: { from: number; to: number }[] = [];
  items.forEach(({ tieGroup }, i) => {
    const before = items[i - 1];
    const last = found[found.length - 1];
    if (tieGroup !== null && before?.tieGroup === tieGroup && last) last.to = i;
    else found.push({ from: i, to: i });
  });
  return found.filter(({ from, to }) => to > from);
}

/**
 * Dot and bar as wide as the critical difference: overlapping bars cannot be separated. The wash is the reach of the
 * best; brackets are the tie groups. Items come in the one order of the test and are not sorted again.
 */
export function MeanRankStrip({ items, criticalDifference, label = 'Mean rank of each solver with critical difference bars' }: { items: readonly MeanRank[]; criticalDifference: number | null; label?: string }) {
  const [ref, width] = useWidth(720);
  const n = items.length;
  const left = width < 500 ? 132 : 158;
  const row = 27;
  const top = 28;
  const x = (rank: number): number => left + ((rank - 0.5) / Math.max(n, 1)) * (width - left - 44);
  const half = (criticalDifference ?? 0) / 2;
  const reach = (rank: number): [number, number] => [x(clamp(rank - half, 0.5, n + 0.5)), x(clamp(rank + half, 0.5, n + 0.5))];
  const best = items[0];
  const room = Math.floor((left - 22) / 6.4);
  return (
    <div className="ch" ref={ref}>
      <svg width={width} height={top + n * row + 2} role="img" aria-label={label}>
        {items.map((_, i) => (
          <g key={i}>
            <line x1={x(i + 1)} x2={x(i + 1)} y1={top - 6} y2={top + n * row} stroke="var(--hair)" />
            <text className="ax" x={x(i + 1)} y={top - 12} textAnchor="middle">{i + 1}</text>
          </g>
        ))}
        {best && half > 0 ? <rect x={reach(best.meanRank)[0]} y={top - 4} width={reach(best.meanRank)[1] - reach(best.meanRank)[0]} height={n * row + 4} fill="var(--petrol-wash)" opacity=".75" /> : null}
        {items.map((s, i) => {
          const y = top + i * row + row / 2;
          const look = solverLook(s.glyph);
          const [a, b] = reach(s.meanRank);
          return (
            <g key={s.id}>
              <line x1="0" x2={width} y1={y + row / 2} y2={y + row / 2} stroke="var(--hair)" />
              <text className="dl" x="12" y={y + 4}>{s.name.length > room ? `${s.name.slice(0, room - 1)}…` : s.name}</text>
              {half > 0 ? (
                <>
                  <line x1={a} x2={b} y1={y} y2={y} stroke={look.colour} strokeWidth="5" opacity=".45" />
                  <path d={`M${a} ${y - 5}v10M${b} ${y - 5}v10`} stroke={look.colour} strokeWidth="1.4" />
                </>
              ) : null}
              <Marker shape={look.shape} x={x(s.meanRank)} y={y} r={5} fill={look.colour} stroke="var(--sheet)" strokeWidth={1.3} />
              <text className="dl" x={width} y={y + 4} textAnchor="end">{s.meanRank.toFixed(2)}</text>
            </g>
          );
        })}
        {brackets(items).map(({ from, to }) => (
          <path key={from} className="tie-bracket" d={`M7 ${top + from * row + 6}H2V${top + (to + 1) * row - 6}H7`} fill="none" stroke="var(--ink-2)" strokeWidth="1.3" />
        ))}
      </svg>
      <ChartTable
        hidden
        data={{
          caption: label, columns: ['Solver', 'Mean rank', 'Tie group'],
          rows: items.map((s) => [s.name, s.meanRank.toFixed(2), s.tieGroup === null ? 'none' : s.tieGroup + 1]),
        }}
      />
    </div>
  );
}
