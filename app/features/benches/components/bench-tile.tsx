import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { BenchSummary } from '../../../../shared/contracts/benches';
import { familyNames } from '../../../../shared/domain/families';
import { bestAt, medianAt, SmallStability } from '../../../components/charts/stability-chart';
import { AxisContext } from '../../../components/noise-rule/axis-context';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { axisView } from '../../../lib/axis-words';
import { formatError, plural } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { getSeriesQueryOptions } from '../api/get-bench';
import { toCurves } from '../model/curves';

/** Title, small stability chart on common axes, best method at the cursor and its error. */
export function BenchTile({ bench, noise, height }: { bench: BenchSummary; noise: number; height: number }) {
  const series = useQuery(getSeriesQueryOptions(bench.slug, 'relative-l2-error'));
  const curves = series.data ? toCurves(series.data) : [];
  const axis = axisView(series.data?.axis);
  const ladder = series.data?.ladder ?? [];
  // The reader's noise has no place on another axis: there the middle of the ladder is read.
  const at = axis.isNoise ? noise : (ladder[Math.floor(ladder.length / 2)] ?? noise);
  const best = bestAt(curves, at);
  return (
    <Link to={`${paths.bench(bench.slug)}?noise=${Number(at.toPrecision(4))}`}>
      <div className="f">{familyNames[bench.family].name}, <span className="mono">{bench.id}</span>{axis.isNoise ? '' : `, ${axis.label}`}</div>
      <h3>{bench.title}</h3>
      {series.data ? (
        <AxisContext value={axis}><SmallStability label={`Stability curves of ${bench.title}`} curves={curves} levels={series.data.ladder} noise={at} floor={series.data.modelErrorFloor} height={height} /></AxisContext>
      ) : (
        <div style={{ height }} role="status"><div className="sk" style={{ width: '80%' }} /><span className="vh">{series.isError ? 'The curves could not be fetched' : 'Fetching the curves'}</span></div>
      )}
      <div className="best">
        {best ? (
          <><span><SolverGlyph index={best.glyph} size={13} />{best.short}{axis.isNoise ? '' : ` at ${axis.at(at)}`}</span><b className="tn">{formatError(medianAt(best, at))}</b></>
        ) : (
          <span>{bench.entryCount === 0 ? 'no solver entered yet' : `${bench.runsFinished} of ${plural(bench.runsTotal, 'run')} finished`}</span>
        )}
      </div>
    </Link>
  );
}
