import { linePath, Plot } from '../../../components/charts/plot';
import { logTicks, niceAbove, niceBelow, tickText } from '../../../components/charts/scales';
import { Marker } from '../../../components/ui/solver-glyph';
import { formatError, formatPercent } from '../../../lib/format';
import type { ParameterAnswer } from '../../../workers/reconstruction-messages';

export interface NoisePoint {
  readonly level: number;
  readonly error: number | null;
}

const bounds = (values: readonly number[]): [number, number] => {
  const known = values.filter((v) => v > 0 && Number.isFinite(v));
  const low = known.length ? Math.min(...known) : 0.1;
  return [Math.max(niceBelow(Math.min(low, 0.5)), 1e-3), Math.min(niceAbove(Math.max(...known, 1.2)), 5)];
};

/** Own curve over the grey curves of the methods already on the bench; the rule's noise as a line. */
export function NoiseCurve({ own, others, levels, noise, floor, height = 150 }: { own: readonly NoisePoint[]; others: readonly (readonly NoisePoint[])[]; levels: readonly number[]; noise: number; floor: number; height?: number }) {
  const low = levels[0] ?? 1e-4;
  const high = levels[levels.length - 1] ?? 0.3;
  const [y0, y1] = bounds([...own, ...others.flat()].flatMap((p) => (p.error === null ? [] : [p.error])));
  const ticks = levels.filter((_, i) => [0, Math.floor(levels.length / 2), levels.length - 1].includes(i)).map((l) => [l, formatPercent(l)] as const);
  return (
    <Plot
      label="Your relative L2 error against noise, over the methods on the bench" height={height} margin={{ left: 32, right: 6, top: 8, bottom: 22 }}
      x={{ low, high, log: true, ticks }} y={{ low: y0, high: y1, log: true, ticks: logTicks(y0, y1, 4).map((v) => [v, tickText(v)] as const) }}
      tableHidden table={{ caption: 'Your relative L2 error by noise', columns: ['Noise', 'Relative L2'], rows: own.map((p) => [formatPercent(p.level), formatError(p.error)]) }}
    >
      {({ x, y, left, right, top, bottom, clip, dots }) => {
        const path = (points: readonly NoisePoint[]) => linePath(points.map((p) => (p.error !== null && p.error > 0 ? ([x(p.level), y(Math.min(p.error, y1 * 1.2))] as const) : null)));
        const at = x(Math.min(high, Math.max(low, noise)));
        return (
          <g>
            {floor > low ? <rect x={left} y={top} width={Math.max(0, Math.min(right, x(floor)) - left)} height={bottom - top} fill={dots} opacity=".55" /> : null}
            {y1 > 1 ? <line x1={left} x2={right} y1={y(1)} y2={y(1)} stroke="var(--brick-mark)" strokeDasharray="4 3" /> : null}
            <g clipPath={clip}>
              {others.map((points, i) => <path key={i} d={path(points)} fill="none" stroke="var(--line)" strokeWidth="1" />)}
              <path d={path(own)} fill="none" stroke="var(--s1)" strokeWidth="2.2" />
              {own.map((p) => (p.error !== null && p.error > 0 && p.error < y1 ? <circle key={p.level} cx={x(p.level)} cy={y(p.error)} r="3" fill={p.level < floor ? 'var(--sheet)' : 'var(--s1)'} stroke={p.level < floor ? 'var(--s1)' : 'var(--sheet)'} /> : null))}
            </g>
            <line x1={at} x2={at} y1={top - 5} y2={bottom} stroke="var(--petrol)" strokeWidth="1.4" />
          </g>
        );
      }}
    </Plot>
  );
}

/** Error of the shown draw against the parameter: the rule's dot and the oracle's diamond. */
export function ParameterCurve({ answer, height = 150 }: { answer: ParameterAnswer; height?: number }) {
  const xs = answer.curve.map((c) => c.parameter);
  const choice = answer.choice;
  const low = Math.min(...xs, ...(choice ? [choice.parameter] : []));
  const high = Math.max(...xs, ...(choice ? [choice.parameter] : []));
  const [y0, y1] = bounds(answer.curve.map((c) => c.error).filter((e) => e < 3));
  const ticks = logTicks(low, high, 5).map((v) => [v, tickText(v)] as const);
  return (
    <Plot
      label="Relative L2 error of this draw against the regularisation parameter" height={height} margin={{ left: 32, right: 6, top: 8, bottom: 22 }}
      x={{ low, high, log: true, ticks }} y={{ low: y0, high: y1, log: true, ticks: logTicks(y0, y1, 4).map((v) => [v, tickText(v)] as const) }}
      tableHidden table={{ caption: 'Relative L2 error by parameter', columns: ['Parameter', 'Relative L2'], rows: answer.curve.map((c) => [tickText(Number(c.parameter.toPrecision(3))), formatError(c.error)]) }}
    >
      {({ x, y, left, right, bottom, clip }) => (
        <g>
          {y1 > 1 ? <line x1={left} x2={right} y1={y(1)} y2={y(1)} stroke="var(--brick-mark)" strokeDasharray="4 3" /> : null}
          <g clipPath={clip}><path d={linePath(answer.curve.map((c) => [x(c.parameter), y(Math.min(c.error, y1 * 1.2))] as const))} fill="none" stroke="var(--ink)" strokeWidth="1.6" /></g>
          {choice && choice.error !== null ? (
            <>
              <line x1={x(choice.parameter)} x2={x(choice.parameter)} y1={y(Math.min(choice.error, y1))} y2={bottom} stroke="var(--s1)" strokeDasharray="2 2" />
              <circle cx={x(choice.parameter)} cy={y(Math.min(choice.error, y1))} r="4.4" fill="var(--s1)" stroke="var(--sheet)" strokeWidth="1.2" />
            </>
          ) : null}
          <Marker shape="diamond" x={x(answer.oracle.parameter)} y={y(answer.oracle.error)} r={3.8} fill="var(--sheet)" stroke="var(--ink)" strokeWidth={1.4} />
        </g>
      )}
    </Plot>
  );
}
