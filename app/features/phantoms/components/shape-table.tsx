import { TextButton } from '../../../components/ui/button';
import { colourAt, colourMap, cssColour } from '../../../components/images/colour-maps';
import { decimalText, parseDecimal } from '../../../lib/decimal';
import { addVertex } from '../model/shape-drag';
import { fieldLabel, fieldStep, numberKeys, type DraftShape, type NumberKey } from '../model/draft-shape';
import { fieldId } from '../model/field-id';
import { truthPath } from '../model/form-issue';
import { shapePath } from '../model/truth-request';

interface Props {
  readonly shapes: readonly DraftShape[];
  readonly selected: string | null;
  readonly range: readonly [number, number];
  /** Unit of the values; '' for pure numbers. */
  readonly unit: string;
  readonly onSelect: (id: string) => void;
  readonly onChange: (shape: DraftShape) => void;
  readonly onRemove: (id: string) => void;
  readonly issueAt: (path: string) => string | undefined;
}

const columns: readonly NumberKey[] = ['x', 'y', 'a', 'b', 'angle', 'value'];

export function swatch(shape: DraftShape, range: readonly [number, number]): string {
  const value = parseDecimal(shape.value);
  return Number.isFinite(value) ? cssColour(colourAt(colourMap('sequential', false), value, range[0], range[1])) : 'transparent';
}

/** The shapes as numbers: the same data as the disc. */
export function ShapeTable(props: Props) {
  const { shapes, selected, range, unit, onSelect, onChange, onRemove, issueAt } = props;
  const faults = shapes.flatMap((shape, i) => [...columns.map((k) => issueAt(shapePath(shape, i, k))), issueAt(`${truthPath}.shapes.${i}.label`), issueAt(`${truthPath}.shapes.${i}.vertices`)].filter((m) => m !== undefined).map((m) => `${shape.label || `Shape ${i + 1}`}: ${m}`));
  return (
    <>
      <table className="sh-t only-d">
        <caption className="vh">Shapes of the ground truth</caption>
        <thead>
          <tr>
            <th scope="col">Shape</th>
            <th scope="col" className="num">x<span>mm</span></th>
            <th scope="col" className="num">y<span>mm</span></th>
            <th scope="colgroup" className="num" colSpan={2}>half-axes<span>mm</span></th>
            <th scope="col" className="num">angle<span>°</span></th>
            <th scope="col" className="num">value{unit ? <span>{unit}</span> : null}</th>
            <th scope="col" className="num" title="Scored for position, resolution and amplitude">target</th>
            <th scope="col" style={{ width: 30 }}><span className="vh">Remove</span></th>
          </tr>
        </thead>
        <tbody>
          {shapes.map((shape, i) => (
            <tr key={shape.id} className={shape.id === selected ? 'sel' : undefined}>
              <td>
                <span className="nm">
                  <button type="button" className="swb" aria-pressed={shape.id === selected} aria-label={`Select ${shape.label}`} onClick={() => onSelect(shape.id)}><i className="sw" style={{ background: swatch(shape, range) }} /></button>
                  <input className="name" aria-label={`Name of shape ${i + 1}`} id={fieldId(`${truthPath}.shapes.${i}.label`)} value={shape.label} maxLength={60} onFocus={() => onSelect(shape.id)} onChange={(e) => onChange({ ...shape, label: e.target.value })} />
                </span>
              </td>
              {columns.map((key) => (
                <td key={key}>
                  {numberKeys(shape.kind).includes(key) ? (
                    <NumberCell shape={shape} index={i} k={key} unit={unit} onSelect={onSelect} onChange={onChange} fault={issueAt(shapePath(shape, i, key))} />
                  ) : key === 'a' && shape.kind === 'polygon' ? <span className="sm corners">{shape.vertices.length} corners</span> : null}
                </td>
              ))}
              <td className="num"><input type="checkbox" aria-label={`${shape.label} is a target`} checked={shape.target} onChange={(e) => onChange({ ...shape, target: e.target.checked })} /></td>
              <td><button type="button" className="ib rm" aria-label={`Remove ${shape.label}`} onClick={() => onRemove(shape.id)}>×</button></td>
            </tr>
          ))}
        </tbody>
      </table>
      {faults.length ? <ul className="faults" role="alert">{faults.map((f) => <li key={f}>{f}</li>)}</ul> : null}
      <Corners shape={shapes.find((s) => s.id === selected)} onChange={onChange} />
    </>
  );
}

