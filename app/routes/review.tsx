import '../styles/pages/review.css';
import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, Navigate } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useNoise, useParam } from '../components/noise-rule/use-noise';
import { PageHead, Section } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { TabPanel, Tabs } from '../components/ui/segmented';
import { SolverGlyph } from '../components/ui/solver-glyph';
import { reviewQueueQueryOptions, type WaitingRun } from '../features/review/api/review';
import { RunLook } from '../features/review/components/run-look';
import { WaitingPhantoms } from '../features/review/components/waiting-phantoms';
import { CheckDots, Flags, readingAt, Waited, WaitingRuns } from '../features/review/components/waiting-runs';
import { listRunsQueryOptions } from '../features/runs/api/get-run';
import { RunsInFlight } from '../features/runs/components/runs-in-flight';
import { useSession } from '../features/session/api/session';
import { formatError, numberWord } from '../lib/format';
import { usePhone } from '../lib/use-media';
import { paths } from '../lib/paths';

type Tab = 'reviewer' | 'developer' | 'phantoms';

const words = (count: number, one: string, many: string): string => {
  const word = numberWord(count);
  return `${word.charAt(0).toUpperCase()}${word.slice(1)} ${count === 1 ? one : many}`;
};

export default function Review() {
  const session = useSession();
  const mayRead = session.can('review.read-queue');
  const queue = useQuery({ ...reviewQueueQueryOptions(), enabled: mayRead });
  const [text, setTab] = useParam('tab', 'reviewer');
  const tab: Tab = text === 'developer' || text === 'phantoms' ? text : 'reviewer';
  if (session.isPending) return <Page title="Review queue"><Loading label="Asking who you are" /></Page>;
  if (!session.account) return <Navigate to={paths.signIn(paths.review())} replace />;
  if (!mayRead)
    return <Page title="Review queue"><PageHead title="Review queue" /><Empty title="For reviewers">Verdicts stand on each run&apos;s page, for everybody to read. Reviewers are named by an administrator. <Link to={paths.benches()}>Open a bench</Link></Empty></Page>;
  const runs = queue.data?.runs ?? [];
  const ofTab = (key: 'reviewer' | 'developer') => runs.filter((run) => run.waitsFor === key);
  const phantoms = queue.data?.phantoms ?? [];
  return (
    <Page title="Review queue" className="page-review" rule={{ floor: runs.length ? Math.max(...runs.map((run) => run.modelErrorFloor)) : null }}>
      <PageHead title="Review queue" lead={queue.data ? `${words(ofTab('reviewer').length, 'table waits', 'tables wait')} for a reviewer. One verdict signs a table, declines it or sends it back; the figures are read either way, with the verdict beside them. Nobody reviews their own group.` : undefined} />
      {queue.isError ? <ErrorPanel error={queue.error} what="The queue" onRetry={() => void queue.refetch()} /> : null}
      {queue.isPending ? <Loading label="Reading the queue" /> : null}
      {queue.data ? (
        <>
          <Tabs
            id="review" label="What waits" value={tab} onChange={(value) => setTab(value)}
            tabs={[{ value: 'reviewer', label: 'Needs a reviewer', count: ofTab('reviewer').length }, { value: 'developer', label: 'Waiting on developer', count: ofTab('developer').length }, { value: 'phantoms', label: 'Phantoms', count: phantoms.length }]}
          />
          <TabPanel id="review" value={tab}>
            <div style={{ marginTop: 16 }}>{tab === 'phantoms' ? <WaitingPhantoms phantoms={phantoms} /> : <Runs runs={ofTab(tab)} tab={tab} key={tab} />}</div>
          </TabPanel>
          <StillRunning />
        </>
      ) : null}
    </Page>
  );
}

function Runs({ runs, tab }: { runs: readonly WaitingRun[]; tab: Tab }) {
  const { noise } = useNoise();
  const phone = usePhone();
  const [selected, setSelected] = useState<string | null>(runs[0]?.id ?? null);
  const at = Math.max(0, runs.findIndex((run) => run.id === selected));
  const run = runs[at];
  const skip = () => setSelected(runs[(at + 1) % runs.length]?.id ?? null);
  if (!run) return <Empty title={tab === 'reviewer' ? 'No table waits for a reviewer' : 'Nothing waits on a developer'}>{tab === 'reviewer' ? 'A run enters the queue when all its levels are done.' : 'A returned run stands here until its group answers.'}</Empty>;
  if (phone)
    return (
      <div className="sheet">
        {runs.map((item) => {
          const open = item.id === run.id && selected !== null;
          return (
            <div className={open ? 'mq sel' : 'mq'} key={item.id}>
              <button type="button" aria-expanded={open} onClick={() => setSelected(open ? null : item.id)}>
                <span className="dy"><Waited of={item} /></span>
                <span className="nm"><SolverGlyph index={item.glyph} size={16} />{item.solver.name}</span>
                <span className="l2 tn">{formatError(readingAt(item, noise).row?.median)}</span>
                <span className="ph2">{item.phantom.name}, <span className="mono">{item.id}</span></span>
                <span className="ck"><CheckDots run={item} /><Flags run={item} /></span>
              </button>
              {open ? <RunLook run={item} noise={noise} onSkip={skip} /> : null}
            </div>
          );
        })}
      </div>
    );
  return (
    <div className="review-two">
      <WaitingRuns runs={runs} noise={noise} selected={run.id} onSelect={setSelected} />
      <aside className="sheet peek" aria-live="polite" aria-label={`A look at ${run.id}`}><RunLook run={run} noise={noise} onSkip={skip} key={run.id} /></aside>
    </div>
  );
}

function StillRunning() {
  const runs = useQuery({ ...listRunsQueryOptions({ limit: '100' }), refetchInterval: 5000 });
  const inFlight = runs.data?.items.filter((run) => run.state === 'queued' || run.state === 'running' || run.state === 'failed') ?? [];
  if (!inFlight.length) return null;
  return <Section title="Still running" note="enter the queue when all levels are done"><RunsInFlight runs={inFlight} /></Section>;
}
