import clsx from 'clsx';
import { Link } from 'react-router-dom';
import { barAxis, BarAxisTicks, IntervalBar } from '../../../components/charts/interval-bar';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { StateMark } from '../../../components/ui/state-mark';
import { axisView } from '../../../lib/axis-words';
import { formatError, formatPercent } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { WaitingRun } from '../api/review';

export interface WaitingRunsProps {
  runs: readonly WaitingRun[];
  noise: number;
  selected: string | null;
  onSelect: (id: string) => void;
}

/** Reading of a run at the ladder level nearest to the rule. */
export function readingAt(run: WaitingRun, noise: number) {
  let at = 0;
  run.levels.forEach((row, i) => {
    if (Math.abs(Math.log(row.level / noise)) < Math.abs(Math.log((run.levels[at]?.level ?? 1) / noise))) at = i;
  });
  const row = run.levels[at];
  const best = run.best[at] ?? null;
  return { level: row?.level ?? noise, row, ratio: row?.median && best ? row.median / best : null };
}

const wholeDays = (run: { waitingDays: number }): number => Math.floor(run.waitingDays);

export function Waited({ of }: { of: { waitingDays: number } }) {
  const days = wholeDays(of);
  return days === 0 ? <span className="today">today</span> : <><b className="tn">{days}</b> <span>{days === 1 ? 'day' : 'days'}</span></>;
}

export function Flags({ run }: { run: WaitingRun }) {
  if (run.flags.length === 0) return <span className="mu">none</span>;
  return <>{run.flags.map((flag) => <span className="fl" key={flag}><i />{flag}</span>)}</>;
}

export const CheckDots = ({ run }: { run: WaitingRun }) => <span className="dots-row">{run.checks.map((check) => <StateMark key={check.key} state={check.state} quiet word={`${check.name}: ${check.state}`} />)}</span>;

/** Runs that wait, oldest first; a row is chosen for the look beside it. */
export function WaitingRuns({ runs, noise, selected, onSelect }: WaitingRunsProps) {
  const rows = runs.map((run) => ({ run, ...readingAt(run, noise) }));
  const trivial = runs[0]?.trivial ?? null;
  const axis = barAxis(rows.flatMap(({ row }) => [row?.p05 ?? null, row?.p95 ?? null]), trivial);
  return (
    <div className="sheet only-d" style={{ overflowX: 'auto' }}>
      <table className="q">
        <caption className="vh">Runs that wait for a word, oldest first</caption>
        <thead>
          <tr>
            <th scope="col" className="first">Waiting</th><th scope="col">Solver and phantom</th><th scope="col">Run</th><th scope="col">Checks<span>in the certificate&apos;s order</span></th>
            <th scope="col" className="num">Relative L2<span>at {formatPercent(rows.find(({ run }) => run.axis.key === 'noise')?.level ?? noise)}</span></th>
            <th scope="col" style={{ width: 130 }}>90 % interval<BarAxisTicks axis={axis} /></th>
            <th scope="col" className="num">To best<span>on bench</span></th><th scope="col" style={{ minWidth: 104 }}>Flags</th><th scope="col" className="last">Reviewer</th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ run, level, row, ratio }) => (
            <tr key={run.id} className={clsx(run.id === selected && 'sel')} onClick={() => onSelect(run.id)}>
              <td className="wait first"><Waited of={run} /></td>
              <td className="sv"><span className="n"><SolverGlyph index={run.glyph} size={16} /><span><Link to={paths.run(run.id)} title={run.solver.name}>{run.solver.name}</Link><em title={run.phantom.name}>{run.phantom.name}</em></span></span></td>
              <td><button type="button" className="lnk mono" aria-pressed={run.id === selected} onClick={(event) => { event.stopPropagation(); onSelect(run.id); }}>{run.id}</button></td>
              <td><CheckDots run={run} /></td>
              <td className="num"><b>{formatError(row?.median)}</b>{run.axis.key === 'noise' ? null : <span className="sm" style={{ display: 'block' }}>at {axisView(run.axis).at(level)}</span>}</td>
              <td><IntervalBar glyph={run.glyph} low={row?.p05 ?? null} median={row?.median ?? null} high={row?.p95 ?? null} axis={axis} trivial={run.trivial} /></td>
              <td className="num">{ratio === null ? '–' : `× ${ratio.toFixed(2)}`}</td>
              <td><Flags run={run} /></td>
              <td className="last"><span className="slots"><span><i className={run.reviewer ? 'on' : undefined} />{run.reviewer?.handle ?? 'open'}</span></span>{run.mayReview ? null : <span className="sm">own group</span>}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
