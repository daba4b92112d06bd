import { useState } from 'react';
import { Segmented } from '../../../components/ui/segmented';
import { Field, Select } from '../../../components/ui/field';
import { parseDecimal } from '../../../lib/decimal';
import { familyNames } from '../../../../shared/domain/families';
import { fieldId } from '../model/field-id';
import { truthKinds, type TruthKind } from '../model/form-drafts';
import { formBody, formElectrodes } from '../model/form-geometry';
import { truthPath } from '../model/form-issue';
import type { DraftShape } from '../model/draft-shape';
import { ExpressionEditor } from './expression-editor';
import { FileEditor } from './file-editor';
import type { FormPart } from './form-part';
import { ShapeEditor } from './shape-editor';
import { StandardTruth } from './standard-truth';
import type { TruthPicture } from './use-truth-picture';

const kindNames: Record<TruthKind, string> = { shapes: 'Shapes', expression: 'Expression', array: 'File', standard: 'Published solution' };

export function TruthSection(props: FormPart & { truth: TruthPicture }) {
  const { form, change, issueAt, truth } = props;
  const [selected, setSelected] = useState<string | null>(form.shapes[0]?.id ?? null);
  const unit = familyNames[form.family].valueUnit;
  const backgroundField = (
    <Field id={fieldId(`${truthPath}.background`)} label="Background" unit={unit || undefined} inputMode="decimal" value={form.background} error={issueAt(`${truthPath}.background`)} help="The trivial answer: this value everywhere." onChange={(e) => change({ background: e.target.value })} />
  );
  const onShapes = (update: (shapes: readonly DraftShape[]) => DraftShape[]) => change((old) => ({ shapes: update(old.shapes) }));
  const adds = form.family !== 'electrical-impedance' && form.combine === 'add';
  const shapeFields = form.family === 'electrical-impedance' ? backgroundField : (
    <>
      {backgroundField}
      <Select label="Where shapes overlap" value={form.combine} help="Tables of ellipses are printed as values to add." onChange={(e) => change({ combine: e.target.value === 'add' ? 'add' : 'replace' })}>
        <option value="replace">the later one replaces</option>
        <option value="add">their values add</option>
      </Select>
    </>
  );
  return (
    <section className="fs" id="truth">
      <header>
        <h2>Ground truth</h2>
        <Segmented label="How the ground truth is given" value={form.truthKind} choices={truthKinds[form.family].map((value) => ({ value, label: kindNames[value] }))} onChange={(truthKind) => change({ truthKind })} />
      </header>
      {form.truthKind === 'shapes' ? (
        <ShapeEditor
          shapes={form.shapes} onShapes={onShapes} selected={form.shapes.some((s) => s.id === selected) ? selected : (form.shapes[0]?.id ?? null)} onSelect={setSelected}
          body={formBody(form)} unit={unit} background={parseDecimal(form.background)} electrodes={formElectrodes(form)} truth={truth} issueAt={issueAt} backgroundField={shapeFields}
          order={adds ? 'The values of shapes that overlap add.' : 'Later rows lie on top.'}
        />
      ) : form.truthKind === 'expression' ? (
        <ExpressionEditor {...props} backgroundField={backgroundField} />
      ) : form.truthKind === 'standard' ? (
        <StandardTruth {...props} backgroundField={backgroundField} />
      ) : (
        <FileEditor {...props} backgroundField={backgroundField} />
      )}
    </section>
  );
}
