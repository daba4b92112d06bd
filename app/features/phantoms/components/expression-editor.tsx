import { ColourBar } from '../../../components/images/colour-bar';
import { DiscImage } from '../../../components/images/disc-image';
import { Textarea } from '../../../components/ui/field';
import { FactList } from '../../../components/ui/layout';
import { parseDecimal } from '../../../lib/decimal';
import { formatNumber } from '../../../lib/format';
import { fieldId } from '../model/field-id';
import { truthPath } from '../model/form-request';
import { pictureSide, steepestSlope } from '../model/truth-picture';
import type { FormPart } from './form-part';
import { layoutOf } from './shape-editor';
import type { TruthPicture } from './use-truth-picture';

/** Ground truth as a function of x and y; what cannot be read is named with its place while it is typed. */
export function ExpressionEditor({ form, change, issueAt, truth, backgroundField }: FormPart & { truth: TruthPicture; backgroundField: React.ReactNode }) {
  const [low, high] = truth.scale;
  const edge = formatNumber(parseDecimal(form.radius) / 1000, 3);
  const background = parseDecimal(form.background);
  return (
    <div className="sheet gt">
      <div>
        <DiscImage label="Ground truth by the expression" picture={truth.picture} low={low} high={high} electrodes={layoutOf(form)} />
        <div style={{ marginTop: 10 }}><ColourBar labels={[formatNumber(low, 2), `${formatNumber(background, 2)} background`, `${formatNumber(high, 2)} S/m`]} /></div>
      </div>
      <div className="gt-form">
        <Textarea
          id={fieldId(`${truthPath}.expression`)} className="code" label="Conductivity as a function of x and y, in S/m" rows={5} maxLength={500} spellCheck={false} value={form.expression}
          error={truth.error ?? issueAt(`${truthPath}.expression`)} onChange={(e) => change({ expression: e.target.value })}
          help={`x and y are in metres and run from −${edge} to ${edge} across the body; r and theta are the polar coordinates.`}
        />
        <details className="helpmore">
          <summary>Known names and an example</summary>
          <p className="sm">Arithmetic with + − * / ^, comparisons and a ? b : c; the constants pi and e; abs, sqrt, exp, log, log10, sin, cos, tan, atan2, min, max, hypot, step and more. A disc of 2 S/m: <code className="mono">hypot(x - 0.03, y) &lt; 0.02 ? 2 : 1</code></p>
        </details>
        {backgroundField}
        <FactList
          facts={[
            [`Range found on a ${2 * pictureSide} grid`, truth.range ? `${formatNumber(truth.range[0], 3)} to ${formatNumber(truth.range[1], 3)} S/m` : '–'],
            ['Steepest slope', truth.picture ? `${formatNumber(steepestSlope(truth.picture), 2)} S/m per radius` : '–'],
            ['Declared targets', 'none; position error is not scored'],
          ]}
        />
      </div>
    </div>
  );
}
