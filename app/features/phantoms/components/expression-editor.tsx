import { BodyImage } from '../../../components/images/body-image';
import { bodyHalfSize } from '../../../components/images/body-outline';
import { ColourBar, scaleTexts } from '../../../components/images/colour-bar';
import { Textarea } from '../../../components/ui/field';
import { FactList } from '../../../components/ui/layout';
import { parseDecimal } from '../../../lib/decimal';
import { formatNumber } from '../../../lib/format';
import { plainNumber, withUnit } from '../../../lib/problem-words';
import { familyNames } from '../../../../shared/domain/families';
import { fieldId } from '../model/field-id';
import { formBody, formElectrodes } from '../model/form-geometry';
import { truthPath } from '../model/form-issue';
import { equationInterval, equationSetting } from '../model/geometry/integral-equation';
import type { PhantomForm } from '../model/phantom-form';
import { pictureSide, steepestSlope } from '../model/truth-picture';
import type { FormPart } from './form-part';
import type { TruthPicture } from './use-truth-picture';

const upperFirst = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** What the variables are, and an example, for the form's family. */
function words(form: PhantomForm): { label: string; help: string; example: string } {
  const { valueName, valueUnit } = familyNames[form.family];
  const label = `${upperFirst(valueName)} as a function of x and y${valueUnit ? `, in ${valueUnit}` : ''}`;
  if (form.family === 'integral-equation') {
    const [from, to] = equationInterval(equationSetting(form.equation));
    return { label: 'The unknown as a function of x', help: `x runs from ${plainNumber(from)} to ${plainNumber(to)}.`, example: 'A step at 0.4: step(x - 0.4)' };
  }
  const body = formBody(form);
  const [a, b] = body ? bodyHalfSize(body) : [0, 0];
  const span = body ? (body.kind === 'rectangle' ? `x runs from −${plainNumber(a)} to ${plainNumber(a)}, y from −${plainNumber(b)} to ${plainNumber(b)}` : `x and y are in metres and run from −${plainNumber(Math.max(a, b))} to ${plainNumber(Math.max(a, b))} across the body`) : 'x and y are in metres';
  return {
    label, help: `${span}${body?.kind === 'rectangle' ? ', in metres' : ''}; r and theta are the polar coordinates.`,
    example: `A disc of ${withUnit('2', valueUnit)}: hypot(x - 0.03, y) < 0.02 ? 2 : ${form.family === 'electrical-impedance' ? '1' : '0'}`,
  };
}

/** Ground truth as a function; what cannot be read is named with its place while it is typed. */
export function ExpressionEditor({ form, change, issueAt, truth, backgroundField }: FormPart & { truth: TruthPicture; backgroundField: React.ReactNode }) {
  const [low, high] = truth.scale;
  const background = parseDecimal(form.background);
  const unit = familyNames[form.family].valueUnit;
  const line = form.family === 'integral-equation';
  const { label, help, example } = words(form);
  return (
    <div className="sheet gt">
      <div>
        <BodyImage label="Ground truth by the expression" picture={truth.picture} body={formBody(form) ?? undefined} low={low} high={high} electrodes={formElectrodes(form)} />
        {line ? null : <div style={{ marginTop: 10 }}><ColourBar labels={scaleTexts(low, high, background, unit)} /></div>}
      </div>
      <div className="gt-form">
        <Textarea
          id={fieldId(`${truthPath}.expression`)} className="code" label={label} rows={5} maxLength={500} spellCheck={false} value={form.expression}
          error={truth.error ?? issueAt(`${truthPath}.expression`)} onChange={(e) => change({ expression: e.target.value })} help={help}
        />
        <details className="helpmore">
          <summary>Known names and an example</summary>
          <p className="sm">Arithmetic with + − * / ^, comparisons and a ? b : c; the constants pi and e; abs, sqrt, exp, log, log10, sin, cos, tan, atan2, min, max, hypot, step and more. {example.split(': ')[0]}: <code className="mono">{example.slice(example.indexOf(': ') + 2)}</code></p>
        </details>
        {backgroundField}
        <FactList
          facts={[
            [line ? 'Range found' : `Range found on a ${2 * pictureSide} grid`, truth.range ? withUnit(`${formatNumber(truth.range[0], 3)} to ${formatNumber(truth.range[1], 3)}`, unit) : '–'],
            ...(line ? [] : [['Steepest slope', truth.picture ? `${withUnit(formatNumber(steepestSlope(truth.picture), 2), unit)} per ${form.family === 'deblurring' ? 'half width' : 'radius'}` : '–'] as const]),
            ['Declared targets', 'none; position error is not scored'],
          ]}
        />
      </div>
    </div>
  );
}
