import '../../../styles/pages/runs-in-flight.css';
import { Link } from 'react-router-dom';
import type { RunSummary } from '../../../../shared/contracts/runs';
import { defaultLadder } from '../../../../shared/domain/ladder';
import { Ladder } from '../../../components/ui/ladder';
import { Marker, SolverGlyph, solverLook } from '../../../components/ui/solver-glyph';
import { formatSeconds, plural } from '../../../lib/format';
import { paths } from '../../../lib/paths';

const ladderOf = (run: RunSummary): readonly number[] => defaultLadder.slice(0, Math.max(run.progress.medians.length, run.progress.levelsDone, 1)).concat(Array.from({ length: Math.max(0, run.progress.medians.length - defaultLadder.length) }, (_, i) => 1 + i));

/** Errors of the levels done, on a small log axis from a twentieth to twice the trivial reconstruction. */
function Errors({ run }: { run: RunSummary }) {
  const { shape, colour } = solverLook(run.glyph);
  const points = run.progress.medians.flatMap((value, i) => (value === null || value <= 0 ? [] : [{ x: 5 + (i / Math.max(1, run.progress.medians.length - 1)) * 102, y: 4 + (1 - Math.min(1, Math.max(0, Math.log(value / 0.05) / Math.log(40)))) * 26 }]));
  const trivial = 4 + (1 - Math.log(20) / Math.log(40)) * 26;
  return (
    <svg width="112" height="34" role="img" aria-label={`Errors of the ${points.length} levels done`}>
      {points.length ? <line x1="0" x2="112" y1={trivial} y2={trivial} stroke="var(--brick-mark)" strokeDasharray="3 2" /> : null}
      <path d={points.map((p, i) => `${i ? 'L' : 'M'}${p.x.toFixed(1)} ${p.y.toFixed(1)}`).join('')} fill="none" stroke={colour} strokeWidth="1.6" />
      {points.map((p) => <Marker key={p.x} shape={shape} x={p.x} y={p.y} r={2.6} fill={colour} />)}
    </svg>
  );
}

/** Runs that wait, work or stopped: ladder, errors so far, trials done and the time left. */
export function RunsInFlight({ runs }: { runs: readonly RunSummary[] }) {
  return (
    <div className="sheet">
      {runs.map((run) => {
        const { progress } = run;
        const stopped = progress.state === 'failed' || progress.state === 'cancelled';
        const levels = ladderOf(run);
        return (
          <div className="rf" key={run.id}>
            <div className="n">
              <SolverGlyph index={run.glyph} size={16} />
              <div><b><Link className="strong" to={paths.run(run.id)}>{run.solver.name}</Link></b><em>{run.phantom.name}, <span className="mono">{run.id}</span></em></div>
            </div>
            <div className="p">
              <Ladder big levels={levels} done={progress.levelsDone} stopped={stopped} waiting={progress.state === 'queued'} />
              <div className={stopped ? 'lv-note text-brick' : 'lv-note'}>{progress.state === 'queued' ? 'queued' : stopped ? `${progress.state} at level ${progress.levelsDone + 1}` : `level ${Math.min(progress.levelsDone + 1, levels.length)} of ${levels.length}`}</div>
            </div>
            <div className="tri"><Errors run={run} /></div>
            <div className="e">
              <b className="tn">{progress.done} of {plural(progress.total, 'trial')}</b>
              <em className={stopped ? 'text-brick' : undefined}>{stopped ? (progress.failure ?? progress.state) : progress.secondsLeft !== null ? `about ${formatSeconds(progress.secondsLeft)} left` : 'no estimate yet'}</em>
            </div>
          </div>
        );
      })}
    </div>
  );
}
