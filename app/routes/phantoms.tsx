import '../styles/pages/lists.css';
import { Page } from '../components/layout/page';
import { useParam } from '../components/noise-rule/use-noise';
import { Button, ButtonLink } from '../components/ui/button';
import { Field, Select } from '../components/ui/field';
import { PageHead } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { stateWord } from '../components/ui/state-mark';
import { usePhantoms } from '../features/phantoms/api/list-phantoms';
import { PhantomList, phantomSorts } from '../features/phantoms/components/phantom-list';
import { useSession } from '../features/session/api/session';
import { plural } from '../lib/format';
import { paths } from '../lib/paths';
import { useSettled } from '../lib/use-settled';
import { familyKeys, familyNames } from '../../shared/domain/families';
import { phantomStates } from '../../shared/domain/states';

export default function PhantomsRoute() {
  const [q, setQ] = useParam('q');
  const [family, setFamily] = useParam('family');
  const [state, setState] = useParam('state');
  const [group, setGroup] = useParam('group');
  const [sort, setSort] = useParam('sort', '-date');
  const known = phantomStates.find((s) => s === state);
  const kind = familyKeys.find((f) => f === family);
  const session = useSession();
  const list = usePhantoms({ q: useSettled(q.trim(), 250) || undefined, family: kind, state: known, group: group || undefined });
  const groups = [...new Map((list.data?.items ?? []).map((p) => [p.group.slug, p.group])).values()];
  const filtered = q !== '' || kind !== undefined || known !== undefined || group !== '';
  const clear = () => { setQ(null); setFamily(null); setState(null); setGroup(null); };
  const sorted = phantomSorts.includes(sort.replace(/^-/, '')) ? sort : '-date';
  return (
    <Page title="Phantoms" className="page-list">
      <PageHead title="Phantoms" lead="A ground truth with its acquisition geometry, simulated by an independent model. Versions never change.">
        {session.canSomewhere('phantom.create') ? <ButtonLink look="primary" to={paths.phantomNew()}>New phantom</ButtonLink> : null}
      </PageHead>
      <form className="filters" role="search" aria-label="Filter phantoms" onSubmit={(e) => e.preventDefault()}>
        <Field label="Name or identifier" type="search" maxLength={100} value={q} onChange={(e) => setQ(e.target.value)} />
        <Select label="Problem family" value={kind ?? ''} onChange={(e) => setFamily(e.target.value)}>
          <option value="">all families</option>
          {familyKeys.map((f) => <option key={f} value={f}>{familyNames[f].name}</option>)}
        </Select>
        <Select label="State" value={known ?? ''} onChange={(e) => setState(e.target.value)}>
          <option value="">any that you may read</option>
          {phantomStates.map((s) => <option key={s} value={s}>{stateWord(s).toLowerCase()}</option>)}
        </Select>
        <Select label="Group" value={group} onChange={(e) => setGroup(e.target.value)}>
          <option value="">all groups</option>
          {group && !groups.some((g) => g.slug === group) ? <option value={group}>{group}</option> : null}
          {groups.map((g) => <option key={g.slug} value={g.slug}>{g.name}</option>)}
        </Select>
        <p className="sm" aria-live="polite">{list.data ? plural(list.data.items.length, 'phantom') : ''}</p>
      </form>
      {list.isPending ? <Loading label="Fetching phantoms" disc /> : list.isError ? <ErrorPanel error={list.error} onRetry={() => void list.refetch()} /> : list.data.items.length === 0 ? (
        <Empty title={filtered ? 'No phantom fits the filter' : 'No phantom is published yet'}>{filtered ? <Button onClick={clear}>Clear the filter</Button> : 'A curator of a group makes the first.'}</Empty>
      ) : (
        <PhantomList items={list.data.items} sort={sorted} onSort={setSort} />
      )}
    </Page>
  );
}
