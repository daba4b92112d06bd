import clsx from 'clsx';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { Ranking } from '../../../../shared/contracts/benches';
import { BarAxisTicks, IntervalBar, type BarAxis } from '../../../components/charts/interval-bar';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { StateMark } from '../../../components/ui/state-mark';
import { formatPercent, formatSeconds, plural } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { metricView } from '../model/metric-view';
import { rankingGroups, type RankingRow } from '../model/ranking-groups';

export interface RankingColumn {
  key: string;
  name: string;
  head: ReactNode;
  unit?: ReactNode;
  numeric: boolean;
  cell: (row: RankingRow) => ReactNode;
  /** The cell is a warning: the row is past its breakdown. */
  alarm?: (row: RankingRow) => boolean;
}

export interface RankingProps {
  ranking: Ranking;
  axis: BarAxis;
  /** Largest noise of the ladder, for 'holds beyond'. */
  ladderEnd: number;
  focus: string | null;
  onFocus: (slug: string | null) => void;
  /** Address of a row's run on the phantom in view, or of its solver. */
  rowPath: (row: RankingRow) => string;
}

export const breakdownWords = (row: Pick<RankingRow, 'breakdown' | 'breakdownNote'>, ladderEnd: number, print: (level: number) => string = formatPercent): string => {
  if (row.breakdown !== null) return print(row.breakdown);
  if (row.breakdownNote === 'beyond') return `> ${print(ladderEnd)}`;
  return row.breakdownNote === 'throughout' ? 'at every level' : '\u2013';
};

/** The review of a row, or what keeps it from one. */
export function RowState({ row }: { row: RankingRow }) {
  const open = row.runs.filter((r) => r.state !== 'finished');
  const failed = open.find((r) => r.state === 'failed') ?? open.find((r) => r.state === 'cancelled');
  if (failed) return <StateMark state={failed.state === 'failed' ? 'failed' : 'cancelled'} word={`${failed.state === 'failed' ? 'Failed' : 'Cancelled'} on ${plural(open.filter((r) => r.state === failed.state).length, 'phantom')}`} />;
  if (open.length) return <StateMark state={open.some((r) => r.state === 'running') ? 'running' : 'queued'} />;
  const words = row.review === 'signed-off-with-reservation' ? 'With a reservation' : undefined;
  return (
    <span title={row.reservations.join('\n') || undefined}>
      <StateMark state={row.review} word={words} />
    </span>
  );
}

export function rankingColumns(metric: string, ladderEnd: number, ranking: Ranking, print: (level: number) => string = formatPercent): RankingColumn[] {
  const figures = ['relative-l2-error', 'sup-error', 'position-error', 'resolution', 'amplitude-response', 'relative-l1-error', 'data-residual-ratio']
    .filter((key) => key !== metric)
    .map((key): RankingColumn => {
      const view = metricView(key);
      return { key, name: view.name, head: view.head, unit: view.unit, numeric: true, cell: (row) => view.format(row.medians[key]) };
    });
  return [
    ...figures,
    { key: 'exponent', name: 'Stability exponent', head: 'Stability', unit: 'exponent', numeric: true, cell: (row) => (row.exponent === null ? '\u2013' : row.exponent.toFixed(2)) },
    {
      key: 'breakdown', name: 'Breakdown', head: 'Break-', unit: 'down', numeric: true, cell: (row) => breakdownWords(row, ladderEnd, print),
      alarm: (row) => ranking.trivial !== null && row.median !== null && row.median >= ranking.trivial,
    },
    {
      key: 'time', name: 'Time', head: 'Time', unit: 'each', numeric: true,
      cell: (row) => <span title={row.timeRatio === null ? undefined : `${row.timeRatio.toPrecision(2)} times truncated SVD`}>{formatSeconds(row.secondsPerReconstruction)}</span>,
    },
    { key: 'review', name: 'Review', head: 'Review', numeric: false, cell: (row) => <RowState row={row} /> },
    {
      key: 'runs', name: 'Runs', head: 'Runs', unit: 'one a phantom', numeric: false,
      cell: (row) => <span className="mono" style={{ fontSize: 12 }}>{row.runs.map((r, i) => <span key={r.run}>{i ? ', ' : ''}<Link to={paths.run(r.run)}>{r.run}</Link></span>)}</span>,
    },
  ];
}

export const standardColumns: ReadonlySet<string> = new Set(['relative-l2-error', 'sup-error', 'position-error', 'breakdown', 'time', 'review']);

function Name({ row, focused, rowPath, onFocus }: { row: RankingRow; focused: boolean } & Pick<RankingProps, 'rowPath' | 'onFocus'>) {
  return (
    <span className="n">
      <button type="button" className="gl-b" aria-pressed={focused} aria-label={`Follow ${row.solver.name} in the charts`} onClick={(e) => { e.stopPropagation(); onFocus(focused ? null : row.solver.slug); }}>
        <SolverGlyph index={row.glyph} size={16} />
      </button>
      <span>
        <Link to={rowPath(row)} onClick={(e) => e.stopPropagation()}>{row.solver.name}</Link>
        <em>{row.group.name}</em>
      </span>
    </span>
  );
}

