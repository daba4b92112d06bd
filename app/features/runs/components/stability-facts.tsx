import type { StabilitySheetWire } from '../../../../shared/contracts/common';
import type { RunDetail } from '../../../../shared/contracts/runs';
import { metrics } from '../../../../solvers/metrics/registry';
import { formatError, formatSeconds } from '../../../lib/format';
import { axisView, type AxisView } from '../../../lib/axis-words';
import { unitAfter } from '../../../lib/problem-words';

const interval = (v: { low: number; high: number } | null, print: (x: number) => string): string => (v ? `${print(v.low)} to ${print(v.high)}` : '');

function breakdownWords(sheet: StabilitySheetWire, axis: AxisView): string {
  if (sheet.breakdown) return axis.format(sheet.breakdown.value);
  if (sheet.breakdownNote === 'beyond') return 'beyond the ladder';
  return sheet.breakdownNote === 'throughout' ? 'worse at every level' : '–';
}

/** Exponent, floor and breakdown of every metric where smaller is better. */
export function StabilityFacts({ run }: { run: RunDetail }) {
  const axis = axisView(run.axis);
  const rows = metrics.flatMap((metric) => {
    const sheet = run.sheets[metric.key];
    // What the family has no value of (a position on a line without targets) says nothing of stability.
    return sheet && run.table[metric.key]?.some((row) => row.median !== null) ? [{ metric, sheet }] : [];
  });
  return (
    <div className="sheet" style={{ overflowX: 'auto' }} tabIndex={0} role="region" aria-label="Stability sheet, scrolls sideways">
      <table style={{ minWidth: 860 }}>
        <thead>
          <tr>
            <th scope="col" style={{ paddingLeft: 16 }}>Metric</th>
            <th scope="col">Model</th>
            <th scope="col" className="num">Exponent ν<span>{axis.isNoise ? '' : 'against δ, '}90 % interval</span></th>
            <th scope="col" className="num">Floor b<span>90 % interval</span></th>
            <th scope="col" className="num">{axis.isNoise ? 'Breakdown noise' : `Breakdown, ${axis.label}`}<span>90 % interval</span></th>
            <th scope="col" style={{ paddingRight: 16, minWidth: 250 }}>Note</th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ metric, sheet }) => (
            <tr key={metric.key}>
              <th scope="row" className="row-name">{metric.short}{unitAfter(metric.key === 'sup-error' ? run.unit : metric.unit)}</th>
              <td>{sheet.model === 'power' ? <>b + C δ<sup>ν</sup></> : sheet.model === 'logarithmic' ? <>C |ln δ|<sup>−κ</sup></> : '–'}</td>
              <td className="num">{formatError(sheet.exponent?.value)}<span className="iv">{interval(sheet.exponent, formatError)}</span></td>
              <td className="num">{formatError(sheet.floor?.value)}<span className="iv">{interval(sheet.floor, formatError)}</span></td>
              <td className="num">{breakdownWords(sheet, axis)}<span className="iv">{interval(sheet.breakdown, axis.format)}</span></td>
              <td className="sm" style={{ paddingRight: 16 }}>{sheet.reason ?? ''}</td>
            </tr>
          ))}
          <tr>
            <th scope="row" className="row-name">Time per reconstruction</th>
            <td colSpan={5}>{formatSeconds(run.secondsPerReconstruction)}{run.timeRatio === null ? '' : `, ${run.timeRatio.toFixed(1)} × truncated SVD timed in the same worker`}</td>
          </tr>
        </tbody>
      </table>
      {axis.isNoise ? null : <p className="sm" style={{ padding: '6px 16px 10px' }}>δ is the level: {axis.label}.</p>}
    </div>
  );
}
