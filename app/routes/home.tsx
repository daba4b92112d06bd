import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { BenchSummary } from '../../shared/contracts/benches';
import { familyKeys, familyNames } from '../../shared/domain/families';
import { defaultLadder } from '../../shared/domain/ladder';
import { StabilityChart } from '../components/charts/stability-chart';
import { Page } from '../components/layout/page';
import { useNoise, useParam } from '../components/noise-rule/use-noise';
import { Button, ButtonLink } from '../components/ui/button';
import { Section } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { Seal } from '../components/ui/seal';
import { StateMark } from '../components/ui/state-mark';
import { useToast } from '../components/ui/toast';
import { getCitationQueryOptions, getRankingQueryOptions, getSeriesQueryOptions, listBenchesQueryOptions } from '../features/benches/api/get-bench';
import { AnswerList } from '../features/benches/components/answer-list';
import { BenchTile } from '../features/benches/components/bench-tile';
import { advise, budgetOf, budgets, careOf, caresFor } from '../features/benches/model/advice';
import { toCurves } from '../features/benches/model/curves';
import { metricView } from '../features/benches/model/metric-view';
import { recentVerdictsQueryOptions } from '../features/site/api/search';
import { formatHash, formatPercent, formatShortDate } from '../lib/format';
import { paths } from '../lib/paths';
import { useNarrow } from '../lib/use-media';
import { useSettled } from '../lib/use-settled';
import '../styles/pages/home.css';

export default function Home() {
  const { noise } = useNoise();
  const narrow = useNarrow();
  const benches = useQuery(listBenchesQueryOptions({ state: 'open' }));
  const open = benches.data?.items ?? [];
  // The sentence asks for a noise: benches on another axis have none to read at.
  const asked = open.filter((b) => b.axis.key === 'noise');
  const [chosen, setChosen] = useParam('bench');
  // The bench that has the most to say, until the reader chooses.
  const fullest = asked.reduce<BenchSummary | undefined>((best, b) => (best === undefined || b.runsFinished > best.runsFinished ? b : best), undefined);
  const bench = asked.find((b) => b.slug === chosen) ?? fullest;
  const series = useQuery({ ...getSeriesQueryOptions(bench?.slug ?? '', 'relative-l2-error'), enabled: bench !== undefined });
  return (
    <Page title="Hadamark" className="page-home" rule={{ levels: series.data?.ladder ?? defaultLadder, floor: series.data?.modelErrorFloor ?? null }}>
      <div className="hero">
        <h1>Find the inverse method that holds at your noise.</h1>
        <p>Hadamark runs every entered solver on every phantom of its bench, over a ladder of noise levels with repeated draws. Beside each error stands whether an independent reviewer has signed it.</p>
      </div>
      {benches.isPending ? (
        <Loading label="Fetching the benches" />
      ) : benches.isError ? (
        <ErrorPanel error={benches.error} what="The benches" onRetry={() => void benches.refetch()} />
      ) : bench ? (
        <FindAMethod bench={bench} open={asked} onBench={setChosen} />
      ) : (
        <Empty title="No bench is open yet">A curator opens one from published phantoms; its first runs then show here. <Link to={paths.phantoms()}>See the phantoms</Link></Empty>
      )}
      {open.length ? (
        <Section title="Open benches" note="Relative L2 error against noise, same axes throughout. The line is your noise, the marker the best method there; dotted ground lies below the model-error floor.">
          <div className="grid4" style={{ '--tiles': Math.min(4, Math.max(2, open.length)) }}>{open.map((b) => <BenchTile key={b.slug} bench={b} noise={noise} height={narrow ? 110 : 126} />)}</div>
        </Section>
      ) : null}
      <RecentlySigned />
      <section className="sec roles" aria-label="What you can do here">
        <div><h3>Develop a method</h3><p>Submit one configuration; it runs on every phantom of the bench. <Link to={paths.solverNew()}>Submit a solver</Link></p></div>
        <div><h3>Curate a phantom</h3><p>Upload ground truth and geometry, open or sealed. <Link to={paths.phantoms()}>See the phantoms</Link></p></div>
        <div><h3>Review a table</h3><p>Inspect the draws, then put your handle to it. <Link to={paths.review()}>Open the queue</Link></p></div>
        <div><h3>Use the results</h3><p>Every reading has a citation and a printable sheet. <Link to={paths.benches()}>Open a bench</Link></p></div>
      </section>
    </Page>
  );
}

