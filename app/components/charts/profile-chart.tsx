import { CartesianGrid, ComposedChart, Line, ReferenceLine, Scatter, XAxis, YAxis } from 'recharts';
import { useWidth } from '../../lib/use-size';
import { Marker, SolverGlyph, solverLook } from '../ui/solver-glyph';
import { axisLook, gridLook, lineLook } from './recharts-look';

export interface ProfileCurve {
  id: string;
  glyph: number;
  name: string;
  /** Ascending ratios to the best method; those not listed are unsolved. */
  ratios: readonly number[];
}

interface ProfileProps {
  label: string;
  curves: readonly ProfileCurve[];
  problems: number;
  focusId: string | null;
  onFocus: (id: string | null) => void;
  height?: number;
}

/** Columns of the table. */
const factors = [1, 1.5, 2, 4] as const;
const candidates = [1, 1.2, 1.5, 2, 3, 5, 10, 20, 50, 100] as const;
/** Ratios further out say only that the method is far off. */
const farthest = 100;

const share = (curve: ProfileCurve, problems: number, tau: number): number => (problems === 0 ? 0 : curve.ratios.filter((ratio) => ratio <= tau).length / problems);
const percent = (value: number): string => `${(100 * value).toFixed(0)}`;

/** Where the curve steps, from 1 to the end of the axis. */
function steps(curve: ProfileCurve, problems: number, end: number): { tau: number; share: number }[] {
  const at = [1, ...curve.ratios.filter((ratio) => ratio > 1 && ratio < end), end];
  return [...new Set(at)].map((tau) => ({ tau, share: 100 * share(curve, problems, tau) }));
}

/** Share of problems within a factor of the best method, a step curve a solver; the table beside it is its legend and has the same figures. */
export function ProfileChart({ label, curves, problems, focusId, onFocus, height = 300 }: ProfileProps) {
  const [ref, width] = useWidth(560);
  const largest = Math.max(1.5, ...curves.flatMap((curve) => curve.ratios.filter((ratio) => ratio <= farthest)));
  const end = candidates.find((value) => value >= largest * 0.999) ?? farthest;
  const ticks = candidates.filter((value) => value <= end);
  const ordered = [...curves].sort((a, b) => Number(a.id === focusId) - Number(b.id === focusId));
  return (
    <>
      <div className="ch" ref={ref}>
        <div role="img" aria-label={label}>
          <ComposedChart width={width} height={height} margin={{ top: 12, right: 14, bottom: 18, left: 0 }} accessibilityLayer={false}>
            <CartesianGrid {...gridLook} />
            <XAxis {...axisLook} dataKey="tau" type="number" scale="log" domain={[1, end]} ticks={ticks.filter((value, i) => width > 420 || i % 2 === 0 || value === end)} tickFormatter={(value: number) => `×${value}`} allowDataOverflow label={{ value: 'times the smallest error', position: 'insideBottomRight', offset: -12, fontSize: 11, fill: 'var(--ink-2)' }} />
            <YAxis {...axisLook} dataKey="share" width={40} type="number" domain={[0, 100]} ticks={[0, 25, 50, 75, 100]} tickFormatter={(value: number) => `${value}\u202f%`} />
            <ReferenceLine x={2} stroke="var(--hair-2)" strokeDasharray="2 3" />
            {ordered.map((curve) => (
              <Line key={curve.id} {...lineLook} type="stepAfter" data={steps(curve, problems, end)} dataKey="share" stroke={solverLook(curve.glyph).colour} strokeWidth={curve.id === focusId ? 3 : 1.6} />
            ))}
            {ordered.map((curve) => (
              <Scatter
                key={curve.id} isAnimationActive={false} data={steps(curve, problems, end).filter((_, i, all) => i === 0 || i === all.length - 1)} dataKey="share"
                shape={({ cx = 0, cy = 0 }: { cx?: number; cy?: number }) => <Marker shape={solverLook(curve.glyph).shape} x={cx} y={cy} r={4.6} fill={solverLook(curve.glyph).colour} stroke="var(--sheet)" strokeWidth={1.2} />}
              />
            ))}
          </ComposedChart>
        </div>
      </div>
      <div className="scrollx" tabIndex={0} role="region" aria-label={`${label}: figures`}>
        <table className="prof">
          <caption className="vh">Per cent of {problems} problems within a factor of the smallest error</caption>
          <thead><tr><th scope="col">Solver</th>{factors.map((tau) => <th key={tau} scope="col" className="num">{tau === 1 ? 'best' : `×${tau}`}</th>)}<th scope="col" className="num">solved</th></tr></thead>
          <tbody>
            {curves.map((curve) => (
              <tr key={curve.id} className={curve.id === focusId ? 'foc' : undefined}>
                <th scope="row">
                  <button type="button" className="lnk quiet" aria-pressed={curve.id === focusId} onClick={() => onFocus(curve.id === focusId ? null : curve.id)}><SolverGlyph index={curve.glyph} size={13} /> {curve.name}</button>
                </th>
                {factors.map((tau) => <td key={tau} className="num">{percent(share(curve, problems, tau))}</td>)}
                <td className="num">{percent(share(curve, problems, Infinity))}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </>
  );
}
