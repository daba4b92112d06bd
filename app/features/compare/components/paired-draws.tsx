import type { PairComparison } from '../../../../solvers/statistics/pairs';
import { clamp } from '../../../components/charts/scales';
import { Plot } from '../../../components/charts/plot';
import { Marker, solverLook } from '../../../components/ui/solver-glyph';
import { usePhone } from '../../../lib/use-media';
import { drawsWon, ratios, type Contender } from '../model/comparison';

const scatter = (i: number): number => ((i * 0.618034) % 1) - 0.5;
const serif = { font: '600 15px var(--serif)' } as const;

/** One strip a pair: ratio of errors on a log axis centred at 1, wins, separable or not. */
export function PairedDraws({ contenders, comparisons, metric }: { contenders: readonly Contender[]; comparisons: readonly PairComparison[]; metric: string }) {
  const phone = usePhone();
  const rows = comparisons.flatMap((pair) => {
    const a = contenders.find((c) => c.id === pair.first);
    const b = contenders.find((c) => c.id === pair.second);
    const found = a && b ? ratios(a, b, metric) : null;
    return a && b && found ? [{ pair, a, b, ...found }] : [];
  });
  const reach = clamp(Math.max(1.6, ...rows.flatMap((r) => [r.high, 1 / r.low])) * 1.15, 1.6, 20);
  const n = rows.length;
  const won = (pair: PairComparison): string => `${drawsWon(pair)} of ${pair.pairs}`;
  const ticks = [0.1, 0.2, 0.33, 0.5, 0.67, 1, 1.5, 2, 3, 5, 10].filter((v) => v > 1 / reach && v < reach);
  return (
    <Plot
      label="Ratios of paired errors, one strip for each pair" height={60 + n * (phone ? 90 : 80)} margin={{ left: 4, right: 4, top: 26, bottom: 34 }}
      x={{ low: 1 / reach, high: reach, log: true, ticks }} y={{ low: 0, high: Math.max(n, 1), ticks: [] }}
      table={{
        caption: 'Paired draws', columns: ['Pair', 'First won', 'Median ratio', 'p, corrected', 'Separable'],
        rows: rows.map((r) => [`${r.a.name} to ${r.b.name}`, won(r.pair), r.middle.toFixed(3), r.pair.pHolm.toPrecision(2), r.pair.separable ? 'yes' : 'no']),
      }}
    >
      {(p) => (
        <>
          <line x1={p.x(1)} x2={p.x(1)} y1={p.top} y2={p.bottom} stroke="var(--ink)" strokeWidth="1.4" />
          <text className="ax" x={p.x(1) - 10} y="16" textAnchor="end">← first is better</text>
          <text className="ax" x={p.x(1) + 10} y="16">second is better →</text>
          {rows.map((r, k) => {
            const y0 = p.y(n - k);
            const y1 = p.y(n - k - 1);
            const mid = (y0 + y1) / 2 + 10;
            const at = (v: number): number => p.x(clamp(v, 1 / reach, reach));
            return (
              <g key={`${r.a.id}${r.b.id}`}>
                {k ? <line x1={p.left} x2={p.right} y1={y0} y2={y0} stroke="var(--hair-2)" /> : null}
                <g transform={`translate(${p.left + 10} ${y0 + 21})`}>
                  <text className="dl" style={serif}>{r.a.letter}</text>
                  <Marker shape={solverLook(r.a.glyph).shape} x={22} y={-4.5} r={4.6} fill={solverLook(r.a.glyph).colour} />
                  <text className="dl" x="33" style={{ fill: 'var(--ink-2)' }}>to</text>
                  <text className="dl" x="52" style={serif}>{r.b.letter}</text>
                  <Marker shape={solverLook(r.b.glyph).shape} x={74} y={-4.5} r={4.6} fill={solverLook(r.b.glyph).colour} />
                </g>
                <text className="dl" x={p.right - 10} y={y0 + 21} textAnchor="end" style={{ fontWeight: 600 }}>
                  {won(r.pair)}
                  <tspan dx="6" style={{ fontWeight: 400, fill: 'var(--ink-2)' }}>{r.pair.separable ? 'separable' : 'not separable'}</tspan>
                </text>
                <rect x={at(r.low)} y={mid - 9} width={Math.max(1, at(r.high) - at(r.low))} height="18" fill="var(--petrol)" opacity=".13" />
                {r.sorted.map((v, i) => <circle key={i} cx={at(v)} cy={mid + scatter(i) * 15} r="3" fill="var(--ink)" fillOpacity=".55" />)}
                <line x1={at(r.middle)} x2={at(r.middle)} y1={mid - 13} y2={mid + 13} stroke="var(--petrol)" strokeWidth="2.6" />
              </g>
            );
          })}
          <text className="ax" x={p.left + 4} y={p.height - 3}>bar: 90 % of draws, line: median</text>
        </>
      )}
    </Plot>
  );
}
