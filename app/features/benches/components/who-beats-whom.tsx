import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { BenchComparison, BenchDetail, Ranking } from '../../../../shared/contracts/benches';
import { MeanRankStrip } from '../../../components/charts/mean-rank-strip';
import { PairMatrix } from '../../../components/charts/pair-matrix';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { useParam } from '../../../components/noise-rule/use-noise';
import { InlineSelect } from '../../../components/ui/chooser';
import { Section } from '../../../components/ui/layout';
import { BelowFloor, Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { Segmented } from '../../../components/ui/segmented';
import { numberWord } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { getComparisonQueryOptions } from '../api/get-bench';
import { blockWords, entryId, overWords, ratioCell, testWords, wonCell } from '../model/comparison-view';
import { shortNames } from '../model/names';

const views = [{ value: 'ratio', label: 'Ratio of errors' }, { value: 'won', label: 'Draws won, %' }] as const;

/** Mean ranks with tie brackets and every pair: over phantoms, or within one phantom over its draws. */
export function WhoBeatsWhom({ bench, ranking, noise }: { bench: BenchDetail; ranking: Ranking; noise: number }) {
  const [within, setWithin] = useParam('within');
  const phantom = bench.phantoms.find((p) => p.slug === within);
  const comparison = useQuery(getComparisonQueryOptions(bench.slug, { noise: ranking.noise, metric: ranking.metric, over: ranking.over, phantom: phantom?.slug }));
  const axis = useAxis();
  const title = <>Who beats whom {ranking.belowFloor && ranking.over === 'level' ? `at ${axis.at(noise)}` : overWords(ranking, axis)}</>;
  if (ranking.belowFloor) return <Section title={title}><BelowFloor noise={axis.noiseAt(noise)} floor={bench.modelErrorFloor} /></Section>;
  const choose = (
    <InlineSelect label="Compared over" value={phantom?.slug ?? ''} onChange={(slug) => setWithin(slug || null)}>
      <option value="">over {bench.phantoms.length === 1 ? 'the phantom' : `${numberWord(bench.phantoms.length)} phantoms`}</option>
      {bench.phantoms.map((p) => <option key={p.slug} value={p.slug}>within {p.name}, over its draws</option>)}
    </InlineSelect>
  );
  return (
    <Section title={title} note={choose} id="who-beats-whom">
      {comparison.isError ? <ErrorPanel error={comparison.error} what="The comparison" onRetry={() => void comparison.refetch()} /> : comparison.data ? <Compared comparison={comparison.data} ranking={ranking} /> : <Loading label="Comparing the solvers" />}
    </Section>
  );
}

export function Compared({ comparison, ranking }: { comparison: BenchComparison; ranking: Ranking }) {
  const axis = useAxis();
  const [view, setView] = useState<'ratio' | 'won'>('ratio');
  const { test, solvers } = comparison;
  const short = shortNames(solvers.map((s) => s.solver.name));
  const names = solvers.map((s) => short(s.solver.name));
  if (solvers.length < 2) return <Empty title="Nothing to compare yet">{test.words}</Empty>;
  const ranks = solvers.flatMap((s) => (s.meanRank === null ? [] : [{ id: entryId(s.solver), glyph: s.glyph, name: short(s.solver.name), meanRank: s.meanRank, tieGroup: s.tieGroup }]));
  return (
    <>
      <p className="say cmp-say">{test.words}</p>
      <p className="sm cmp-how">{blockWords(comparison, axis)} {testWords(comparison)} <Link to={paths.referenceEntry('statistics', 'friedman')}>How it is tested</Link></p>
      <div className="cmp">
        <div className="sheet pad">
          <div className="sh"><h3>Mean rank</h3><p>{test.criticalDifference === null ? 'no bars: no test is possible here' : `bar width is the critical difference, ${test.criticalDifference.toFixed(2)}`}</p></div>
          <MeanRankStrip items={ranks} criticalDifference={test.criticalDifference} />
        </div>
        <div className="sheet pad">
          <div className="sh"><h3>Pairs, row to column</h3><Segmented label="Figure of the pairs" value={view} onChange={setView} choices={views} /></div>
          <PairMatrix
            caption={view === 'ratio' ? 'Ratio of errors, row over column' : 'Paired draws won, per cent, row against column'} items={solvers.map((s, i) => ({ id: entryId(s.solver), glyph: s.glyph, name: names[i] ?? '' }))}
            cellOf={(i, j) => (view === 'ratio' ? ratioCell(comparison, names, i, j) : wonCell(comparison, ranking, names, i, j))}
            hint={`${view === 'ratio' ? 'Below 1 the row has the smaller error.' : 'Draws of one phantom are not independent of each other: read them as a description.'} Bold is separable. ${comparison.pairWords}`}
          />
        </div>
      </div>
    </>
  );
}
