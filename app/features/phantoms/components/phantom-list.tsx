import { Link } from 'react-router-dom';
import { DataTable, type DataColumn } from '../../../components/table/data-table';
import { StateMark } from '../../../components/ui/state-mark';
import { formatCount, formatShortDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { PhantomSummary } from '../../../../shared/contracts/phantoms';
import { familyNames } from '../../../../shared/domain/families';
import { TruthThumbnail } from './truth-thumbnail';

const columns: readonly DataColumn<PhantomSummary>[] = [
  { key: 'truth', head: <span className="vh">Truth</span>, width: 64, cell: (p) => <TruthThumbnail slug={p.slug} version={p.current.n} sealed={p.current.sealed} label={`Truth of ${p.name}`} /> },
  { key: 'name', head: 'Phantom', sortBy: (p) => p.name.toLowerCase(), cell: (p) => <span className="nm2"><Link to={paths.phantom(p.slug)}>{p.name}</Link><em><span className="mono">{p.id}</span>, version {p.current.n}</em></span> },
  { key: 'line', head: 'Problem', sortBy: (p) => `${familyNames[p.family].name} ${p.line}`, cell: (p) => <span className="nm2 pl">{familyNames[p.family].name}<em>{p.line}</em></span> },
  { key: 'group', head: 'Group', sortBy: (p) => p.group.name.toLowerCase(), cell: (p) => <Link to={paths.group(p.group.slug)}>{p.group.name}</Link> },
  { key: 'runs', head: 'Runs', numeric: true, sortBy: (p) => p.current.runs, cell: (p) => formatCount(p.current.runs) },
  { key: 'date', head: 'Published', numeric: true, sortBy: (p) => p.current.publishedAt ?? p.current.createdAt, cell: (p) => formatShortDate(p.current.publishedAt ?? p.current.createdAt) },
  { key: 'state', head: 'State', sortBy: (p) => p.current.state, cell: (p) => (p.current.sealed && p.current.state === 'published' ? <StateMark state="sealed" word={p.current.sealedUntil ? `Sealed until ${formatShortDate(`${p.current.sealedUntil}T12:00:00Z`)}` : undefined} /> : <StateMark state={p.current.state} />) },
];

export const phantomSorts = columns.filter((c) => c.sortBy).map((c) => c.key);

/** `sort` is a column's key, with a minus in front for the other way round. */
export function PhantomList({ items, sort, onSort }: { items: readonly PhantomSummary[]; sort: string; onSort: (sort: string) => void }) {
  return (
    <div className="sheet listtable">
      <DataTable caption="Phantoms" columns={columns} rows={items} rowKey={(p) => p.id} initialSort={{ key: sort.replace(/^-/, ''), descending: sort.startsWith('-') }} onSort={(s) => onSort(s ? `${s.descending ? '-' : ''}${s.key}` : '')} />
    </div>
  );
}