function NumberCell({ shape, index, k, unit, fault, onSelect, onChange }: { shape: DraftShape; index: number; k: NumberKey; unit: string; fault: string | undefined; onSelect: Props['onSelect']; onChange: Props['onChange'] }) {
  return (
    <input
      id={fieldId(shapePath(shape, index, k))} inputMode="decimal" aria-label={`${shape.label}, ${fieldLabel(shape.kind, k, unit)}`} aria-invalid={fault ? true : undefined} title={fault}
      value={shape[k]}
      onFocus={(e) => { onSelect(shape.id); e.currentTarget.select(); }}
      onChange={(e) => onChange({ ...shape, [k]: e.target.value })}
      onKeyDown={(e) => {
        const direction = { ArrowUp: 1, ArrowDown: -1 }[e.key];
        const value = parseDecimal(shape[k]);
        if (direction === undefined || !Number.isFinite(value)) return;
        e.preventDefault();
        onChange({ ...shape, [k]: decimalText(Number((value + direction * fieldStep[k]).toPrecision(12))) });
      }}
    />
  );
}

/** Corners of the chosen polygon, typed relative to its centre. */
function Corners({ shape, onChange }: { shape: DraftShape | undefined; onChange: Props['onChange'] }) {
  if (!shape || shape.kind !== 'polygon') return null;
  const set = (at: number, axis: 0 | 1, text: string) =>
    onChange({ ...shape, vertices: shape.vertices.map((v, i) => (i === at ? (axis === 0 ? [text, v[1]] as const : [v[0], text] as const) : v)) });
  return (
    <details className="cornerlist">
      <summary>Corners of {shape.label}, mm from its centre</summary>
      <ol>
        {shape.vertices.map((vertex, i) => (
          <li key={i}>
            <input className="t" inputMode="decimal" aria-label={`Corner ${i + 1}, x in mm from the centre`} value={vertex[0]} onChange={(e) => set(i, 0, e.target.value)} />
            <input className="t" inputMode="decimal" aria-label={`Corner ${i + 1}, y in mm from the centre`} value={vertex[1]} onChange={(e) => set(i, 1, e.target.value)} />
            {shape.vertices.length > 3 ? <TextButton aria-label={`Remove corner ${i + 1}`} onClick={() => onChange({ ...shape, vertices: shape.vertices.filter((_, j) => j !== i) })}>remove</TextButton> : null}
          </li>
        ))}
      </ol>
      <TextButton onClick={() => onChange(addVertex(shape))}>Add a corner</TextButton>
    </details>
  );
}

/** On phones: one shape at a time, with plus and minus beside each number. */
export function ShapeSteppers({ shapes, selected, range, unit, onSelect, onChange, onRemove, issueAt }: Props) {
  const index = shapes.findIndex((s) => s.id === selected);
  const shape = shapes[index];
  return (
    <div className="only-m" style={{ padding: '0 14px' }}>
      <div className="msel" role="group" aria-label="Shape">
        {shapes.map((s) => (
          <button key={s.id} type="button" aria-pressed={s.id === selected} onClick={() => onSelect(s.id)}><i className="sw" style={{ background: swatch(s, range) }} />{s.label}</button>
        ))}
      </div>
      {shape ? (
        <>
          <div className="mf">
            {numberKeys(shape.kind).map((key) => {
              const step = (direction: number) => {
                const value = parseDecimal(shape[key]);
                if (Number.isFinite(value)) onChange({ ...shape, [key]: decimalText(Number((value + direction * fieldStep[key]).toPrecision(12))) });
              };
              const fault = issueAt(shapePath(shape, index, key));
              return (
                <div className={fault ? 'fld err' : 'fld'} key={key}>
                  <label htmlFor={`m-${key}`}>{fieldLabel(shape.kind, key, unit)}</label>
                  <div className="stp">
                    <button type="button" aria-label={`${fieldLabel(shape.kind, key, unit)}: less`} onClick={() => step(-1)}>−</button>
                    <input className="t" id={`m-${key}`} inputMode="decimal" aria-invalid={fault ? true : undefined} value={shape[key]} onChange={(e) => onChange({ ...shape, [key]: e.target.value })} />
                    <button type="button" aria-label={`${fieldLabel(shape.kind, key, unit)}: more`} onClick={() => step(1)}>+</button>
                  </div>
                  {fault ? <span className="help">{fault}</span> : null}
                </div>
              );
            })}
          </div>
          <div className="mrow">
            <label><input type="checkbox" checked={shape.target} onChange={(e) => onChange({ ...shape, target: e.target.checked })} /> scored as a target</label>
            <TextButton onClick={() => onRemove(shape.id)}>Remove {shape.label}</TextButton>
          </div>
        </>
      ) : null}
    </div>
  );
}
