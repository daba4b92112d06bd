import { FactList, Section } from '../../../components/ui/layout';
import { Formula } from '../../../components/ui/formula';
import { formatNumber } from '../../../lib/format';
import type { Definition } from '../model/definitions';

/** Formula, one sentence, parameters with unit and range, numbered notes. */
export function DefinitionBody({ definition: d }: { definition: Definition }) {
  return (
    <section className="sheet def" tabIndex={0} role="region" aria-label="Definition, scrolls sideways">
      {d.formula ? <Formula tex={d.formula} label={`Formula of ${d.name}`} /> : null}
      <p>{d.summary}</p>
    </section>
  );
}

export function DefinitionFields({ definition: d }: { definition: Definition }) {
  if (!d.fields.length) return null;
  const number = (value: number | null): string => (value === null ? '' : formatNumber(value, 3));
  return (
    <Section title="Parameters" note="the form, the interface and the worker read this one list">
      <div className="sheet" style={{ overflowX: 'auto' }} tabIndex={0} role="region" aria-label="Parameters, scrolls sideways">
        <table className="op-fields wide">
          <thead><tr><th scope="col">Name</th><th scope="col">Unit</th><th scope="col" className="num">Default</th><th scope="col">Allowed</th><th scope="col">Meaning</th></tr></thead>
          <tbody>
            {d.fields.map((field) => (
              <tr key={field.name}>
                <th scope="row">{field.label} <span className="mono sm">{field.name}</span></th>
                <td>{field.unit || 'none'}</td>
                <td className="num">{typeof field.default === 'number' ? formatNumber(field.default, 3) : field.default}</td>
                <td>{field.kind === 'choice' ? field.choices.map((c) => c.label).join(', ') : field.kind === 'text' ? 'a formula of at most 60 characters' : `${number(field.minimum)} to ${number(field.maximum)}${field.kind === 'integer' ? ', whole' : ''}${field.scale === 'log' ? ', log scale' : ''}`}</td>
                <td>{field.help}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </Section>
  );
}

const capitalised = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

export function DefinitionNotes({ definition: d }: { definition: Definition }) {
  if (!d.notes.items.length) return null;
  return (
    <Section title={d.notes.title} note={d.notes.title === 'Traps' ? 'where two figures under one name differ' : 'what sources leave open, settled here'}>
      <div className="sheet">
        {d.notes.items.map((item, i) => {
          const [head, ...rest] = item.split(': ');
          return <div className="trap" key={item}><i aria-hidden="true">{i + 1}</i>{rest.length ? <><b>{head}</b><p>{capitalised(rest.join(': '))}</p></> : <p>{item}</p>}</div>;
        })}
      </div>
    </Section>
  );
}

export function DefinitionAside({ definition: d }: { definition: Definition }) {
  return (
    <aside>
      <div className="sheet pad"><FactList facts={d.facts} /></div>
      {d.sources.length > 0 ? <div className="sh" style={{ marginTop: 24 }}><h3>{d.sources.length === 1 ? 'Source' : 'Sources'}</h3></div> : null}
      {d.sources.map((source) => <p className="sm src" key={source.full}><b>{source.short}.</b> {source.full}{source.fromMemory ? ' (Reference written from memory.)' : ''}</p>)}
    </aside>
  );
}
