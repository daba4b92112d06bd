import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { familyNames } from '../../shared/domain/families';
import { Page } from '../components/layout/page';
import { useNoise, useParam } from '../components/noise-rule/use-noise';
import { DataTable, type DataColumn } from '../components/table/data-table';
import { ButtonLink } from '../components/ui/button';
import { PageHead, Section } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { Segmented } from '../components/ui/segmented';
import { StateMark } from '../components/ui/state-mark';
import type { BenchSummary } from '../../shared/contracts/benches';
import { listBenchesQueryOptions } from '../features/benches/api/get-bench';
import { BenchTile } from '../features/benches/components/bench-tile';
import { useSession } from '../features/session/api/session';
import { axisFact } from '../lib/axis-words';
import { formatDate } from '../lib/format';
import { paths } from '../lib/paths';
import { useNarrow } from '../lib/use-media';
import '../styles/pages/benches.css';

type View = 'all' | 'open' | 'closed' | 'draft';

export default function Benches() {
  const { noise } = useNoise();
  const narrow = useNarrow();
  const session = useSession();
  const [view, setView] = useParam('state', 'all');
  const benches = useQuery(listBenchesQueryOptions());
  const all = benches.data?.items ?? [];
  const views: readonly { value: View; label: string }[] = [
    { value: 'all', label: 'All' }, { value: 'open', label: 'Open' }, { value: 'closed', label: 'Closed' },
    ...(all.some((b) => b.state === 'draft') ? [{ value: 'draft' as const, label: 'Drafts' }] : []),
  ];
  const shown = view === 'all' ? all : all.filter((b) => b.state === view);
  const charted = shown.filter((b) => b.state !== 'draft' && b.entryCount > 0);
  return (
    <Page title="Benches" className="page-benches" rule={{}}>
      <PageHead title="Benches" lead="A bench is a fixed question: phantom versions, a noise ladder, draws per level, a seed and the metric that ranks.">
        <Segmented label="State" value={view as View} choices={views} onChange={(v) => setView(v)} />
        {session.canSomewhere('bench.create') ? <ButtonLink to={paths.benchNew()}>New bench</ButtonLink> : null}
      </PageHead>
      {benches.isPending ? <Loading label="Fetching the benches" /> : benches.isError ? <ErrorPanel error={benches.error} what="The benches" onRetry={() => void benches.refetch()} /> : shown.length === 0 ? (
        <Empty title={view === 'all' ? 'No bench yet' : `No ${view} bench`}>A curator makes one from published phantom versions. <Link to={paths.phantoms()}>See the phantoms</Link></Empty>
      ) : (
        <>
          {charted.length ? <><h2 className="vh">Curves at the cursor</h2><div className="grid4" style={{ '--tiles': Math.min(4, Math.max(2, charted.length)) }}>{charted.map((b) => <BenchTile key={b.slug} bench={b} noise={noise} height={narrow ? 110 : 140} />)}</div></> : null}
          <Section title="All figures" note="Newest first; the heads sort">
            <div className="sheet"><DataTable caption="Benches" columns={columns} rows={shown} rowKey={(b) => b.slug} className="bt" /></div>
          </Section>
        </>
      )}
    </Page>
  );
}

const columns: readonly DataColumn<BenchSummary>[] = [
  { key: 'title', head: 'Bench', unit: 'and its question', sortBy: (b) => b.title, className: 'first', cell: (b) => <><Link to={paths.bench(b.slug)}>{b.title}</Link> <span className="mono sm">{b.id}</span><em>{b.question}</em></> },
  { key: 'family', head: 'Problem family', sortBy: (b) => familyNames[b.family].name, cell: (b) => <>{familyNames[b.family].name}{axisFact(b.axis) ? <span className="sm" style={{ display: 'block' }}>{axisFact(b.axis)}</span> : null}</> },
  { key: 'group', head: 'Group', sortBy: (b) => b.group.name, cell: (b) => <Link to={paths.group(b.group.slug)}>{b.group.name}</Link> },
  { key: 'phantoms', head: 'Phantoms', numeric: true, sortBy: (b) => b.phantomCount, cell: (b) => b.phantomCount },
  { key: 'entries', head: 'Solvers', unit: 'entered', numeric: true, sortBy: (b) => b.entryCount, cell: (b) => b.entryCount },
  { key: 'runs', head: 'Runs', unit: 'finished', numeric: true, sortBy: (b) => b.runsFinished, cell: (b) => `${b.runsFinished} of ${b.runsTotal}` },
  { key: 'state', head: 'State', sortBy: (b) => b.state, cell: (b) => <StateMark state={b.state} /> },
  { key: 'date', head: 'Opened', numeric: true, sortBy: (b) => b.createdAt, cell: (b) => formatDate(b.createdAt) },
];
