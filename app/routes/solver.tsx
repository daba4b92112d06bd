import '../styles/pages/solver-new.css';
import '../styles/pages/solver.css';
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useNoise, useParam } from '../components/noise-rule/use-noise';
import { Box } from '../components/ui/box';
import { ButtonLink } from '../components/ui/button';
import { PageHead, Section } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { StateMark } from '../components/ui/state-mark';
import { useSolver, useStability } from '../features/solvers/api/get-solver';
import { FailedSection } from '../features/solvers/components/failed-section';
import { SensitivitySection } from '../features/solvers/components/sensitivity-section';
import { SolverActions } from '../features/solvers/components/solver-actions';
import { SolverEntries, SolverVersions } from '../features/solvers/components/solver-tables';
import { SolverTop } from '../features/solvers/components/solver-top';
import { StabilitySection } from '../features/solvers/components/stability-section';
import { TryHere } from '../features/solvers/components/try-here';
import { nearestIndex } from '../features/solvers/model/preview-data';
import { isApiError } from '../lib/api-client';
import { axisView } from '../lib/axis-words';
import { plural } from '../lib/format';
import { paths } from '../lib/paths';
import { useSettled } from '../lib/use-settled';
import type { SolverDetail } from '../../shared/contracts/solvers';

export default function SolverRoute() {
  const { slug = '' } = useParams();
  const solver = useSolver(slug);
  if (solver.isPending) return <Page title="Solver" rule={{}} className="page-solver"><PageHead title="Solver" /><Loading label="Fetching the configuration" /></Page>;
  if (solver.isError) {
    const missing = isApiError(solver.error) && solver.error.status === 404;
    return (
      <Page title="Solver" className="page-solver">
        <PageHead title={missing ? 'No such solver' : 'Solver'} />
        {missing ? <Empty title={`Nothing is registered as ${slug}`}>It may be a draft of a group you are not in. <ButtonLink to={paths.solvers()} style={{ marginTop: 8 }}>All solvers</ButtonLink></Empty> : <ErrorPanel error={solver.error} onRetry={() => void solver.refetch()} />}
      </Page>
    );
  }
  return <SolverPage key={slug} solver={solver.data} />;
}

function SolverPage({ solver }: { solver: SolverDetail }) {
  const { noise } = useNoise();
  const settled = useSettled(noise);
  const [v, setV] = useParam('v');
  const [phantomSlug, setPhantom] = useParam('phantom');
  const [trying, setTrying] = useState(false);
  const version = solver.versions.find((x) => String(x.n) === v) ?? solver.versions.find((x) => x.n === solver.current.n) ?? solver.current;
  const stability = useStability(solver.slug, version.n);
  const items = stability.data?.items ?? [];
  // One phantom may be in several benches: the address names the run, or the phantom.
  const chosen = items.find((i) => i.run === phantomSlug) ?? items.find((i) => i.phantom.slug === phantomSlug) ?? items[0];
  const levels = chosen?.levels.map((l) => l.level) ?? [];
  const level = nearestIndex(levels, settled);
  const state = version.state === 'registered' ? <StateMark state={version.signedOff ? 'signed-off' : 'registered'} word={`Registered, ${version.signedOff ? `${plural(version.signedOff, 'run')} signed off` : plural(version.runs, 'run')}`} /> : <StateMark state={version.state} />;
  return (
    <Page
      title={`${solver.id} ${solver.name}`} className="page-solver" axis={chosen?.axis}
      rule={{ levels: levels.length ? levels : undefined, draws: chosen?.levels[0]?.draws.length, floor: chosen?.modelErrorFloor ?? null, focus: chosen?.sheet.breakdown ? { glyph: solver.glyph, breakdown: chosen.sheet.breakdown.value } : null }}
    >
      <PageHead crumbs={<><span>Solver configuration <span className="mono">{solver.id}</span>, version {version.n}</span><span>{solver.group.name}</span>{state}</>} title={solver.name}>
        <SolverActions solver={solver} version={version} runs={items.map((i) => i.run)} onTry={() => setTrying(!trying)} />
      </PageHead>
      {version.state === 'withdrawn' ? <Box tone="plain" state="withdrawn" title="This version is withdrawn" className="notice"><p>{version.withdrawnReason ?? 'No reason is kept.'} What was ranked stays ranked.</p></Box> : null}
      {version.state === 'draft' ? <Box tone="plain" state="draft" title="This is a draft; only the group sees it" className="notice"><p>Register it to enter it in benches. A registered version never changes.</p></Box> : null}
      <SolverTop solver={solver} version={version} stability={stability.data} />
      {trying ? <TryHere items={items.filter((i) => i.axis.key === 'noise')} configuration={version.configuration} noise={axisView(chosen?.axis).noiseAt(settled)} onClose={() => setTrying(false)} /> : null}
      <Section title="Stability sheet" note={`relative L2, medians ${chosen ? `of ${chosen.levels[0]?.draws.length ?? 0} draws` : 'over draws'}; intervals are 90 % over draws`}>
        {stability.isPending ? <Loading label="Fetching the finished runs" /> : stability.isError ? <ErrorPanel error={stability.error} onRetry={() => void stability.refetch()} /> : chosen ? (
          <StabilitySection items={items} chosen={chosen} onChoose={setPhantom} noise={noise} glyph={solver.glyph} />
        ) : <Empty title="No finished run yet">The sheet appears when a run of this version ends.{solver.may.enter ? ' Enter it in a bench to start.' : ''}</Empty>}
      </Section>
      {chosen ? <SensitivitySection item={chosen} level={level} levelNoise={levels[level] ?? settled} /> : null}
      {items.length ? <FailedSection items={items} configuration={version.configuration} /> : null}
      <div className="sec sv-low">
        <SolverVersions solver={solver} chosen={version.n} noise={axisView(chosen?.axis).noiseAt(settled)} onChoose={(n) => { setV(n === solver.current.n ? null : String(n)); window.scrollTo(0, 0); }} />
        <SolverEntries solver={solver} noise={axisView(chosen?.axis).noiseAt(settled)} />
      </div>
    </Page>
  );
}
