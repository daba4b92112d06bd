import { Field, Select } from '../../../components/ui/field';
import { parseDecimal } from '../../../lib/decimal';
import { formatNumber } from '../../../lib/format';
import { plainNumber } from '../../../lib/problem-words';
import { fieldId } from '../model/field-id';
import type { XrayDraft } from '../model/form-drafts';
import { geometryPath } from '../model/form-issue';
import { coveredShare } from '../model/geometry/x-ray';
import type { FormPart } from './form-part';

const g = geometryPath;

/** How far apart the views stand, and what is missing of a full turn. */
function arcHelp(draft: XrayDraft): string {
  const arc = parseDecimal(draft.arcDeg);
  const step = arc / parseDecimal(draft.views);
  if (!Number.isFinite(step)) return 'From the first view on.';
  const full = draft.beam === 'parallel' ? 180 : 360;
  return `One view every ${plainNumber(step)}°${arc < full ? `; ${plainNumber(full - arc)}° are missing` : ''}.`;
}

export function XrayFields({ form, change, issueAt }: FormPart) {
  const { xray } = form;
  const set = (patch: Partial<XrayDraft>) => change((old) => ({ xray: { ...old.xray, ...patch } }));
  const field = (path: string, key: keyof XrayDraft) => ({ id: fieldId(`${g}.${path}`), error: issueAt(`${g}.${path}`), value: xray[key], onChange: (e: { target: { value: string } }) => set({ [key]: e.target.value }) });
  const covered = coveredShare(xray);
  return (
    <>
      <Field {...field('body.radius', 'radius')} label="Body radius" unit="mm" inputMode="decimal" help="A disc around everything that attenuates." />
      <Select
        id={fieldId(`${g}.beam`)} label="Beam" value={xray.beam} error={issueAt(`${g}.beam`)} help={xray.beam === 'parallel' ? 'Parallel rays; half a turn is enough.' : 'From a point source to a flat detector.'}
        onChange={(e) => { const fan = e.target.value === 'fan'; set({ beam: fan ? 'fan' : 'parallel', ...(fan && xray.arcDeg === '180' ? { arcDeg: '360' } : !fan && xray.arcDeg === '360' ? { arcDeg: '180' } : {}) }); }}
      >
        <option value="parallel">parallel</option>
        <option value="fan">fan</option>
      </Select>
      <Field {...field('views', 'views')} label="Views" inputMode="numeric" help="1 to 720." />
      <Field {...field('firstAngleDeg', 'firstAngleDeg')} label="First view stands at" unit="°" inputMode="decimal" help={xray.beam === 'parallel' ? 'Direction of the detector, from the x axis.' : 'Place of the source, from the x axis.'} />
      <Field {...field('arcDeg', 'arcDeg')} label="Arc of all views" unit="°" inputMode="decimal" help={arcHelp(xray)} />
      <Field {...field('detectors', 'detectors')} label="Detector cells" inputMode="numeric" help="2 to 1024, centred on the axis." />
      <Field {...field('detectorSpacing', 'detectorSpacing')} label="Detector spacing" unit="mm" inputMode="decimal" help={Number.isFinite(covered) ? (covered < 1 ? `The rays cover ${formatNumber(100 * covered, 2)} % of the body.` : 'The rays cover the whole body.') : 'Width of one cell.'} />
      {xray.beam === 'fan' ? (
        <>
          <Field {...field('sourceDistance', 'sourceDistance')} label="Source distance" unit="mm" inputMode="decimal" help="From the centre, at least 1.05 radii." />
          <Field {...field('detectorDistance', 'detectorDistance')} label="Detector distance" unit="mm" inputMode="decimal" help="Beyond the centre." />
        </>
      ) : null}
      <Field {...field('cells', 'cells')} label="Unknowns a side" inputMode="numeric" help="Cells of the square that the inversion lays over the body, 8 to 128." />
    </>
  );
}
