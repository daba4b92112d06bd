import { Select } from '../../../components/ui/field';
import { FormSection } from '../../../components/ui/layout';
import { formatCount, plural } from '../../../lib/format';
import { familyNames } from '../../../../shared/domain/families';
import { valuesPerFrame } from '../model/form-geometry';
import { eitFrameFacts } from '../model/geometry/electrical-impedance';
import type { PhantomForm } from '../model/phantom-form';
import { DeblurringFields } from './deblurring-fields';
import { EitFields } from './eit-fields';
import { EquationFields } from './equation-fields';
import type { FormPart } from './form-part';
import { XrayFields } from './xray-fields';

const fieldsOf = { 'electrical-impedance': EitFields, 'x-ray': XrayFields, 'integral-equation': EquationFields, deblurring: DeblurringFields } as const;
const titles = { 'electrical-impedance': 'Geometry', 'x-ray': 'Geometry', 'integral-equation': 'Equation', deblurring: 'Picture and blur' } as const;

function fact(form: PhantomForm): string {
  const values = valuesPerFrame(form);
  if (!Number.isFinite(values)) return '';
  const count = `${formatCount(values)} values per frame`;
  if (form.family !== 'electrical-impedance') return form.family === 'x-ray' ? `${formatCount(values)} rays` : count;
  const { independent } = eitFrameFacts(form.eit);
  return independent === null ? count : `${count}, ${formatCount(independent)} of them independent by reciprocity`;
}

/** Acquisition of the chosen family, and which shapes are scored as targets. */
export function GeometrySection(props: FormPart) {
  const { form, change } = props;
  const Fields = fieldsOf[form.family];
  const targets = form.shapes.every((s) => s.target) ? 'all' : form.shapes.some((s) => s.target) ? 'chosen' : 'none';
  const marked = form.shapes.filter((s) => s.target).length;
  return (
    <FormSection title={titles[form.family]} fact={fact(form)} id="geometry">
      <div className="g3">
        <Fields {...props} />
        {form.family === 'electrical-impedance' ? null : (
          <Select label="Noise is relative to" value="data" disabled help={`The norm of the ${familyNames[form.family].dataName}; said beside every noise reading.`}>
            <option value="data">the data</option>
          </Select>
        )}
        {form.family === 'integral-equation' ? null : form.truthKind === 'shapes' ? (
          <Select
            label="Targets" value={targets} help={marked ? `${plural(marked, 'shape')} scored for position, resolution and amplitude.` : 'Needed for position, resolution and amplitude.'}
            onChange={(e) => change({ shapes: form.shapes.map((s, i) => ({ ...s, target: e.target.value === 'all' ? true : e.target.value === 'none' ? false : i === 0 ? true : s.target && form.shapes.some((o) => !o.target) })) })}
          >
            <option value="all">every shape above</option>
            <option value="chosen">the shapes ticked above</option>
            <option value="none">none</option>
          </Select>
        ) : (
          <Select label="Targets" value="none" disabled help="Only shapes declare targets; position error is not scored here.">
            <option value="none">none</option>
          </Select>
        )}
      </div>
    </FormSection>
  );
}
