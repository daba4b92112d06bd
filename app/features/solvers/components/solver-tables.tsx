import { useQueries } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { interpolate } from '../../../components/charts/scales';
import { Tag } from '../../../components/ui/layout';
import { Empty } from '../../../components/ui/notices';
import { Seal } from '../../../components/ui/seal';
import { StateMark, type MarkState } from '../../../components/ui/state-mark';
import { axisFact, axisView } from '../../../lib/axis-words';
import { formatError, formatPercent, formatSigned, formatShortDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { Ranking } from '../../../../shared/contracts/benches';
import type { SolverDetail, SolverStability } from '../../../../shared/contracts/solvers';
import type { ReviewState } from '../../../../shared/domain/states';
import { benchRankingQueryOptions } from '../api/bench-data';
import { getStabilityQueryOptions } from '../api/get-solver';

const metric = 'relative-l2-error';
const compared = 6;

/** Geometric mean, over the phantoms both have run on, of the ratio of median errors at a noise. */
export function medianChange(newer: SolverStability | undefined, older: SolverStability | undefined, noise: number): number | null {
  const logs = (newer?.items ?? []).flatMap((item) => {
    if (item.axis.key !== 'noise') return [];
    const before = older?.items.find((o) => o.phantom.id === item.phantom.id && o.phantom.version === item.phantom.version && o.axis.key === item.axis.key);
    const at = (i: typeof item): number | null => interpolate(i.levels.map((l) => ({ level: l.level, value: l.median })), noise);
    const now = at(item);
    const then = before ? at(before) : null;
    return now !== null && then !== null && now > 0 && then > 0 ? [Math.log(now / then)] : [];
  });
  return logs.length ? Math.exp(logs.reduce((a, b) => a + b, 0) / logs.length) - 1 : null;
}

export function SolverVersions({ solver, chosen, noise, onChoose }: { solver: SolverDetail; chosen: number; noise: number; onChoose: (n: number) => void }) {
  const versions = [...solver.versions].sort((a, b) => b.n - a.n);
  const sheets = useQueries({ queries: versions.slice(0, compared).map((v) => ({ ...getStabilityQueryOptions(solver.slug, v.n, metric), enabled: v.runs > 0 })) });
  return (
    <section>
      <div className="sh"><h2>Versions</h2><p>change in median error at {formatPercent(noise)}, paired draws</p></div>
      <div className="sheet">
        <table className="vt">
          <caption className="vh">Versions of {solver.name}</caption>
          <thead><tr><th scope="col">Version</th><th scope="col">Seal</th><th scope="col" className="num">Change</th><th scope="col">What changed</th><th scope="col" className="num">Date</th></tr></thead>
          <tbody>
            {versions.map((v, i) => {
              const change = medianChange(sheets[i]?.data, sheets[i + 1]?.data, noise);
              return (
                <tr key={v.n}>
                  <td style={{ fontWeight: v.n === chosen ? 600 : 400 }}>
                    {v.n === chosen ? `v${v.n}` : <button type="button" className="lnk" onClick={() => onChoose(v.n)}>v{v.n}</button>} {v.n === solver.current.n ? <Tag>current</Tag> : null} {v.state !== 'registered' ? <StateMark state={v.state} /> : null}
                  </td>
                  <td title={v.contentHash}><Seal hash={v.contentHash} size={30} lines={3} /></td>
                  <td className="num dlt">{change === null ? '' : Math.abs(change) < 0.005 ? '0 %' : `${formatSigned(change * 100, 0)} %`}</td>
                  <td>{v.whatChanged || (v.n === 1 ? 'First version' : '')}{v.withdrawnReason ? <span className="sm" style={{ display: 'block' }}>Withdrawn: {v.withdrawnReason}</span> : null}</td>
                  <td className="num">{formatShortDate(v.registeredAt ?? v.createdAt)}</td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </div>
    </section>
  );
}

/** The review state that stands for an entry's runs: the one furthest from signed off. */
const gravity: readonly ReviewState[] = ['declined', 'returned', 'unreviewed', 'in-review', 'signed-off-with-reservation', 'signed-off'];
export const entryReview = (states: readonly ReviewState[]): ReviewState => gravity.find((s) => states.includes(s)) ?? 'unreviewed';

function rankWords(ranking: Ranking, row: Ranking['rows'][number]): string {
  if (ranking.belowFloor) return 'below the floor';
  if (row.rank === null) return 'not ranked yet';
  const ties = ranking.rows.filter((r) => r.tieGroup === row.tieGroup && r.rank === row.rank).length;
  return `${row.rank} of ${ranking.rows.length}${ties > 1 ? `, ${ties} tied` : ''}`;
}

export function SolverEntries({ solver, noise }: { solver: SolverDetail; noise: number }) {
  const entries = [...solver.entries].sort((a, b) => b.version - a.version);
  const rankings = useQueries({ queries: entries.map((entry) => benchRankingQueryOptions(entry.bench.slug, noise)) });
  return (
    <section>
      <div className="sh"><h2>Entries in benches</h2><p>rank among tie groups at {formatPercent(noise)}</p></div>
      {entries.length === 0 ? <Empty title="Not entered in a bench yet">An entry runs it on every phantom of a bench; the table shows here.</Empty> : (
        <div className="sheet">
          <table className="en">
            <caption className="vh">Entries of {solver.name}</caption>
            <thead><tr><th scope="col">Bench</th><th scope="col" className="num">Rank</th><th scope="col" className="num">Relative L2</th><th scope="col" className="num">Breakdown</th><th scope="col">Review</th></tr></thead>
            <tbody>
              {entries.map((entry, i) => {
                const ranking = rankings[i]?.data;
                const row = ranking?.rows.find((r) => r.solver.slug === solver.slug && r.solver.version === entry.version);
                const failed = entry.runs.find((r) => r.state === 'failed');
                const busy = entry.runs.some((r) => r.state === 'queued' || r.state === 'running');
                const state: MarkState = failed ? 'failed' : busy ? 'running' : entryReview(entry.runs.map((r) => r.review));
                return (
                  <tr key={`${entry.bench.id}-${entry.version}`}>
                    <td><Link to={paths.bench(entry.bench.slug)}>{entry.bench.title}</Link> <span className="mono sm">{entry.bench.id}</span> <span className="sm">v{entry.version}{entry.bench.state === 'closed' ? ', closed' : ''}{axisFact(entry.bench.axis) ? `, ${axisFact(entry.bench.axis)?.toLowerCase()}${ranking ? `, read at ${axisView(entry.bench.axis).format(ranking.level)}` : ''}` : ''}</span></td>
                    <td className="num">{ranking && row ? rankWords(ranking, row) : '–'}</td>
                    <td className="num"><b>{formatError(row?.median ?? null)}</b></td>
                    <td className="num">{row?.breakdown ? axisView(entry.bench.axis).format(row.breakdown) : row?.breakdownNote === 'beyond' ? 'beyond' : row?.breakdownNote ?? '–'}</td>
                    <td><Link className="quiet" to={paths.run(failed?.run ?? entry.runs[0]?.run ?? '')}><StateMark state={state} word={state === 'signed-off-with-reservation' ? 'With a reservation' : undefined} /></Link></td>
                  </tr>
                );
              })}
            </tbody>
          </table>
        </div>
      )}
    </section>
  );
}
