import { ColourBar, scaleTexts } from '../../../components/images/colour-bar';
import { BodyImage } from '../../../components/images/body-image';
import { Field } from '../../../components/ui/field';
import { StateShape } from '../../../components/ui/state-mark';
import { decimalText, parseDecimal } from '../../../lib/decimal';
import { formatBytes, formatHash, formatNumber } from '../../../lib/format';
import { useUploadArray } from '../api/upload-files';
import { fieldId } from '../model/field-id';
import { bodyHalfSize } from '../../../components/images/body-outline';
import { familyNames } from '../../../../shared/domain/families';
import { withUnit } from '../../../lib/problem-words';
import type { RoundOrRectangle } from '../model/draft-shape';
import { formBody, formElectrodes } from '../model/form-geometry';
import { truthPath } from '../model/form-issue';
import type { FormPart } from './form-part';
import { UploadFault } from './frames-section';
import type { TruthPicture } from './use-truth-picture';

const formats = { png: 'Picture, grey values 0 to 1', npy: 'Array file, double', csv: 'Table of numbers' } as const;
const edges = [['xMin', 'Left edge'], ['xMax', 'Right edge'], ['yMin', 'Lower edge'], ['yMax', 'Upper edge']] as const;

/** Ground truth from a picture or an array: what was found in the file, where it lies and what its values mean. */
export function FileEditor({ form, change, issueAt, truth, backgroundField }: FormPart & { truth: TruthPicture; backgroundField: React.ReactNode }) {
  const upload = useUploadArray();
  const body = formBody(form);
  const choose = (file: File | undefined) => {
    if (file) upload.mutate(file, { onSuccess: (array) => change({ array, ...squareExtent(body, array.rows, array.cols), ...(array.format === 'png' && form.scale === '1' && form.offset === '0' ? { scale: '1', offset: form.family === 'electrical-impedance' ? form.background : '0' } : {}) }) });
  };
  const { array } = form;
  const { valueName, valueUnit: unit } = familyNames[form.family];
  const [low, high] = truth.scale;
  const missing = issueAt(`${truthPath}.sha256`);
  const known = array && Number.isFinite(array.min);
  return (
    <div>
      <div className="sheet">
        <div className="filehead">
          <svg width="30" height="36" viewBox="0 0 30 36" aria-hidden="true"><path d="M2 2H20L28 10V34H2Z" fill="var(--inset)" stroke="var(--ink)" strokeWidth="1.4" /><path d="M20 2V10H28" fill="none" stroke="var(--ink)" strokeWidth="1.4" /><path d="M7 18H23M7 23H23M7 28H17" stroke="var(--ink-2)" /></svg>
          <div style={{ flex: 1, minWidth: 200 }}>
            <b className="mono">{array ? array.fileName || 'stored array' : 'No file yet'}</b>
            <p className="sm">{array ? `${array.fileName ? `${formats[array.format]}, ${formatBytes(array.fileSize)}. ` : ''}Hash ${formatHash(array.sha256)}` : 'PNG picture, .npy array (two dimensions) or CSV table, at most 1024 by 1024 values'}</p>
          </div>
          <label className="btn" aria-disabled={upload.isPending}>
            <input id={fieldId(`${truthPath}.sha256`)} className="vh" type="file" accept=".png,.npy,.csv,image/png,text/csv" disabled={upload.isPending} onChange={(e) => { choose(e.target.files?.[0]); e.target.value = ''; }} />
            {upload.isPending ? 'Reading the file' : array ? 'Choose another file' : 'Choose a file'}
          </label>
        </div>
        {array ? (
          <table className="vars">
            <caption className="vh">What the file holds</caption>
            <thead><tr><th scope="col">Variable</th><th scope="col">Shape and type</th><th scope="col">Range</th><th scope="col">Is the</th><th scope="col">In</th></tr></thead>
            <tbody>
              <tr>
                <td className="mono">{array.format === 'png' ? 'grey' : 'values'}</td><td>{array.rows} × {array.cols}, double</td>
                <td className="rng">{known ? `${formatNumber(array.min, 3)} to ${formatNumber(array.max, 3)}, mean ${formatNumber(array.mean, 3)}` : 'as stored'}</td><td>Ground truth</td><td>{unit ? `${unit} after` : 'after'} scale and offset</td>
              </tr>
            </tbody>
          </table>
        ) : null}
      </div>
      {missing && !upload.isError ? <span className="fld err"><span className="help" style={{ marginTop: 6 }}><StateShape state="fail" />{missing}</span></span> : null}
      {upload.isError ? <UploadFault error={upload.error} /> : null}
      {array ? (
        <div className="sheet gt" style={{ marginTop: 14 }}>
          <div>
            <BodyImage label="The file in its place on the body" picture={truth.picture} body={body ?? undefined} low={low} high={high} electrodes={formElectrodes(form)} />
            <div style={{ marginTop: 10 }}><ColourBar labels={scaleTexts(low, high, parseDecimal(form.background), unit)} /></div>
          </div>
          <div className="gt-form">
            <div className="g2">
              {edges.map(([key, label]) => (
                <Field key={key} id={fieldId(`${truthPath}.extent.${key}`)} label={label} unit="mm" inputMode="decimal" value={form.extent[key]} error={issueAt(`${truthPath}.extent.${key}`)} onChange={(e) => change({ extent: { ...form.extent, [key]: e.target.value } })} />
              ))}
              <Field id={fieldId(`${truthPath}.scale`)} label="Scale" unit={unit ? `${unit} per unit` : undefined} inputMode="decimal" value={form.scale} error={issueAt(`${truthPath}.scale`)} help={`${valueName.charAt(0).toUpperCase()}${valueName.slice(1)} = offset + scale × value.`} onChange={(e) => change({ scale: e.target.value })} />
              <Field id={fieldId(`${truthPath}.offset`)} label="Offset" unit={unit || undefined} inputMode="decimal" value={form.offset} error={issueAt(`${truthPath}.offset`)} help={truth.range ? `Gives ${withUnit(`${formatNumber(truth.range[0], 3)} to ${formatNumber(truth.range[1], 3)}`, unit)}.` : undefined} onChange={(e) => change({ offset: e.target.value })} />
            </div>
            {backgroundField}
            <p className="sm">The first row is the top of the picture. Outside the edges the background holds.</p>
          </div>
        </div>
      ) : null}
    </div>
  );
}

/** The body's square in the file's aspect, so that pixels start square. */
function squareExtent(body: RoundOrRectangle | null, rows: number, cols: number): { extent: { xMin: string; xMax: string; yMin: string; yMax: string } } {
  const r = body ? Number((1000 * Math.max(...bodyHalfSize(body))).toPrecision(9)) : 150;
  const x = cols >= rows ? r : (r * cols) / rows;
  const y = rows >= cols ? r : (r * rows) / cols;
  return { extent: { xMin: decimalText(-x), xMax: decimalText(x), yMin: decimalText(-y), yMax: decimalText(y) } };
}
