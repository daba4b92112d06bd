import { CartesianGrid, ComposedChart, Line, ReferenceArea, ReferenceLine, Scatter, XAxis, YAxis } from 'recharts';
import { formatError, formatNumber } from '../../lib/format';
import { useWidth } from '../../lib/use-size';
import { Marker } from '../ui/solver-glyph';
import { ChartTable } from './chart-table';
import { axisLook, gridLook, lineLook } from './recharts-look';
import { logTicks, niceAbove, niceBelow, tickText } from './scales';

export interface ParameterChartProps {
  label: string;
  /** Name on the axis: α. */
  parameterName: string;
  /** Error at each value of the parameter, at one draw. */
  curve: readonly { parameter: number; error: number | null }[];
  /** The rule's choice at every draw. */
  choices: readonly { parameter: number; error: number | null }[];
  /** The best value, found with the truth; never ranked. */
  oracle: { parameter: number; error: number | null } | null;
  trivial?: number | null;
  height?: number;
}

/** Error against the regularisation parameter: the curve, the rule's choices as dots and ticks, the oracle as a hollow diamond. */
export function ParameterChart({ label, parameterName, curve, choices, oracle, trivial = 1, height = 290 }: ParameterChartProps) {
  const [ref, width] = useWidth(560);
  const parameters = [...curve.map((c) => c.parameter), ...choices.map((c) => c.parameter)].filter((v) => v > 0);
  const errors = curve.flatMap((c) => (c.error !== null && c.error > 0 ? [c.error] : []));
  if (!parameters.length || !errors.length) return <p className="sm">No sensitivity is known at this level.</p>;
  const x: [number, number] = [Math.min(...parameters), Math.max(...parameters)];
  const ceiling = trivial === null ? Infinity : trivial * 2;
  const y: [number, number] = [niceBelow(Math.min(...errors) * 0.95), niceAbove(Math.min(Math.max(...errors, trivial ?? 0), ceiling))];
  const chosen = choices.map((c) => c.parameter).sort((a, b) => a - b);
  const at = (q: number): number => chosen[Math.round(q * (chosen.length - 1))] ?? 0;
  const shown = curve.map((c) => ({ parameter: c.parameter, error: c.error !== null && c.error > 0 && c.error <= y[1] * 1.05 ? Math.min(c.error, y[1]) : null }));
  const dots = choices.flatMap((c) => (c.error !== null && c.error <= y[1] ? [{ parameter: c.parameter, error: c.error }] : []));
  return (
    <div className="ch" ref={ref}>
      <div role="img" aria-label={label}>
        <ComposedChart width={width} height={height} data={shown} margin={{ top: 14, right: 12, bottom: 18, left: 0 }} accessibilityLayer={false}>
          <CartesianGrid {...gridLook} />
          {chosen.length > 1 ? <ReferenceArea x1={at(0.05)} x2={Math.max(at(0.95), at(0.05) * 1.001)} fill="var(--petrol-wash)" fillOpacity={1} stroke="none" /> : null}
          <XAxis {...axisLook} dataKey="parameter" type="number" scale="log" domain={x} ticks={logTicks(x[0], x[1], 7)} tickFormatter={tickText} allowDataOverflow label={{ value: parameterName, position: 'insideBottomRight', offset: -12, fontSize: 11, fill: 'var(--ink-2)' }} />
          <YAxis {...axisLook} width={40} type="number" scale="log" domain={y} ticks={logTicks(y[0], y[1], 8)} tickFormatter={tickText} allowDataOverflow />
          {trivial !== null && trivial < y[1] ? <ReferenceLine y={trivial} stroke="var(--brick)" strokeDasharray="6 3" /> : null}
          {chosen.map((c, i) => <ReferenceLine key={i} segment={[{ x: c, y: y[0] }, { x: c, y: y[0] * (y[1] / y[0]) ** 0.05 }]} stroke="var(--petrol)" strokeWidth={1.3} />)}
          <Line {...lineLook} dataKey="error" stroke="var(--s7)" strokeWidth={2.4} />
          <Scatter isAnimationActive={false} data={dots} dataKey="error" fill="var(--petrol)" fillOpacity={0.75} shape={({ cx = 0, cy = 0 }: { cx?: number; cy?: number }) => <circle cx={cx} cy={cy} r={3} fill="var(--petrol)" fillOpacity={0.75} />} />
          {oracle?.error != null && oracle.error <= y[1] ? (
            <Scatter isAnimationActive={false} data={[{ parameter: oracle.parameter, error: oracle.error }]} dataKey="error" shape={({ cx = 0, cy = 0 }: { cx?: number; cy?: number }) => (
              <g>
                <Marker shape="diamond" x={cx} y={cy} r={5} fill="var(--sheet)" stroke="var(--ink)" strokeWidth={1.6} />
                <text className="dl" x={cx} y={cy + 21} textAnchor="middle">oracle</text>
              </g>
            )} />
          ) : null}
        </ComposedChart>
      </div>
      <ChartTable
        data={{
          caption: label, columns: [parameterName, 'Error', 'Which'],
          rows: [
            ...(oracle ? [[formatNumber(oracle.parameter), formatError(oracle.error), 'oracle']] : []),
            ...choices.map((c, i) => [formatNumber(c.parameter), formatError(c.error), `the rule, draw ${i + 1}`]),
          ],
        }}
      />
    </div>
  );
}
