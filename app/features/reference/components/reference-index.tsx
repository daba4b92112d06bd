import { Link, useNavigate } from 'react-router-dom';
import { paths } from '../../../lib/paths';
import { definitionsOf, kindNames, kinds, type Catalogue, type Definition } from '../model/definitions';

/** Every definition, grouped; a list at the side, a select on narrow screens. */
export function ReferenceIndex({ catalogue, current }: { catalogue: Catalogue; current: Definition | null }) {
  const navigate = useNavigate();
  const groups = kinds.map((kind) => ({ kind, items: definitionsOf(kind, catalogue) }));
  const value = current ? `${current.kind}/${current.key}` : '';
  return (
    <>
      <div className="fld idxm">
        <label htmlFor="definition">Definition</label>
        <select className="t" id="definition" value={value} onChange={(event) => { const [kind = '', key = ''] = event.target.value.split('/'); void navigate(paths.referenceEntry(kind, key)); }}>
          {current ? null : <option value="">Choose one</option>}
          {groups.map(({ kind, items }) => <optgroup key={kind} label={kindNames[kind].many}>{items.map((d) => <option key={d.key} value={`${kind}/${d.key}`}>{d.name}</option>)}</optgroup>)}
        </select>
      </div>
      <nav className="idx" aria-label="Reference">
        {groups.map(({ kind, items }) => (
          <div key={kind}>
            <h2>{kindNames[kind].many}</h2>
            {items.map((d) => <Link key={d.key} to={paths.referenceEntry(kind, d.key)} aria-current={current?.kind === kind && current.key === d.key ? 'page' : undefined}>{d.name}</Link>)}
          </div>
        ))}
      </nav>
    </>
  );
}
