import { useState } from 'react';
import { Segmented } from '../../../components/ui/segmented';
import { Field } from '../../../components/ui/field';
import { parseDecimal } from '../../../lib/decimal';
import { fieldId } from '../model/field-id';
import { truthPath } from '../model/form-request';
import type { DraftShape } from '../model/draft-shape';
import { ExpressionEditor } from './expression-editor';
import { FileEditor } from './file-editor';
import type { FormPart } from './form-part';
import { layoutOf, ShapeEditor } from './shape-editor';
import type { TruthPicture } from './use-truth-picture';

const kinds = [{ value: 'shapes', label: 'Shapes' }, { value: 'expression', label: 'Expression' }, { value: 'array', label: 'File' }] as const;

export function TruthSection(props: FormPart & { truth: TruthPicture }) {
  const { form, change, issueAt, truth } = props;
  const [selected, setSelected] = useState<string | null>(form.shapes[0]?.id ?? null);
  const backgroundField = (
    <Field id={fieldId(`${truthPath}.background`)} label="Background" unit="S/m" inputMode="decimal" value={form.background} error={issueAt(`${truthPath}.background`)} help="The trivial answer: this value everywhere." onChange={(e) => change({ background: e.target.value })} />
  );
  const onShapes = (update: (shapes: readonly DraftShape[]) => DraftShape[]) => change((old) => ({ shapes: update(old.shapes) }));
  return (
    <section className="fs" id="truth">
      <header>
        <h2>Ground truth</h2>
        <Segmented label="How the ground truth is given" value={form.truthKind} choices={kinds} onChange={(truthKind) => change({ truthKind })} />
      </header>
      {form.truthKind === 'shapes' ? (
        <ShapeEditor shapes={form.shapes} onShapes={onShapes} selected={form.shapes.some((s) => s.id === selected) ? selected : (form.shapes[0]?.id ?? null)} onSelect={setSelected} radiusMm={parseDecimal(form.radius)} background={parseDecimal(form.background)} electrodes={layoutOf(form)} truth={truth} issueAt={issueAt} backgroundField={backgroundField} />
      ) : form.truthKind === 'expression' ? (
        <ExpressionEditor {...props} backgroundField={backgroundField} />
      ) : (
        <FileEditor {...props} backgroundField={backgroundField} />
      )}
    </section>
  );
}
