import { Plot } from '../../../components/charts/plot';
import { Marker, solverLook } from '../../../components/ui/solver-glyph';
import { formatError } from '../../../lib/format';
import { unitAfter } from '../../../lib/problem-words';
import { usePhone } from '../../../lib/use-media';
import { l2Key, supKey, type Contender } from '../model/comparison';

interface Reading {
  contender: Contender;
  l2: number;
  sup: number;
}
interface ScatterProps {
  contenders: readonly Contender[];
  /** The draw in view, of each run. */
  readings: readonly Reading[];
  pair: { near: Contender; far: Contender; l2Ratio: number; supRatio: number } | null;
  unit: string;
}

const halo = { paintOrder: 'stroke', stroke: 'var(--sheet)', strokeWidth: 4 } as const;

/** L-infinity against L2 for all draws; the draw in view large, and a bracket where the two norms disagree most. */
export function NormScatter({ contenders, readings, pair, unit }: ScatterProps) {
  const phone = usePhone();
  const points = contenders.flatMap((c) => c.trials.flatMap((t) => {
    const l2 = t.metrics[l2Key];
    const sup = t.metrics[supKey];
    return l2 && sup && l2 > 0 && sup > 0 ? [{ c, draw: t.draw, l2, sup }] : [];
  }));
  if (!points.length) return null;
  const l2s = points.map((p) => p.l2);
  const sups = points.map((p) => p.sup);
  const near = readings.find((r) => r.contender.id === pair?.near.id);
  const far = readings.find((r) => r.contender.id === pair?.far.id);
  return (
    <Plot
      label="L-infinity against relative L2, all draws of each method" height={phone ? 300 : 330} margin={{ left: 44, right: 12, top: 12, bottom: 38 }}
      x={{ low: Math.min(...l2s) * 0.8, high: Math.max(...l2s) * 1.7, log: true, label: 'relative L2', ticks: ticksIn(Math.min(...l2s) * 0.8, Math.max(...l2s) * 1.7) }}
      y={{ low: Math.min(...sups) * 0.8, high: Math.max(...sups) * 2, log: true, label: `L∞${unitAfter(unit)}`, ticks: ticksIn(Math.min(...sups) * 0.8, Math.max(...sups) * 2) }}
      table={{ caption: 'Both norms by draw', columns: ['Method, draw', 'Relative L2', `L∞${unitAfter(unit)}`], rows: points.map((p) => [`${p.c.name}, draw ${p.draw + 1}`, formatError(p.l2), formatError(p.sup)]) }}
    >
      {(a) => {
        const bracket = near && far ? Math.min(a.right - 112, Math.max(...readings.map((r) => a.x(r.l2))) + 44) : 0;
        return (
          <>
            <g clipPath={a.clip}>
              {points.map((p) => <Marker key={`${p.c.id}-${p.draw}`} shape={solverLook(p.c.glyph).shape} x={a.x(p.l2)} y={a.y(p.sup)} r={3.1} fill={solverLook(p.c.glyph).colour} fillOpacity={0.5} />)}
            </g>
            {readings.map((r) => (
              <g key={r.contender.id}>
                <Marker shape={solverLook(r.contender.glyph).shape} x={a.x(r.l2)} y={a.y(r.sup)} r={6} fill={solverLook(r.contender.glyph).colour} stroke="var(--sheet)" strokeWidth={1.8} />
                <text className="dl" x={a.x(r.l2) - 12} y={a.y(r.sup) + 4} textAnchor="end" style={{ font: '600 14px var(--serif)', ...halo }}>{r.contender.letter}</text>
              </g>
            ))}
            {pair && near && far ? (
              <g>
                <path d={`M${bracket - 6} ${a.y(near.sup)}H${bracket}V${a.y(far.sup)}H${bracket - 6}`} fill="none" stroke="var(--ink)" strokeWidth="1.2" />
                <text className="dl" x={bracket + 7} y={(a.y(near.sup) + a.y(far.sup)) / 2 + 1} style={{ fontWeight: 600, ...halo }}>× {pair.supRatio.toFixed(1)} in L∞</text>
                <text className="dl" x={bracket + 7} y={(a.y(near.sup) + a.y(far.sup)) / 2 + 16} style={{ fill: 'var(--ink-2)', ...halo }}>× {pair.l2Ratio.toFixed(2)} in L2</text>
              </g>
            ) : null}
          </>
        );
      }}
    </Plot>
  );
}

const ticksIn = (low: number, high: number): number[] => {
  const all: number[] = [];
  for (let e = Math.floor(Math.log10(low)); e <= Math.log10(high); e++) for (const m of [1, 2, 3, 5, 7]) all.push(Number((m * 10 ** e).toPrecision(2)));
  const inside = all.filter((v) => v > low && v < high);
  return inside.length > 8 ? inside.filter((v) => /^[125]/.test(v.toExponential())) : inside;
};
