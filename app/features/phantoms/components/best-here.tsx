import { Link } from 'react-router-dom';
import { barAxis, IntervalBar } from '../../../components/charts/interval-bar';
import { ButtonLink } from '../../../components/ui/button';
import { Empty, ErrorPanel } from '../../../components/ui/notices';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { StateMark } from '../../../components/ui/state-mark';
import { formatError, formatPercent } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { usePhantomBest } from '../api/get-phantom';

/** The three best finished runs on this version at the rule's noise. */
export function BestHere({ slug, version, noise, floor }: { slug: string; version: number; noise: number; floor: number | null }) {
  const best = usePhantomBest(slug, version, noise);
  const items = best.data?.items.slice(0, 3) ?? [];
  const axis = barAxis(items.flatMap((i) => [i.p05, i.p95]), 1);
  const below = floor !== null && noise < floor;
  return (
    <>
      <div className="sh gap-top"><h2>Best on this phantom at {formatPercent(noise)}</h2><p>{below ? 'below the model-error floor: no ranks' : 'relative L2, median and 90 % interval'}</p></div>
      {best.isError ? <ErrorPanel error={best.error} onRetry={() => void best.refetch()} /> : best.isPending ? <div className="sheet pad"><div className="sk" /><div className="sk" style={{ marginTop: 9, width: '70%' }} /></div> : items.length === 0 ? (
        <Empty title="No run on this phantom yet">The first configuration entered in a bench that holds it will show here. <ButtonLink to={`${paths.solverNew()}?phantom=${slug}`} style={{ marginTop: 8 }}>Submit a solver</ButtonLink></Empty>
      ) : (
        <div className="sheet">
          <table className="bt">
            <caption className="vh">Best solvers on this phantom</caption>
            <thead className="vh"><tr><th scope="col">Place</th><th scope="col">Solver</th><th scope="col">Median</th><th scope="col">Interval</th><th scope="col">Review</th></tr></thead>
            <tbody>
              {items.map((item, i) => (
                <tr key={item.run}>
                  <td className="place">{below ? '–' : i + 1}</td>
                  <td className="sv"><span className="n"><SolverGlyph index={item.glyph} size={16} /><span><Link to={paths.run(item.run)}>{item.solver.name}</Link><em>{item.group.name}</em></span></span></td>
                  <td className="num"><b>{formatError(item.median)}</b></td>
                  <td className="bar"><IntervalBar glyph={item.glyph} low={item.p05} median={item.median} high={item.p95} axis={axis} trivial={1} /></td>
                  <td><StateMark state={item.review} word={item.review === 'signed-off-with-reservation' ? 'With a reservation' : undefined} />{item.reservation ? <span className="sm" style={{ display: 'block' }}>{item.reservation}</span> : null}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
    </>
  );
}
