import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { BenchDetail, Ranking } from '../../../../shared/contracts/benches';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { ParetoChart } from '../../../components/charts/pareto-chart';
import { ProfileChart } from '../../../components/charts/profile-chart';
import { Section } from '../../../components/ui/layout';
import { BelowFloor, Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { paths } from '../../../lib/paths';
import { useNarrow } from '../../../lib/use-media';
import { getComparisonQueryOptions } from '../api/get-bench';
import { entryId } from '../model/comparison-view';
import { metricView } from '../model/metric-view';
import { shortNames } from '../model/names';

interface Props {
  bench: BenchDetail;
  ranking: Ranking;
  noise: number;
  focus: string | null;
  onFocus: (slug: string | null) => void;
}

/** Error against time at the noise, and how often each solver is near the best over all problems. */
export function TradeOffs({ bench, ranking, noise, focus, onFocus }: Props) {
  const axis = useAxis();
  const narrow = useNarrow();
  const height = narrow ? 280 : 320;
  const view = metricView(ranking.metric);
  const comparison = useQuery(getComparisonQueryOptions(bench.slug, { noise: ranking.noise, metric: ranking.metric, over: ranking.over }));
  const short = shortNames(ranking.rows.map((row) => row.solver.name));
  const nameAt = (place: number | null): string | null => (place === null ? null : short(ranking.rows[place]?.solver.name ?? ''));
  const profile = comparison.data?.profile;
  const solvers = comparison.data?.solvers ?? [];
  const focused = solvers.find((s) => s.solver.slug === focus);
  const focusRow = ranking.rows.find((row) => row.solver.slug === focus);
  return (
    <Section title="What an answer costs, and how often it is near the best">
      <div className="cmp even">
        <div className="sheet pad">
          <div className="sh"><h3>Error and time at {axis.at(noise)}</h3><p><Link to={paths.referenceEntry('statistics', 'error-time-front')}>front: nothing beats these in both</Link></p></div>
          {axis.noiseAt(noise) < bench.modelErrorFloor ? <BelowFloor noise={axis.noiseAt(noise)} floor={bench.modelErrorFloor} /> : (
            <ParetoChart
              label={`${view.name} against seconds per reconstruction, both axes logarithmic, with the front of what no solver beats in both`} errorName={view.name} height={height}
              trivial={ranking.trivial} focusId={focusRow ? entryId(focusRow.solver) : null}
              points={ranking.rows.map((row) => ({ id: entryId(row.solver), glyph: row.glyph, name: short(row.solver.name), error: row.median, seconds: row.secondsPerReconstruction, onFront: row.onFront, dominatedBy: nameAt(row.dominatedBy) }))}
            />
          )}
        </div>
        <div className="sheet pad">
          <div className="sh"><h3>Within a factor of the best</h3><p><Link to={paths.referenceEntry('statistics', 'performance-profile')}>performance profile</Link></p></div>
          {comparison.isError ? <ErrorPanel error={comparison.error} what="The profiles" onRetry={() => void comparison.refetch()} /> : !comparison.data ? <Loading label="Drawing the profiles" /> : profile && profile.items.length > 0 ? (
            <>
              <ProfileChart
                label={`Share of problems in which the ${view.words} is within a factor of the smallest one`} problems={profile.problems} height={height}
                focusId={focused ? entryId(focused.solver) : null} onFocus={(id) => onFocus(id === null ? null : (id.split('@')[0] ?? null))}
                curves={profile.items.flatMap(({ solver, ratios }) => {
                  const own = solvers[solver];
                  return own ? [{ id: entryId(own.solver), glyph: own.glyph, name: short(own.solver.name), ratios }] : [];
                })}
              />
              <p className="sm" style={{ marginTop: 6 }}>{comparison.data.profileWords} Per cent of them; another entry changes every ratio.</p>
            </>
          ) : <Empty title="No profile">{comparison.data.profileWords}</Empty>}
        </div>
      </div>
    </Section>
  );
}
