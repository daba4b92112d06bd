import { useQueries, useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import type { BenchDetail, Ranking } from '../../shared/contracts/benches';
import { decodeArray } from '../../shared/domain/array-encoding';
import { familyNames } from '../../shared/domain/families';
import { StabilityChart } from '../components/charts/stability-chart';
import { toPicture, valueScale } from '../components/images/pixels';
import { Page } from '../components/layout/page';
import { clampNoise, nearestLevel, ruleScale } from '../components/noise-rule/scale';
import { useNoise, useParam } from '../components/noise-rule/use-noise';
import { ButtonLink } from '../components/ui/button';
import { InlineSelect } from '../components/ui/chooser';
import { ColumnChooser } from '../components/ui/column-chooser';
import { Section, Tag } from '../components/ui/layout';
import { Markdown } from '../components/ui/markdown';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { StateMark } from '../components/ui/state-mark';
import { getCitationQueryOptions, getRankingQueryOptions, getSeriesQueryOptions, useBench } from '../features/benches/api/get-bench';
import { BenchActions } from '../features/benches/components/bench-actions';
import { CiteBench } from '../features/benches/components/cite-bench';
import { Gallery, type GalleryItem } from '../features/benches/components/gallery';
import { PhantomThumbs, type PhantomPicture } from '../features/benches/components/phantom-thumbs';
import { RankingPanel } from '../features/benches/components/ranking-panel';
import { TradeOffs } from '../features/benches/components/trade-offs';
import { WhoBeatsWhom } from '../features/benches/components/who-beats-whom';
import { toCurves } from '../features/benches/model/curves';
import { metricView } from '../features/benches/model/metric-view';
import { shortNames } from '../features/benches/model/names';
import type { RankingRow } from '../features/benches/model/ranking-groups';
import { getPhantomSimulationQueryOptions } from '../features/phantoms/api/get-phantom';
import { getRunImageQueryOptions } from '../features/runs/api/get-run-image';
import { isApiError } from '../lib/api-client';
import { axisFact, axisView } from '../lib/axis-words';
import { numberWord, plural } from '../lib/format';
import { paths } from '../lib/paths';
import { useNarrow } from '../lib/use-media';
import { useSettled } from '../lib/use-settled';
import '../styles/pages/bench.css';
import '../styles/pages/bench-comparison.css';
import '../styles/pages/bench-ranking.css';
import NotFound from './not-found';
import { noiseModels } from '../../solvers/noise/registry';

export default function BenchRoute() {
  const { slug = '' } = useParams();
  const bench = useBench(slug);
  if (bench.isPending) return <Page title="Bench"><Loading label="Fetching the bench" disc /></Page>;
  if (bench.isError) {
    if (isApiError(bench.error) && bench.error.status === 404) return <NotFound what="bench" />;
    return <Page title="Bench"><ErrorPanel error={bench.error} what="The bench" onRetry={() => void bench.refetch()} /></Page>;
  }
  return <BenchPage bench={bench.data} />;
}

function BenchPage({ bench }: { bench: BenchDetail }) {
  const axis = axisView(bench.axis);
  const { noise: read } = useNoise();
  // A noise carried here from another page may have no place on another axis.
  const noise = axis.isNoise ? read : clampNoise(ruleScale(bench.ladder), read);
  const settled = Number(useSettled(noise).toPrecision(4));
  const [metric, setMetric] = useParam('metric', bench.rankingMetric);
  const [focus, setFocus] = useParam('focus');
  const [chosen, setChosen] = useParam('solvers');
  const [overText, setOver] = useParam('over');
  const ranking = useQuery(getRankingQueryOptions(bench.slug, settled, metric, overText === 'ladder' ? 'ladder' : 'level'));
  const series = useQuery(getSeriesQueryOptions(bench.slug, metric));
  const citation = useQuery(getCitationQueryOptions(bench.slug));
  const pictures = usePhantomPictures(bench);
  const narrow = useNarrow();

  const focused = ranking.data?.rows.find((r) => r.solver.slug === focus) ?? null;
  const picked = new Set(chosen ? chosen.split(',') : bench.entries.map((e) => e.solver.slug));
  const curves = series.data ? toCurves(series.data) : [];
  const sealed = bench.phantoms.filter((p) => p.sealed).length;
  const view = metricView(metric);
  const rows = ranking.data?.rows ?? [];
  const comparable = (chosen ? rows.filter((r) => picked.has(r.solver.slug)) : rows).slice(0, 3);
  const firstPhantom = bench.phantoms.find((p) => !p.sealed) ?? bench.phantoms[0];
  const runOn = (row: RankingRow, phantom = firstPhantom?.slug): string | null => row.runs.find((r) => r.phantom === phantom)?.run ?? row.runs[0]?.run ?? null;
  const rowPath = (row: RankingRow): string => {
    const run = runOn(row);
    return run ? `${paths.run(run)}?noise=${settled}` : paths.solver(row.solver.slug);
  };
  const compareRuns = comparable.map((row) => runOn(row)).filter((r): r is string => r !== null);

  return (
    <Page
      title={`${bench.id} ${bench.title}`} className="page-bench" axis={bench.axis}
      rule={{
        levels: bench.ladder, draws: bench.draws, floor: bench.modelErrorFloor, floorOf: bench.phantoms.length > 1 ? bench.floorPhantom : null,
        focus: focused ? { glyph: focused.glyph, breakdown: focused.breakdown } : null,
      }}
    >
      <div className="head">
        <div>
          <div className="crumb">
            <span>Bench <span className="mono">{bench.id}</span>, revision {bench.revision}</span>
            <span>{familyNames[bench.family].line}</span>
            {axisFact(bench.axis) ? <span>{axisFact(bench.axis)}</span> : null}
            <StateMark state={bench.state} />
            {sealed ? <Tag>{sealed} of {plural(bench.phantoms.length, 'phantom')} sealed</Tag> : null}
          </div>
          <h1>{bench.question}</h1>
        </div>
        <PhantomThumbs phantoms={bench.phantoms} pictures={pictures} />
      </div>
      <BenchActions bench={bench} />
      {bench.entries.length === 0 ? (
        <Empty title="No solver is entered yet">The first registered configuration entered here starts its runs at once. <ButtonLink to={paths.solverNew()}>Submit a solver</ButtonLink></Empty>
      ) : (
        <>
          <div className="two">
            {ranking.isError ? (
              <ErrorPanel error={ranking.error} what="The ranking" onRetry={() => void ranking.refetch()} />
            ) : ranking.data ? (
              <RankingPanel bench={bench} ranking={ranking.data} noise={noise} stale={ranking.isPlaceholderData} onMetric={setMetric} onOver={(over) => setOver(over === 'level' ? null : over)} focus={focus || null} onFocus={setFocus} rowPath={rowPath} />
            ) : (
              <Loading label="Ranking the runs" />
            )}
            <section className="sheet" aria-labelledby="stability-title">
              <div className="cap">
                <h2 id="stability-title">Stability</h2>
                <div className="flex gap-x4 items-baseline">
                  <p>{view.words}; 90 % band of selected and best</p>
                  <ColumnChooser
                    label="Solvers" columns={bench.entries.map((e) => ({ key: e.solver.slug, name: e.solver.name }))} shown={picked}
                    onChange={(next) => setChosen(next.size === bench.entries.length ? null : bench.entries.map((e) => e.solver.slug).filter((s) => next.has(s)).join(',') || 'none')}
                  />
                </div>
              </div>
              <div className="chart">
                {series.data ? (
                  <StabilityChart
                    label={`${view.name} against ${axis.label}, one curve per solver, both axes logarithmic`} curves={curves.filter((c) => picked.has(c.id))} levels={series.data.ladder}
                    noise={noise} focusId={focus || null} floor={series.data.modelErrorFloor} trivial={series.data.trivial} yLabel={view.words}
                    height={narrow ? 380 : 446} labelRoom={narrow ? 140 : 152} terse
                  />
                ) : series.isError ? <ErrorPanel error={series.error} what="The chart" /> : <Loading label="Drawing the curves" />}
              </div>
            </section>
          </div>
          {ranking.data ? <SeenAt bench={bench} ranking={ranking.data} noise={settled} pictures={pictures} /> : null}
          {ranking.data ? <WhoBeatsWhom bench={bench} ranking={ranking.data} noise={noise} /> : null}
          {ranking.data ? <TradeOffs bench={bench} ranking={ranking.data} noise={settled} focus={focus || null} onFocus={setFocus} /> : null}
        </>
      )}
      <h2 className="vh">About this bench</h2>
      <section className="sec notes">
        <div>
          <h3>How the table is made</h3>
          <p>Every solver configuration runs on every phantom at {numberWord(bench.ladder.length)} {axis.levels}, {plural(bench.draws, 'seeded draw')} each (seed {bench.seed}).{axis.isNoise ? '' : ` ${axis.fixed}. ${axis.line}`}{bench.noiseModel === 'gaussian' ? '' : ` Noise: ${noiseModels.find((model) => model.key === bench.noiseModel)?.name ?? bench.noiseModel}.`} Parameters stay fixed across the ladder unless the configuration's own rule changes them. Ranks compare phantoms, not draws: a phantom counts once, with its median over draws.</p>
          {bench.description ? <Markdown source={bench.description} /> : null}
        </div>
        <div>
          <h3>What breakdown means</h3>
          <p>The {axis.isNoise ? 'noise' : 'level'} at which the median error, once below that of answering with the plain background, rises to it again. A method that is worse at {axis.isNoise ? 'less noise, because it fits the error of its model,' : 'lower levels'} is not counted as broken down there: read its curve.{axis.isNoise ? ' At the other end, noise below the model-error floor (dotted) is smaller than the gap between the simulating and the inverting model.' : ''}</p>
        </div>
        <CiteBench
          slug={bench.slug} noise={settled} metric={metric} citation={citation.data}
          comparePath={compareRuns.length > 1 ? `${paths.compare(compareRuns)}&noise=${settled}` : null} compareLabel={`Compare ${numberWord(compareRuns.length)}`}
        />
      </section>
    </Page>
  );
}

/** Ground truths of the open phantoms, by slug. */
function usePhantomPictures(bench: BenchDetail): ReadonlyMap<string, PhantomPicture> {
  const open = bench.phantoms.filter((p) => !p.sealed);
  const answers = useQueries({ queries: open.map((p) => getPhantomSimulationQueryOptions(p.slug, p.version)) });
  const pictures = new Map<string, PhantomPicture>();
  answers.forEach(({ data }, i) => {
    const phantom = open[i];
    if (data?.truth && phantom) pictures.set(phantom.slug, { picture: toPicture(decodeArray(data.truth), data.grid), background: data.background });
  });
  return pictures;
}

function SeenAt({ bench, ranking, noise, pictures }: { bench: BenchDetail; ranking: Ranking; noise: number; pictures: ReadonlyMap<string, PhantomPicture> }) {
  const open = bench.phantoms.filter((p) => !p.sealed);
  const [seen, setSeen] = useParam('seen', open[0]?.slug ?? '');
  const phantom = open.find((p) => p.slug === seen) ?? open[0];
  const simulation = useQuery({ ...getPhantomSimulationQueryOptions(phantom?.slug ?? '', phantom?.version ?? 1), enabled: phantom !== undefined });
  const level = nearestLevel(ruleScale(bench.ladder), noise).index;
  const runs = ranking.rows.map((row) => row.runs.find((r) => r.phantom === phantom?.slug && r.state === 'finished')?.run ?? null);
  const images = useQueries({ queries: runs.map((run) => ({ ...getRunImageQueryOptions(run ?? '', level, 'median'), enabled: run !== null })) });
  if (!phantom) return null;
  const data = simulation.data;
  // On another axis each level may have a ground truth of its own; it comes with the images.
  const ofLevel = bench.axis.key === 'noise' ? null : (images.find((image) => image.data?.truth)?.data?.truth ?? null);
  const truth = ofLevel && data ? toPicture(ofLevel, data.grid) : (pictures.get(phantom.slug)?.picture ?? null);
  const [low, high] = valueScale(ofLevel ? [ofLevel.reduce((a, b) => Math.min(a, b)), ofLevel.reduce((a, b) => Math.max(a, b))] : (data?.truthRange ?? [0, 1]), data?.background ?? 0.5);
  const view = metricView('relative-l2-error');
  const shortName = shortNames(ranking.rows.map((r) => r.solver.name));
  const items: GalleryItem[] = [
    { key: 'truth', glyph: null, name: 'Ground truth', reading: phantom.id, picture: truth },
    ...ranking.rows.map((row, i): GalleryItem => {
      const image = images[i]?.data;
      return {
        key: row.solver.slug, glyph: row.glyph, name: shortName(row.solver.name),
        reading: image ? `L2 ${view.format(image.trial.metrics['relative-l2-error'])}` : '',
        note: runs[i] === null ? 'not finished' : images[i]?.isError ? 'no image' : undefined,
        picture: image && data ? toPicture(image.image, data.grid) : null,
      };
    }),
  ];
  return (
    <Section
      title={<>Seen at {axisView(bench.axis).at(bench.ladder[level] ?? noise)}</>}
      note={
        <>
          Median draw each on{' '}
          {open.length > 1 ? (
            <InlineSelect label="Phantom in view" value={phantom.slug} onChange={setSeen}>{open.map((p) => <option key={p.slug} value={p.slug}>{p.name}</option>)}</InlineSelect>
          ) : <em>{phantom.name}</em>}
          . {data?.grid.body?.kind === 'interval' ? 'All curves share one scale.' : 'All images share one colour scale.'}
        </>
      }
    >
      <Gallery items={items} low={low} high={high} background={data?.background ?? 0} unit={data?.unit ?? ''} body={data?.grid.body} />
    </Section>
  );
}