/** The chooser: one sentence with blanks, the curves behind it, three methods. */
function FindAMethod({ bench, open, onBench }: { bench: BenchSummary; open: readonly BenchSummary[]; onBench: (slug: string | null) => void }) {
  const { noise } = useNoise();
  const narrow = useNarrow();
  const settled = Number(useSettled(noise).toPrecision(4));
  const [careKey, setCare] = useParam('care', 'overall');
  const [budgetKey, setBudget] = useParam('within', 'any');
  const offered = caresFor(bench.family);
  const care = offered.find((c) => c.key === careKey) ?? careOf('overall');
  const budget = budgetOf(budgetKey);
  const view = metricView(care.metric);
  const ranking = useQuery(getRankingQueryOptions(bench.slug, settled, care.metric));
  const series = useQuery(getSeriesQueryOptions(bench.slug, care.metric));
  const families = familyKeys.filter((f) => open.some((b) => b.family === f));
  const ladder = series.data?.ladder ?? defaultLadder;
  const ladderEnd = ladder[ladder.length - 1] ?? 0.3;
  const rows = ranking.data ? advise(ranking.data, care.key, budget.seconds) : [];
  return (
    <section className="sheet ask" aria-label="Find a method for my noise">
      <div className="askl">
        <div className="sent">
          I recover{' '}
          {families.length > 1 ? (
            <select aria-label="Problem family" value={bench.family} onChange={(e) => onBench(open.find((b) => b.family === e.target.value)?.slug ?? null)}>
              {families.map((f) => <option key={f} value={f}>{familyNames[f].line}</option>)}
            </select>
          ) : familyNames[bench.family].line}{' '}
          as in{' '}
          <select aria-label="Bench" value={bench.slug} onChange={(e) => onBench(e.target.value)}>
            {open.filter((b) => b.family === bench.family).map((b) => <option key={b.slug} value={b.slug}>{b.title}</option>)}
          </select>{' '}
          at about <output>{formatPercent(noise)}</output> noise, care most about{' '}
          <select aria-label="What matters" value={care.key} onChange={(e) => setCare(e.target.value)}>
            {offered.map((c) => <option key={c.key} value={c.key}>{c.words}</option>)}
          </select>{' '}
          and can wait{' '}
          <select aria-label="Time for one reconstruction" value={budget.key} onChange={(e) => setBudget(e.target.value)}>
            {budgets.map((b) => <option key={b.key} value={b.key}>{b.words}</option>)}
          </select>
          .
        </div>
        <div style={{ marginTop: 4 }}>
          {series.data ? (
            <StabilityChart
              label={`${view.name} against relative noise on ${bench.title}`} curves={toCurves(series.data)} levels={series.data.ladder} noise={noise} floor={series.data.modelErrorFloor}
              trivial={series.data.trivial} yLabel={`${view.words}${view.words.endsWith('error') ? '' : ' error'}`} height={narrow ? 300 : 350} labelRoom={narrow ? 140 : 152} align terse={narrow}
            />
          ) : series.isError ? <ErrorPanel error={series.error} what="The curves" onRetry={() => void series.refetch()} /> : <Loading label="Fetching the curves" />}
        </div>
      </div>
      <div className="askr">
        <div className="sh" style={{ marginBottom: 4 }}><h2 style={{ fontSize: 18 }}>Read at {formatPercent(noise)}</h2><p>{care.by}</p></div>
        {ranking.isError ? <ErrorPanel error={ranking.error} what="The reading" onRetry={() => void ranking.refetch()} /> : null}
        {ranking.data && rows.length ? <AnswerList rows={rows} ranking={ranking.data} care={care.key} noise={settled} ladderEnd={ladderEnd} /> : null}
        {ranking.data?.belowFloor ? <p className="sm"><span className="kd" />Below the model-error floor no ranks are given: the gap between the simulating and the inverting model is larger than this noise.</p> : null}
        {ranking.data && rows.length === 0 ? (
          <p className="sm" style={{ padding: '12px 0' }}>{ranking.data.rows.length === 0 ? 'No run of this bench has finished yet.' : 'No method here meets this at your noise. Allow more time, or lower the noise by averaging frames.'}</p>
        ) : null}
        <div className="flex gap-x2 flex-wrap" style={{ marginTop: 'auto', paddingTop: 10 }}>
          <ButtonLink look="primary" to={`${paths.bench(bench.slug)}?noise=${settled}&metric=${care.metric}`}>Open full table</ButtonLink>
          <CiteReading slug={bench.slug} noise={settled} />
        </div>
      </div>
    </section>
  );
}

function CiteReading({ slug, noise }: { slug: string; noise: number }) {
  const citation = useQuery(getCitationQueryOptions(slug));
  const toast = useToast();
  if (!citation.data) return null;
  const text = `${citation.data.plain} Read at ${formatPercent(noise)}.`;
  return (
    <Button onClick={() => navigator.clipboard.writeText(text).then(() => toast('Citation copied.'), () => toast(text))}>Cite reading</Button>
  );
}

function RecentlySigned() {
  const recent = useQuery(recentVerdictsQueryOptions());
  const items = recent.data?.items ?? [];
  return (
    <Section title="Recently signed" note="The newest verdicts of independent reviewers">
      {items.length ? (
        <div className="sheet">
          {items.map((v) => (
            <div className="so" key={v.run}>
              <Seal hash={v.resultHash} size={44} lines={3} />
              <div><Link className="plain" to={paths.run(v.run)}><b>{v.solver}</b></Link><em className="mono" style={{ fontSize: 11.5 }}>{formatHash(v.resultHash, 2)}</em></div>
              <em>{v.phantom}{v.sealed ? ' (sealed)' : ''}</em>
              <div><StateMark state={v.verdict} /></div>
              <em>{v.by.handle}, {formatShortDate(v.at)}</em>
            </div>
          ))}
        </div>
      ) : recent.isPending ? <Loading label="Fetching the verdicts" /> : (
        <Empty title="No table is signed yet">A reviewer's first verdict will show here, with its seal.</Empty>
      )}
    </Section>
  );
}
