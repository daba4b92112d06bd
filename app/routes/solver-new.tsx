import '../styles/pages/phantom-new.css';
import '../styles/pages/solver-new.css';
import { useState } from 'react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useNoise } from '../components/noise-rule/use-noise';
import { ButtonLink } from '../components/ui/button';
import { PageHead } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { useToast } from '../components/ui/toast';
import { usePhantom } from '../features/phantoms/api/get-phantom';
import { useSession } from '../features/session/api/session';
import { useSolver } from '../features/solvers/api/get-solver';
import { SolverEditor } from '../features/solvers/components/solver-editor';
import { emptySolverForm, formFromConfiguration } from '../features/solvers/model/solver-form';
import { paths } from '../lib/paths';
import type { SolverDetail } from '../../shared/contracts/solvers';

/** A new configuration; `?from=slug` makes the next version, `?bench=` and `?phantom=` choose where it runs. */
export default function SolverNewRoute() {
  const [params] = useSearchParams();
  const from = params.get('from');
  const session = useSession();
  if (session.isPending) return <Shell><PageHead title="Submit a solver configuration" /><Loading label="Fetching your roles" /></Shell>;
  if (!session.account) {
    return (
      <Shell>
        <PageHead title="Submit a solver configuration" />
        <Empty title="Sign in to submit a solver">Developers and owners of a group register configurations. <ButtonLink to={paths.signIn(`${paths.solverNew()}?${params.toString()}`)} style={{ marginTop: 10 }}>Sign in</ButtonLink></Empty>
      </Shell>
    );
  }
  const groups = session.account.groups.filter((g) => session.can('solver.create', { groupId: g.id }));
  if (groups.length === 0) {
    return (
      <Shell>
        <PageHead title="Submit a solver configuration" />
        <Empty title="None of your groups lets you register solvers">A developer or an owner can. Ask the owner of your group, or <a href={paths.groups()}>create a group</a>.</Empty>
      </Shell>
    );
  }
  const common = { groups, handle: session.account.handle, bench: params.get('bench') ?? '' };
  if (from) return <NextVersion key={from} slug={from} {...common} />;
  const phantom = params.get('phantom');
  return phantom && !common.bench ? <OnPhantom key={phantom} slug={phantom} {...common} /> : <Editor solver={null} {...common} />;
}

interface Common {
  groups: readonly { slug: string; name: string }[];
  handle: string;
  bench: string;
}

function NextVersion({ slug, ...common }: Common & { slug: string }) {
  const solver = useSolver(slug);
  if (solver.isPending) return <Shell><PageHead title="New version" /><Loading label="Fetching the configuration" /></Shell>;
  if (solver.isError) return <Shell><PageHead title="New version" /><ErrorPanel error={solver.error} onRetry={() => void solver.refetch()} /></Shell>;
  if (!solver.data.may.newVersion) return <Shell><PageHead title={solver.data.name} /><Empty title="You cannot add a version here">A developer or an owner of its group can. <ButtonLink to={paths.solver(slug)}>Open the solver</ButtonLink></Empty></Shell>;
  return <Editor solver={solver.data} {...common} />;
}

/** The first bench that holds the phantom is chosen. */
function OnPhantom({ slug, ...common }: Common & { slug: string }) {
  const phantom = usePhantom(slug);
  if (phantom.isPending) return <Shell><PageHead title="Submit a solver configuration" /><Loading label="Fetching the phantom" /></Shell>;
  return <Editor solver={null} {...common} bench={phantom.data?.version.usedIn[0]?.slug ?? ''} />;
}

function Editor({ solver, groups, handle, bench }: Common & { solver: SolverDetail | null }) {
  const { noise } = useNoise();
  const navigate = useNavigate();
  const toast = useToast();
  const [initial] = useState(() => {
    const base = emptySolverForm(groups[0]?.slug ?? '', bench);
    return solver ? { ...formFromConfiguration(base, solver.current.configuration), ...solver.current.declaration, bench: bench || solver.entries[0]?.bench.slug || '' } : base;
  });
  return (
    <SolverEditor
      frame={(rule, content) => <Shell rule={rule}>{content}</Shell>}
      mode={solver ? 'next' : 'new'} solver={solver} storageKey={solver ? `next.${solver.slug}.${solver.current.n}` : `new.${bench}`} initial={initial} groups={groups} handle={handle} noise={noise}
      onDone={(result, registered) => {
        toast(!registered ? 'Draft kept.' : result.run ? `${result.solver.name} entered; its runs are queued.` : `${result.solver.name} registered.`);
        void navigate(result.run ? paths.run(result.run) : paths.solver(result.solver.slug));
      }}
    />
  );
}

function Shell({ rule = {}, children }: { rule?: { floor?: number | null; levels?: readonly number[] }; children: React.ReactNode }) {
  return <Page title="Submit a solver" rule={rule} className="page-solver-new">{children}</Page>;
}
