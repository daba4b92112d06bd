import { parseDecimal, shiftDecimal } from '../../../../lib/decimal';
import { eitLimits } from '../../../../../shared/domain/geometry/electrical-impedance';
import type { PatternGeometry } from '../../../../../solvers/problems/electrical-impedance/patterns';
import type { EitDraft } from '../form-drafts';
import { geometryPath, listIssue, numberIssue, parseNumbers, type FormIssue } from '../form-issue';
import { frameFacts, type FrameFacts } from '../geometry-facts';

const g = geometryPath;
const coefficientLimit = 8;

/** Number of electrodes as typed, 16 while it cannot be used. */
export function electrodeCount(draft: EitDraft): number {
  const count = parseDecimal(draft.electrodes);
  return Number.isInteger(count) && count >= 8 && count <= 64 && count % 2 === 0 ? count : 16;
}

/** Rows of listed currents: one line a pattern. */
export const currentRows = (text: string): number[][] => text.split(/\n/).map(parseNumbers).filter((row) => row.length > 0);

/** What the patterns need, also while other fields are being typed. */
export function patternGeometry(draft: EitDraft): PatternGeometry {
  const electrodes = electrodeCount(draft);
  const skip = parseDecimal(draft.skip);
  const usable = Number.isInteger(skip) && skip >= 1 && skip <= electrodes / 2 - 2 ? skip : 1;
  const rows = currentRows(draft.currents).filter((row) => row.length === electrodes && row.every(Number.isFinite));
  const { pattern, measurement } = draft;
  return { electrodes, pattern, measurement, current: 1, ...(pattern === 'skip' ? { skip: usable } : {}), ...(pattern === 'listed' ? { currents: rows } : {}) };
}
export const eitFrameFacts = (draft: EitDraft): FrameFacts => frameFacts(patternGeometry(draft));

export function eitIssues(draft: EitDraft): FormIssue[] {
  const L = electrodeCount(draft);
  const issues = [
    numberIssue({ path: `${g}.body.radius`, label: 'Body radius', text: draft.radius, minimum: 1, maximum: 10_000, unit: 'mm', works: '150' }),
    numberIssue({ path: `${g}.electrodes`, label: 'Electrodes', text: draft.electrodes, minimum: 8, maximum: 64, unit: '', works: '16', whole: true }),
    numberIssue({ path: `${g}.electrodeCoverage`, label: 'Electrode width', text: draft.coverage, minimum: 10, maximum: 90, unit: '% of the edge', works: '34' }),
    numberIssue({ path: `${g}.current`, label: 'Current', text: draft.current, minimum: 1e-6, maximum: 100_000, unit: 'mA/m', works: '5' }),
  ];
  if (parseDecimal(draft.electrodes) % 2 !== 0 && !issues[1]) issues.push({ path: `${g}.electrodes`, label: 'Electrodes', message: 'An even number. 16 works.' });
  if (draft.outline === 'star') issues.push(...coefficientIssues(draft));
  if (draft.placing === 'even') issues.push(numberIssue({ path: `${g}.firstElectrodeDeg`, label: 'First electrode', text: draft.firstElectrodeDeg, minimum: -360, maximum: 360, unit: '°', works: '90' }));
  else {
    const angles = parseNumbers(draft.angles);
    const path = `${g}.electrodeAnglesDeg`;
    issues.push(listIssue(path, 'Angles', angles, '90, 67.5, 45, …') ?? (angles.length === L ? null : { path, label: 'Angles', message: `List ${L} angles, one an electrode; there are ${angles.length}.` }));
  }
  if (draft.contacts === 'one') issues.push(numberIssue({ path: `${g}.contactImpedance`, label: 'Contact impedance', text: draft.contactImpedance, minimum: 1e-7, maximum: 10, unit: 'Ω m²', works: '0.0024' }));
  else {
    const values = parseNumbers(draft.contactImpedances);
    const path = `${g}.contactImpedance`;
    const label = 'Contact impedances';
    const outside = values.findIndex((v) => v < 1e-7 || v > 10);
    issues.push(listIssue(path, label, values, '0.0024, 0.0030, …') ?? (values.length !== L ? { path, label, message: `List ${L} values, one an electrode; there are ${values.length}.` } : outside >= 0 ? { path, label, message: `Value ${outside + 1} must lie between 0.0000001 and 10 Ω m². 0.0024 works.` } : null));
  }
  if (draft.pattern === 'skip') issues.push(numberIssue({ path: `${g}.skip`, label: 'Electrodes skipped', text: draft.skip, minimum: 1, maximum: L / 2 - 2, unit: '', works: '1', whole: true }));
  if (draft.pattern === 'listed') issues.push(currentsIssue(draft, L));
  return issues.filter((issue) => issue !== null);
}

