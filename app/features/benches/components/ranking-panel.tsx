import { useState } from 'react';
import type { BenchDetail, Ranking } from '../../../../shared/contracts/benches';
import { barAxis } from '../../../components/charts/interval-bar';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { InlineSelect } from '../../../components/ui/chooser';
import { ColumnChooser } from '../../../components/ui/column-chooser';
import { axisView } from '../../../lib/axis-words';
import { formatPercent, numberWord, plural } from '../../../lib/format';
import { metricViews } from '../model/metric-view';
import { RankingCards, rankingColumns, RankingTable, standardColumns, type RankingProps } from './ranking-table';

interface PanelProps extends Pick<RankingProps, 'focus' | 'onFocus' | 'rowPath'> {
  bench: BenchDetail;
  ranking: Ranking;
  /** Noise at the cursor; the ranking follows it. */
  noise: number;
  stale: boolean;
  onMetric: (metric: string) => void;
  onOver: (over: Ranking['over']) => void;
}

export function RankingPanel({ bench, ranking, noise, stale, onMetric, onOver, ...rest }: PanelProps) {
  const [shown, setShown] = useState<ReadonlySet<string>>(standardColumns);
  const levelAxis = useAxis();
  const ladderEnd = bench.ladder[bench.ladder.length - 1] ?? 0.3;
  const columns = rankingColumns(ranking.metric, ladderEnd, ranking, levelAxis.format);
  const axis = barAxis(ranking.rows.flatMap((r) => [r.p05, r.p95]), ranking.trivial);
  const common = { ranking, axis, ladderEnd, ...rest };
  return (
    <section className="sheet tbl" aria-labelledby="ranking-title" aria-busy={stale}>
      <div className="cap">
        <h2 id="ranking-title">Ranking at {levelAxis.at(noise)}</h2>
        <div className="flex gap-x4 items-baseline flex-wrap">
          <p>
            Rank by{' '}
            <InlineSelect label="Rank by" value={ranking.metric} onChange={onMetric}>
              {metricViews.filter((m) => m.ranked).map((m) => <option key={m.key} value={m.key}>{m.words}</option>)}
            </InlineSelect>{' '}
            <InlineSelect label="Rank over" value={ranking.over} onChange={(value) => onOver(value === 'ladder' ? 'ladder' : 'level')}>
              <option value="level">at this {levelAxis.isNoise ? 'noise' : 'level'}</option>
              <option value="ladder">over the ladder</option>
            </InlineSelect>
          </p>
          <ColumnChooser columns={columns.map((c) => ({ key: c.key, name: c.name }))} shown={shown} onChange={setShown} />
        </div>
      </div>
      <RankingTable {...common} columns={columns.filter((c) => shown.has(c.key))} />
      <RankingCards {...common} />
      <p className="sm note">
        {rankingWords(bench, ranking)}
      </p>
    </section>
  );
}

/** What the figures are of, what the ranks are of, and why there is none. */
export function rankingWords(bench: Pick<BenchDetail, 'draws' | 'floorPhantom'> & { readonly axis?: BenchDetail['axis'] }, ranking: Ranking): string {
  const { test } = ranking;
  const axis = axisView(bench.axis);
  if (ranking.belowFloor && ranking.over === 'level') return `${formatPercent(axis.noiseAt(ranking.noise))}${axis.isNoise ? '' : ' noise'} is below the model-error floor${bench.floorPhantom ? ` of ${bench.floorPhantom}` : ''}: the gap between the two models is larger than this noise, so no ranks are given.`;
  const figures = `Median of ${plural(test.blocks, 'phantom')} × ${plural(bench.draws, 'draw')}${ranking.interpolated ? ', interpolated' : ''}.`;
  const ranks = ranking.over === 'ladder' ? ` Ranks are of the mean over ${numberWord(ranking.levels.length)} levels.` : ranking.interpolated ? ` Ranks are of ${axis.isNoise ? axis.format(ranking.level) : axis.at(ranking.level)}.` : '';
  const outcome = test.enough ? ' Brackets mark statistical ties over phantoms.' : ` ${test.words}`;
  return `${figures}${ranks}${outcome} Select a row to follow it in the charts.`;
}
