import '../styles/pages/account.css';
import { useQuery } from '@tanstack/react-query';
import { Link, Navigate } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useParam } from '../components/noise-rule/use-noise';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { FactList, PageHead, Section } from '../components/ui/layout';
import { TabPanel, Tabs } from '../components/ui/segmented';
import { AccountsPanel } from '../features/admin/components/accounts-panel';
import { AuditPanel } from '../features/admin/components/audit-panel';
import { OutboxPanel } from '../features/admin/components/outbox-panel';
import { useQueue } from '../features/admin/api/admin';
import { listRunsQueryOptions } from '../features/runs/api/get-run';
import { RunsInFlight } from '../features/runs/components/runs-in-flight';
import { useSession } from '../features/session/api/session';
import { paths } from '../lib/paths';

const tabs = [
  { value: 'accounts', label: 'Accounts' },
  { value: 'queue', label: 'Queue' },
  { value: 'audit', label: 'Audit trail' },
  { value: 'outbox', label: 'Outbox' },
] as const;
type Tab = (typeof tabs)[number]['value'];

export default function Admin() {
  const session = useSession();
  const [text, setText] = useParam('tab', 'accounts');
  const tab: Tab = tabs.find((t) => t.value === text)?.value ?? 'accounts';
  if (session.isPending) return <Page title="Administration"><Loading label="Asking who you are" /></Page>;
  if (!session.account) return <Navigate to={paths.signIn(paths.admin())} replace />;
  if (!session.can('site.administer')) return <Page title="Administration"><PageHead title="Administration" /><Empty title="For administrators">Your site roles do not include this. <Link to={paths.home()}>Find a method</Link> instead.</Empty></Page>;
  return (
    <Page title="Administration" className="page-admin">
      <PageHead title="Administration" lead="Site roles, the queue, the audit trail, and what the site wrote to people." />
      <Tabs id="admin" label="Parts of administration" value={tab} tabs={tabs} onChange={(value) => setText(value)} />
      <TabPanel id="admin" value={tab}>
        {tab === 'accounts' ? <AccountsPanel /> : null}
        {tab === 'queue' ? <QueuePanel /> : null}
        {tab === 'audit' ? <AuditPanel /> : null}
        {tab === 'outbox' ? <div style={{ marginTop: 16 }}><OutboxPanel /></div> : null}
      </TabPanel>
    </Page>
  );
}

function QueuePanel() {
  const queue = useQueue();
  const runs = useQuery({ ...listRunsQueryOptions({ limit: '100' }), refetchInterval: 4000 });
  const inFlight = runs.data?.items.filter((run) => run.state !== 'finished' && run.state !== 'cancelled') ?? [];
  if (queue.isPending) return <Loading label="Reading the queue" />;
  if (queue.isError) return <ErrorPanel error={queue.error} what="The queue" onRetry={() => void queue.refetch()} />;
  const { queued, running, workers, seeding, done, total } = queue.data;
  return (
    <>
      <div className="sheet pad" style={{ marginTop: 16, maxWidth: 520 }}>
        <FactList facts={[['Workers', workers], ['Runs at work', running], ['Runs waiting', queued], ['Trials done in open runs', `${done} of ${total}`], ['Demonstration data', seeding ? 'being made' : 'complete or not wanted']]} />
      </div>
      <Section title="Runs in flight" note="a box is one noise level, lowest first">
        {inFlight.length ? <RunsInFlight runs={inFlight} /> : <Empty title="Nothing waits and nothing works">An entry in a bench queues one run for each of its phantoms.</Empty>}
      </Section>
    </>
  );
}
