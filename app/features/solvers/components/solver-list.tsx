import { Link } from 'react-router-dom';
import { DataTable, type DataColumn } from '../../../components/table/data-table';
import { Seal } from '../../../components/ui/seal';
import { StateMark } from '../../../components/ui/state-mark';
import { formatCount, formatShortDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { SolverSummary } from '../../../../shared/contracts/solvers';
import { ruleWords } from '../model/parameter-facts';

const columns: readonly DataColumn<SolverSummary>[] = [
  { key: 'seal', head: <span className="vh">Seal</span>, width: 64, cell: (s) => <Seal hash={s.current.contentHash} size={40} lines={4} /> },
  { key: 'name', head: 'Solver', sortBy: (s) => s.name.toLowerCase(), cell: (s) => <span className="nm2"><Link to={paths.solver(s.slug)}>{s.name}</Link><em><span className="mono">{s.id}</span>, version {s.current.n}</em></span> },
  { key: 'method', head: 'Method and rule', sortBy: (s) => s.methodName.toLowerCase(), cell: (s) => <span>{s.methodName}<span className="sm" style={{ display: 'block' }}>{ruleWords(s.current.configuration.rule)}</span></span> },
  { key: 'group', head: 'Group', sortBy: (s) => s.group.name.toLowerCase(), cell: (s) => <Link to={paths.group(s.group.slug)}>{s.group.name}</Link> },
  { key: 'runs', head: 'Runs', numeric: true, sortBy: (s) => s.current.runs, cell: (s) => formatCount(s.current.runs) },
  { key: 'date', head: 'Registered', numeric: true, sortBy: (s) => s.current.registeredAt ?? s.current.createdAt, cell: (s) => formatShortDate(s.current.registeredAt ?? s.current.createdAt) },
  {
    key: 'state', head: 'State', sortBy: (s) => s.current.state,
    cell: (s) => (s.current.state === 'registered' && s.current.signedOff ? <StateMark state="signed-off" word={`${s.current.signedOff} of ${s.current.runs} signed off`} /> : <StateMark state={s.current.state} />),
  },
];

export const solverSorts = columns.filter((c) => c.sortBy).map((c) => c.key);

/** `sort` is a column's key, with a minus in front for the other way round. */
export function SolverList({ items, sort, onSort }: { items: readonly SolverSummary[]; sort: string; onSort: (sort: string) => void }) {
  return (
    <div className="sheet listtable">
      <DataTable caption="Solver configurations" columns={columns} rows={items} rowKey={(s) => s.id} initialSort={{ key: sort.replace(/^-/, ''), descending: sort.startsWith('-') }} onSort={(s) => onSort(s ? `${s.descending ? '-' : ''}${s.key}` : '')} />
    </div>
  );
}