function coefficientIssues(draft: EitDraft): (FormIssue | null)[] {
  return (['cosine', 'sine'] as const).map((key) => {
    const path = `${g}.body.${key}`;
    const label = key === 'cosine' ? 'Cosine coefficients' : 'Sine coefficients';
    const values = parseNumbers(draft[key]);
    const outside = values.findIndex((v) => Math.abs(v) > 0.5);
    return listIssue(path, label, values, '0, 0.08') ?? (values.length > coefficientLimit ? { path, label, message: `At most ${coefficientLimit} coefficients; there are ${values.length}.` } : outside >= 0 ? { path, label, message: `Coefficient ${outside + 1} must lie between −0.5 and 0.5.` } : null);
  });
}

function currentsIssue(draft: EitDraft, L: number): FormIssue | null {
  const path = `${g}.currents`;
  const label = 'Currents';
  const rows = currentRows(draft.currents);
  const fault = (message: string): FormIssue => ({ path, label, message });
  if (rows.length === 0) return fault('List the currents: one line a pattern, one value an electrode.');
  if (rows.length > eitLimits.patterns) return fault(`At most ${eitLimits.patterns} patterns; there are ${rows.length}.`);
  for (const [k, row] of rows.entries()) {
    const word = row.findIndex(Number.isNaN);
    if (word >= 0) return fault(`Line ${k + 1}, entry ${word + 1} is not a number.`);
    if (row.length !== L) return fault(`Line ${k + 1} has ${row.length} values, not one for each of ${L} electrodes.`);
    const largest = Math.max(...row.map(Math.abs));
    const sum = row.reduce((total, v) => total + v, 0);
    if (largest === 0) return fault(`Line ${k + 1} drives no current.`);
    if (Math.abs(sum) > 1e-9 * largest) return fault(`The currents of line ${k + 1} must sum to zero, not ${Number(sum.toPrecision(6))}.`);
  }
  return null;
}

const metres = (text: string): number => shiftDecimal(parseDecimal(text), -3);

/** The geometry for the contract; fields that are no numbers come out as NaN, which the schema refuses. */
export function eitGeometry(draft: EitDraft): unknown {
  const radius = metres(draft.radius);
  return {
    body: draft.outline === 'disc' ? { kind: 'disc', radius } : { kind: 'star', radius, cosine: parseNumbers(draft.cosine), sine: parseNumbers(draft.sine) },
    electrodes: parseDecimal(draft.electrodes), electrodeCoverage: shiftDecimal(parseDecimal(draft.coverage), -2), numbering: draft.numbering,
    ...(draft.placing === 'even' ? { firstElectrodeDeg: parseDecimal(draft.firstElectrodeDeg) } : { electrodeAnglesDeg: parseNumbers(draft.angles) }),
    contactImpedance: draft.contacts === 'one' ? parseDecimal(draft.contactImpedance) : parseNumbers(draft.contactImpedances),
    pattern: draft.pattern, ...(draft.pattern === 'skip' ? { skip: parseDecimal(draft.skip) } : {}), ...(draft.pattern === 'listed' ? { currents: currentRows(draft.currents) } : {}),
    current: shiftDecimal(parseDecimal(draft.current), -3), measurement: draft.measurement,
  };
}