/** One rank a tie group with its bracket; the trivial reconstruction is always the last row, hatched. */
export function RankingTable({ columns, ...props }: RankingProps & { columns: readonly RankingColumn[] }) {
  const { ranking, axis, focus, onFocus } = props;
  const levelAxis = useAxis();
  const view = metricView(ranking.metric);
  const [first, ...rest] = view.head.split(' ');
  return (
    <table className="rk">
      <caption className="vh">Ranking at {levelAxis.at(ranking.noise)} by {view.words}</caption>
      <thead>
        <tr>
          <th scope="col" style={{ paddingLeft: 14 }}>Rank</th>
          <th scope="col">Solver configuration<span>and group</span></th>
          <th scope="col" className="num">{first}<span>{rest.join(' ') || view.unit}</span></th>
          <th scope="col">90 % interval<BarAxisTicks axis={axis} /></th>
          {columns.map((c) => <th key={c.key} scope="col" className={c.numeric ? 'num' : undefined}>{c.head}{c.unit ? <span>{c.unit}</span> : null}</th>)}
        </tr>
      </thead>
      <tbody>
        {rankingGroups(ranking.rows).map((group, g) =>
          group.rows.map((row, i) => {
            const focused = row.solver.slug === focus;
            return (
              <tr key={row.solver.slug} data-id={row.solver.slug} className={clsx(i === group.rows.length - 1 && 'gl', focused && 'foc')} onClick={() => onFocus(focused ? null : row.solver.slug)}>
                {i === 0 ? (
                  <td className={clsx('rank', group.rows.length > 1 && 'tie')} rowSpan={group.rows.length} data-group={g}>
                    {group.rank === null ? <span className="vh">no rank</span> : <b>{group.rank}</b>}
                    {group.rows.length > 1 ? <i>{group.rows.length} tied</i> : null}
                  </td>
                ) : null}
                <td className="sv"><Name row={row} focused={focused} rowPath={props.rowPath} onFocus={onFocus} /></td>
                <td className="num"><b style={{ fontWeight: 600 }}>{view.format(row.median)}</b></td>
                <td className="bar"><IntervalBar glyph={row.glyph} low={row.p05} median={row.median} high={row.p95} axis={axis} trivial={ranking.trivial} /></td>
                {columns.map((c) => <td key={c.key} className={clsx(c.numeric && 'num', c.key === 'review' && 'rv')} style={c.alarm?.(row) ? { color: 'var(--brick)', fontWeight: 600 } : undefined}>{c.cell(row)}</td>)}
              </tr>
            );
          }),
        )}
        <tr className="base">
          <td />
          <td className="sv">Trivial, plain background</td>
          <td className="num">{view.format(ranking.trivial)}</td>
          <td colSpan={1 + columns.length} />
        </tr>
      </tbody>
    </table>
  );
}

/** The same ranking on a phone: one card a solver. */
export function RankingCards(props: RankingProps) {
  const { ranking, axis, ladderEnd, focus } = props;
  const levelAxis = useAxis();
  const view = metricView(ranking.metric);
  const second = ranking.metric === 'sup-error' ? 'relative-l2-error' : 'sup-error';
  const other = metricView(second);
  return (
    <div className="cards">
      {rankingGroups(ranking.rows).map((group) =>
        group.rows.map((row, i) => {
          const focused = row.solver.slug === focus;
          return (
            <div key={row.solver.slug} className={clsx('mcard', i === 0 && 'g', focused && 'foc')}>
              <div className="top">
                <b>{i === 0 ? group.rank : ''}</b>
                <div className="sv"><Name row={row} focused={focused} rowPath={props.rowPath} onFocus={props.onFocus} /></div>
                <span className="l2 tn">{view.format(row.median)}</span>
              </div>
              {i === 0 && group.rows.length > 1 ? <span className="tie">{group.rows.length} tied</span> : null}
              <IntervalBar glyph={row.glyph} low={row.p05} median={row.median} high={row.p95} axis={axis} trivial={ranking.trivial} />
              <div className="sub">
                <span>{other.head} {other.format(row.medians[second])}</span>
                <span>breakdown {breakdownWords(row, ladderEnd, levelAxis.format)}</span>
                <span>{formatSeconds(row.secondsPerReconstruction)}</span>
                <RowState row={row} />
              </div>
            </div>
          );
        }),
      )}
      <div className="mcard g base-card"><span>Trivial, plain background</span><span className="l2 tn">{view.format(ranking.trivial)}</span></div>
    </div>
  );
}
