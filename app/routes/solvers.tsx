import '../styles/pages/lists.css';
import { Page } from '../components/layout/page';
import { useParam } from '../components/noise-rule/use-noise';
import { Button, ButtonLink } from '../components/ui/button';
import { Field, Select } from '../components/ui/field';
import { PageHead } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { useSession } from '../features/session/api/session';
import { useSolvers } from '../features/solvers/api/get-solver';
import { SolverList, solverSorts } from '../features/solvers/components/solver-list';
import { plural } from '../lib/format';
import { paths } from '../lib/paths';
import { useSettled } from '../lib/use-settled';
import { methods } from '../../solvers/methods/registry';

export default function SolversRoute() {
  const [q, setQ] = useParam('q');
  const [method, setMethod] = useParam('method');
  const [group, setGroup] = useParam('group');
  const [sort, setSort] = useParam('sort', '-date');
  const known = methods.find((m) => m.key === method);
  const session = useSession();
  const list = useSolvers({ q: useSettled(q.trim(), 250) || undefined, method: known?.key, group: group || undefined });
  const groups = [...new Map((list.data?.items ?? []).map((s) => [s.group.slug, s.group])).values()];
  const filtered = q !== '' || known !== undefined || group !== '';
  const clear = () => { setQ(null); setMethod(null); setGroup(null); };
  const sorted = solverSorts.includes(sort.replace(/^-/, '')) ? sort : '-date';
  return (
    <Page title="Solvers" className="page-list">
      <PageHead title="Solvers" lead="A method with its parameters and the rule that chooses its regularisation. Versions never change.">
        {session.canSomewhere('solver.create') ? <ButtonLink look="primary" to={paths.solverNew()}>Submit a solver</ButtonLink> : null}
      </PageHead>
      <form className="filters" role="search" aria-label="Filter solvers" onSubmit={(e) => e.preventDefault()}>
        <Field label="Name or identifier" type="search" maxLength={100} value={q} onChange={(e) => setQ(e.target.value)} />
        <Select label="Method" value={known?.key ?? ''} onChange={(e) => setMethod(e.target.value)}>
          <option value="">all methods</option>
          {methods.map((m) => <option key={m.key} value={m.key}>{m.name}</option>)}
        </Select>
        <Select label="Group" value={group} onChange={(e) => setGroup(e.target.value)}>
          <option value="">all groups</option>
          {group && !groups.some((g) => g.slug === group) ? <option value={group}>{group}</option> : null}
          {groups.map((g) => <option key={g.slug} value={g.slug}>{g.name}</option>)}
        </Select>
        <p className="sm" aria-live="polite">{list.data ? plural(list.data.items.length, 'solver') : ''}</p>
      </form>
      {list.isPending ? <Loading label="Fetching solvers" /> : list.isError ? <ErrorPanel error={list.error} onRetry={() => void list.refetch()} /> : list.data.items.length === 0 ? (
        <Empty title={filtered ? 'No solver fits the filter' : 'No solver is registered yet'}>{filtered ? <Button onClick={clear}>Clear the filter</Button> : 'A developer of a group registers the first.'}</Empty>
      ) : (
        <SolverList items={list.data.items} sort={sorted} onSort={setSort} />
      )}
    </Page>
  );
}
