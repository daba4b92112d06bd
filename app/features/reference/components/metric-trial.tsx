import { useMemo, useState } from 'react';
import type { EvaluationGrid, MetricValue } from '../../../../solvers/core/types';
import { createEvaluationGrid } from '../../../../solvers/core/grid';
import { evaluateMetrics, metrics } from '../../../../solvers/metrics/registry';
import { linePath, Plot } from '../../../components/charts/plot';
import { BodyImage } from '../../../components/images/body-image';
import { toPicture } from '../../../components/images/pixels';
import { formatError } from '../../../lib/format';

const radius = 0.15;
const target = { x: -0.018, y: 0.0075, radius: 0.036, value: 2 };
const background = 1;
const shifts = [0, 4, 8, 12, 18, 24, 30, 36, 42, 48, 54, 60];

/** A disc target whose rim is as wide as `blur` (m), moved by `shift` (m) along x; for drawing and trying only. */
function disc(grid: EvaluationGrid, shift: number, blur: number): Float64Array {
  const step = (2 * radius) / grid.nx;
  return Float64Array.from(grid.inside, (p) => {
    const x = grid.xMin + ((p % grid.nx) + 0.5) * step;
    const y = grid.yMin + (Math.floor(p / grid.nx) + 0.5) * step;
    const distance = Math.hypot(x - target.x - shift, y - target.y);
    const width = 0.0015 + blur;
    return background + (target.value - background) / (1 + Math.exp((distance - target.radius) / (0.35 * width)));
  });
}

function useTrial(metricKey: string, shift: number, blur: number) {
  const grid = useMemo(() => createEvaluationGrid(radius), []);
  const truth = useMemo(() => disc(grid, 0, 0), [grid]);
  const base = useMemo(() => new Float64Array(grid.inside.length).fill(background), [grid]);
  const evaluate = (estimate: Float64Array): Record<string, MetricValue> =>
    evaluateMetrics({
      truth, background: base, estimate, grid, residualNorm: null, noiseNorm: 0,
      targets: [{ label: 'target', x: target.x, y: target.y, area: Math.PI * target.radius * target.radius, contrast: target.value - background }],
    });
  const estimate = disc(grid, shift, blur);
  const curve = shifts.map((mm) => ({ mm, values: evaluate(disc(grid, mm / 1000, blur)) }));
  return { grid, truth, estimate, values: evaluate(estimate), curve, shown: curve.map(({ mm, values }) => ({ mm, value: values[metricKey]?.value ?? null })) };
}

/** Move and blur a reconstruction of one target and watch this metric and its neighbours. */
export function MetricTrial({ metricKey }: { metricKey: string }) {
  const metric = metrics.find((m) => m.key === metricKey);
  const [shift, setShift] = useState(12);
  const [blur, setBlur] = useState(6);
  const trial = useTrial(metricKey, shift / 1000, blur / 1000);
  if (!metric || trial.shown.every((p) => p.value === null)) return null;
  const known = trial.shown.flatMap((p) => (p.value === null ? [] : [p.value]));
  const high = Math.max(...known, 0) * 1.15 || 1;
  const low = Math.min(...known, 0) * 1.15;
  const others = metrics.filter((m) => m.key !== metricKey && trial.values[m.key]?.value !== null && trial.values[m.key] !== undefined).slice(0, 3);
  const picture = { truth: toPicture(trial.truth, trial.grid, trial.grid.inside), estimate: toPicture(trial.estimate, trial.grid, trial.grid.inside) };
  const at = trial.values['sup-error']?.at;
  return (
    <div className="sheet">
      <div className="lf">
        <div><p className="cp">Truth</p><BodyImage label="Truth" picture={picture.truth} low={0} high={2} /></div>
        <div><p className="cp">Reconstruction</p><BodyImage label="Reconstruction" picture={picture.estimate} low={0} high={2} mark={at ? { x: at[0], y: at[1] } : null} /></div>
        <div>
          <p className="cp"><span>{metric.short} against the shift</span><span>this blur</span></p>
          <Plot
            label={`${metric.name} against the shift`} height={196} x={{ low: 0, high: 60, label: 'shift, mm' }} y={{ low, high }} tableHidden
            table={{ caption: `${metric.name} against the shift`, columns: ['Shift, mm', metric.short], rows: trial.shown.map((p) => [p.mm, formatError(p.value)]) }}
          >
            {(a) => (
              <g clipPath={a.clip}>
                <path d={linePath(trial.shown.map((p) => (p.value === null ? null : [a.x(p.mm), a.y(p.value)])))} fill="none" stroke="var(--s1)" strokeWidth="2.2" />
                {trial.values[metricKey]?.value === null ? null : <circle cx={a.x(shift)} cy={a.y(trial.values[metricKey]?.value ?? 0)} r="4.6" fill="var(--s1)" stroke="var(--sheet)" strokeWidth="1.4" />}
              </g>
            )}
          </Plot>
        </div>
      </div>
      <label className="sl"><span>Shift</span><input type="range" min="0" max="60" value={shift} onChange={(event) => setShift(Number(event.target.value))} /><output>{shift} mm</output></label>
      <label className="sl"><span>Blur</span><input type="range" min="0" max="30" value={blur} onChange={(event) => setBlur(Number(event.target.value))} /><output>{blur} mm</output></label>
      <div className="rds" aria-live="polite">
        {[metric, ...others].map((m) => <div key={m.key}><b className="tn">{formatError(trial.values[m.key]?.value)}</b><span>{m.short}{m.unit ? `, ${m.unit}` : ''}</span></div>)}
      </div>
    </div>
  );
}
