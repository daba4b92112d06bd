import { parseDecimal, shiftDecimal } from '../../../../lib/decimal';
import type { XrayDraft } from '../form-drafts';
import { geometryPath, numberIssue, type FormIssue } from '../form-issue';

const g = geometryPath;
const metres = (text: string): number => shiftDecimal(parseDecimal(text), -3);

export function xrayIssues(draft: XrayDraft): FormIssue[] {
  const radius = parseDecimal(draft.radius);
  const fan = draft.beam === 'fan';
  const least = Number.isFinite(radius) ? Math.ceil(1.05 * radius) : 1;
  return [
    numberIssue({ path: `${g}.body.radius`, label: 'Body radius', text: draft.radius, minimum: 1, maximum: 10_000, unit: 'mm', works: '100' }),
    numberIssue({ path: `${g}.views`, label: 'Views', text: draft.views, minimum: 1, maximum: 720, unit: '', works: '60', whole: true }),
    numberIssue({ path: `${g}.firstAngleDeg`, label: 'First view', text: draft.firstAngleDeg, minimum: -360, maximum: 360, unit: '°', works: '0' }),
    numberIssue({ path: `${g}.arcDeg`, label: 'Arc', text: draft.arcDeg, minimum: 1, maximum: 360, unit: '°', works: fan ? '360' : '180' }),
    numberIssue({ path: `${g}.detectors`, label: 'Detector cells', text: draft.detectors, minimum: 2, maximum: 1024, unit: '', works: '64', whole: true }),
    numberIssue({ path: `${g}.detectorSpacing`, label: 'Detector spacing', text: draft.detectorSpacing, minimum: 1e-3, maximum: 10_000, unit: 'mm', works: '3.2' }),
    fan ? numberIssue({ path: `${g}.sourceDistance`, label: 'Source distance', text: draft.sourceDistance, minimum: least, maximum: 100_000, unit: 'mm, outside the body', works: String(3 * (Number.isFinite(radius) ? radius : 100)) }) : null,
    fan ? numberIssue({ path: `${g}.detectorDistance`, label: 'Detector distance', text: draft.detectorDistance, minimum: 0, maximum: 100_000, unit: 'mm', works: '200' }) : null,
    numberIssue({ path: `${g}.cells`, label: 'Cells a side', text: draft.cells, minimum: 8, maximum: 128, unit: '', works: '40', whole: true }),
  ].filter((issue) => issue !== null);
}

export function xrayGeometry(draft: XrayDraft): unknown {
  return {
    body: { kind: 'disc', radius: metres(draft.radius) }, beam: draft.beam, views: parseDecimal(draft.views), firstAngleDeg: parseDecimal(draft.firstAngleDeg), arcDeg: parseDecimal(draft.arcDeg),
    detectors: parseDecimal(draft.detectors), detectorSpacing: metres(draft.detectorSpacing),
    ...(draft.beam === 'fan' ? { sourceDistance: metres(draft.sourceDistance), detectorDistance: metres(draft.detectorDistance) } : {}),
    cells: parseDecimal(draft.cells),
  };
}

/** Share of the body's width at its centre that the detector sees; below 1 rays miss its rim. NaN while the fields are no numbers. */
export function coveredShare(draft: XrayDraft): number {
  const half = (parseDecimal(draft.detectors) * parseDecimal(draft.detectorSpacing)) / 2;
  const radius = parseDecimal(draft.radius);
  if (draft.beam === 'parallel') return half / radius;
  const source = parseDecimal(draft.sourceDistance);
  // Distance from the centre of the ray from the source to the end of the flat detector.
  const angle = Math.atan2(half, source + parseDecimal(draft.detectorDistance));
  return (source * Math.sin(angle)) / radius;
}
