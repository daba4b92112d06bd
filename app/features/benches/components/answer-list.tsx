import { Link } from 'react-router-dom';
import type { Ranking } from '../../../../shared/contracts/benches';
import { barAxis, IntervalBar } from '../../../components/charts/interval-bar';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { StateMark } from '../../../components/ui/state-mark';
import { formatSeconds } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { marginWords, tieWords, type Care } from '../model/advice';
import { metricView } from '../model/metric-view';
import { shortNames } from '../model/names';
import type { RankingRow } from '../model/ranking-groups';
import { breakdownWords } from './ranking-table';

/** Three methods with reading, interval, breakdown and time, and how sure the reading is. */
export function AnswerList({ rows, ranking, care, noise, ladderEnd }: { rows: readonly RankingRow[]; ranking: Ranking; care: Care; noise: number; ladderEnd: number }) {
  const axis = barAxis(rows.flatMap((r) => [r.p05, r.p95]), ranking.trivial);
  const short = shortNames(ranking.rows.map((r) => r.solver.name));
  const view = metricView(ranking.metric);
  const reading = (row: RankingRow): string => {
    if (care === 'worse-noise') return breakdownWords(row, ladderEnd);
    if (care === 'time') return formatSeconds(row.secondsPerReconstruction);
    return `${view.format(row.median)}${care === 'position' ? '\u202f%' : ''}`;
  };
  return (
    <ol className="answers">
      {rows.map((row, i) => {
        const run = row.runs.find((r) => r.state === 'finished')?.run ?? row.runs[0]?.run;
        return (
          <li className="ans" key={row.solver.slug}>
            <b>{i + 1}</b>
            <div className="sv">
              <span className="n">
                <SolverGlyph index={row.glyph} size={16} />
                <span>
                  <Link to={run ? `${paths.run(run)}?noise=${noise}` : paths.solver(row.solver.slug)} title={row.solver.name}>{short(row.solver.name)}</Link>
                  <em>{row.group.name}</em>
                </span>
              </span>
            </div>
            <span className="v tn">{reading(row)}</span>
            <IntervalBar glyph={row.glyph} low={row.p05} median={row.median} high={row.p95} axis={axis} trivial={ranking.trivial} />
            <div className="why">
              {marginWords(row, noise, ladderEnd)} Takes {formatSeconds(row.secondsPerReconstruction)}. {tieWords(row, ranking)}
              {row.review === 'signed-off' ? null : <> <StateMark state={row.review} /></>}
            </div>
          </li>
        );
      })}
    </ol>
  );
}
