import { Field, Select } from '../../../components/ui/field';
import { parseDecimal } from '../../../lib/decimal';
import { formatNumber } from '../../../lib/format';
import { edgeKeys, pointSpreadKeys, type EdgeKey, type PointSpreadKey } from '../../../../shared/domain/geometry/deblurring';
import { fieldId } from '../model/field-id';
import type { DeblurringDraft } from '../model/form-drafts';
import { geometryPath } from '../model/form-issue';
import { pixelCounts } from '../model/geometry/deblurring';
import { edgeNames, pointSpreadNames, spreadNames } from '../model/deblurring-words';
import type { FormPart } from './form-part';

const g = geometryPath;

export function DeblurringFields({ form, change, issueAt }: FormPart) {
  const { deblurring: draft } = form;
  const set = (patch: Partial<DeblurringDraft>) => change((old) => ({ deblurring: { ...old.deblurring, ...patch } }));
  const field = (path: string, key: 'width' | 'height' | 'spread' | 'motionDeg' | 'cells') => ({ id: fieldId(`${g}.${path}`), error: issueAt(`${g}.${path}`), value: draft[key], onChange: (e: { target: { value: string } }) => set({ [key]: e.target.value }) });
  const [columns, rows] = pixelCounts(draft);
  const pixel = parseDecimal(draft.width) / columns;
  return (
    <>
      <Field {...field('body.width', 'width')} label="Width" unit="mm" inputMode="decimal" help="Of the picture; the field goes on beyond it." />
      <Field {...field('body.height', 'height')} label="Height" unit="mm" inputMode="decimal" help="Of the picture." />
      <Field {...field('cells', 'cells')} label="Pixels along the longer side" inputMode="numeric" help={Number.isFinite(columns * rows) ? `${columns} × ${rows} pixels of ${formatNumber(pixel, 3)} mm.` : '8 to 96.'} />
      <Select id={fieldId(`${g}.pointSpread`)} label="Point-spread function" value={draft.pointSpread} error={issueAt(`${g}.pointSpread`)} help="What a point becomes." onChange={(e) => set({ pointSpread: pointSpreadKeys.find((k: PointSpreadKey) => k === e.target.value) ?? 'gaussian' })}>
        {pointSpreadKeys.map((k) => <option key={k} value={k}>{pointSpreadNames[k]}</option>)}
      </Select>
      <Field {...field('spread', 'spread')} label={spreadNames[draft.pointSpread].name} unit="mm" inputMode="decimal" help={Number.isFinite(pixel) ? `${spreadNames[draft.pointSpread].help} ${formatNumber(parseDecimal(draft.spread) / pixel, 2)} pixels.` : spreadNames[draft.pointSpread].help} />
      {draft.pointSpread === 'motion' ? <Field {...field('motionDeg', 'motionDeg')} label="Direction" unit="°" inputMode="decimal" help="From the x axis, counter-clockwise." /> : null}
      <Select id={fieldId(`${g}.edge`)} label="Beyond the edge" value={draft.edge} error={issueAt(`${g}.edge`)} help="What the inversion assumes; the data know better." onChange={(e) => set({ edge: edgeKeys.find((k: EdgeKey) => k === e.target.value) ?? 'zero' })}>
        {edgeKeys.map((k) => <option key={k} value={k}>{edgeNames[k]}</option>)}
      </Select>
    </>
  );
}
