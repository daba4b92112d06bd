import { measuredFramesSchema, type PhantomCreate } from '../../../../shared/contracts/phantoms';
import { phantomDefinitionSchema, type PhantomDefinition } from '../../../../shared/domain/phantom-definition';
import { geometryCandidate, geometryIssues, valuesPerFrame } from './form-geometry';
import { geometryPath, truthPath, type FormIssue } from './form-issue';
import type { PhantomForm } from './phantom-form';
import { truthCandidate, truthIssues } from './truth-request';

const candidate = (form: PhantomForm): unknown => ({ family: form.family, truth: truthCandidate(form), geometry: geometryCandidate(form), dataKind: form.dataKind, noiseReference: form.noiseReference });

/** What is simulated: the definition where it is complete, else the faults in it. */
export function readDefinition(form: PhantomForm, expressionError: string | null = null): { definition: PhantomDefinition | null; issues: FormIssue[] } {
  const issues = [...truthIssues(form, expressionError), ...geometryIssues(form)];
  if (issues.length) return { definition: null, issues };
  const parsed = phantomDefinitionSchema.safeParse(candidate(form));
  if (parsed.success) return { definition: parsed.data, issues: [] };
  return { definition: null, issues: parsed.error.issues.map((i) => { const path = fieldPath(`definition.${i.path.join('.')}`); return { path, label: labelOf(path), message: i.message }; }) };
}

const day = 86_400_000;
const isoDate = (time: number): string => new Date(time).toISOString().slice(0, 10);
/** First and last day a seal may open. */
export function sealRange(now: Date): { earliest: string; latest: string } {
  const last = new Date(now);
  last.setUTCFullYear(last.getUTCFullYear() + 2);
  return { earliest: isoDate(now.getTime() + day), latest: isoDate(last.getTime()) };
}

export function framesLocked(form: PhantomForm): boolean {
  if (form.framesOrigin === 'none') return true;
  if (form.framesOrigin === 'tank') return form.instrument.trim() === '';
  return !(form.ethicsApproved && form.deidentified && form.currentWithinStandard && form.ethicsReference.trim() !== '');
}

function framesIssues(form: PhantomForm): FormIssue[] {
  if (form.framesOrigin === 'none') return [];
  const label = 'Measured frames';
  const issues: FormIssue[] = [];
  if (form.frames) {
    const parsed = measuredFramesSchema.safeParse(framesOf(form));
    if (!parsed.success) for (const i of parsed.error.issues) issues.push({ path: `frames.${i.path.join('.')}`, label, message: i.message });
    const values = valuesPerFrame(form);
    if (form.frames.valuesPerFrame !== values) issues.push({ path: 'frames.sha256', label, message: `The file holds ${form.frames.valuesPerFrame} values a frame; this geometry has ${values}. Upload frames of ${values} values.` });
  } else issues.push({ path: framesLocked(form) ? (form.framesOrigin === 'tank' ? 'frames.instrument' : 'frames.ethicsReference') : 'frames.sha256', label, message: framesLocked(form) ? 'Complete the statement first, or choose None.' : 'Choose the file, or choose None.' });
  return issues;
}

function framesOf(form: PhantomForm) {
  if (form.framesOrigin === 'none' || !form.frames) return null;
  const living = form.framesOrigin === 'living';
  return {
    sha256: form.frames.sha256, frames: form.frames.frames, valuesPerFrame: form.frames.valuesPerFrame, origin: form.framesOrigin, instrument: form.instrument,
    ethicsReference: living ? form.ethicsReference : '', ethicsApproved: living && form.ethicsApproved, deidentified: living && form.deidentified, currentWithinStandard: living && form.currentWithinStandard,
  };
}

export type FormMode = 'new' | 'edit' | 'next';

function termIssues(form: PhantomForm, mode: FormMode, now: Date): FormIssue[] {
  const issues: FormIssue[] = [];
  const name = form.name.trim();
  if (mode === 'new' && !form.group) issues.push({ path: 'group', label: 'Group', message: 'Choose the group that will own it.' });
  if (name.length < 3) issues.push({ path: 'name', label: 'Name', message: 'Give it a name of 3 letters or more.' });
  if (name.length > 80) issues.push({ path: 'name', label: 'Name', message: `At most 80 characters; there are ${name.length}.` });
  if (!form.licence) issues.push({ path: 'licence', label: 'Licence', message: 'Choose a licence; without one nobody may use it.' });
  if (mode === 'next' && form.whatChanged.trim().length < 5) issues.push({ path: 'whatChanged', label: 'What changed', message: 'Say what changed, in 5 letters or more.' });
  if (form.sealed) {
    const { earliest, latest } = sealRange(now);
    const label = 'Opens on';
    if (!/^\d{4}-\d{2}-\d{2}$/.test(form.sealedUntil)) issues.push({ path: 'sealedUntil', label, message: `Choose a day from ${earliest} to ${latest}.` });
    else if (form.sealedUntil < earliest) issues.push({ path: 'sealedUntil', label, message: `That date has passed. The earliest is ${earliest}, the latest two years from today.` });
    else if (form.sealedUntil > latest) issues.push({ path: 'sealedUntil', label, message: `The latest is ${latest}, two years from today.` });
  }
  return issues;
}

/** Everything that stands between the form and a submission. */
export function readForm(form: PhantomForm, mode: FormMode, now: Date, expressionError: string | null = null): { definition: PhantomDefinition | null; terms: Omit<PhantomCreate, 'group'> | null; issues: FormIssue[] } {
  const { definition, issues } = readDefinition(form, expressionError);
  const all = [...issues, ...framesIssues(form), ...termIssues(form, mode, now)];
  if (!definition || all.length || !form.licence) return { definition, terms: null, issues: all };
  return {
    definition, issues: [],
    terms: { name: form.name.trim(), description: form.description, licence: form.licence, definition, frames: framesOf(form), sealedUntil: form.sealed ? form.sealedUntil : null },
  };
}

const geometryLabels: Record<string, string> = {
  'body.radius': 'Body radius', 'body.cosine': 'Cosine coefficients', 'body.sine': 'Sine coefficients', 'body.width': 'Width', 'body.height': 'Height',
  electrodes: 'Electrodes', electrodeCoverage: 'Electrode width', firstElectrodeDeg: 'First electrode', electrodeAnglesDeg: 'Angles', contactImpedance: 'Contact impedance',
  pattern: 'Current pattern', skip: 'Electrodes skipped', currents: 'Currents', current: 'Current', measurement: 'Measured between',
  views: 'Views', firstAngleDeg: 'First view', arcDeg: 'Arc', detectors: 'Detector cells', detectorSpacing: 'Detector spacing', sourceDistance: 'Source distance', detectorDistance: 'Detector distance', cells: 'Unknowns',
  equation: 'Equation', points: 'Data points', depth: 'Depth', diffusivity: 'Stiffness', pointSpread: 'Point-spread function', spread: 'Spread', motionDeg: 'Direction', edge: 'Beyond the edge',
};
const labels: Record<string, string> = {
  group: 'Group', name: 'Name', licence: 'Licence', description: 'Description', sealedUntil: 'Opens on', whatChanged: 'What changed',
  'definition.noiseReference': 'Noise is relative to', 'definition.dataKind': 'Data',
  [`${truthPath}.expression`]: 'Expression', [`${truthPath}.background`]: 'Background', [`${truthPath}.sha256`]: 'File',
};
/** The field that shows a fault: an entry of a list of numbers is shown at the list. */
export const fieldPath = (path: string): string => path.replace(/^(definition\.geometry\.(?:body\.cosine|body\.sine|electrodeAnglesDeg|contactImpedance|currents))\..*$/, '$1');
/** The name of a field on the page, for an issue that the server found. */
export function labelOf(path: string): string {
  const exact = labels[path] ?? (path.startsWith(`${geometryPath}.`) ? geometryLabels[fieldPath(path).slice(geometryPath.length + 1)] : undefined);
  if (exact) return exact;
  if (path.startsWith('frames')) return 'Measured frames';
  if (path.startsWith(`${truthPath}.shapes`)) return 'Shapes';
  if (path.startsWith(truthPath)) return 'Ground truth';
  if (path.startsWith(geometryPath)) return 'Geometry';
  return path || 'The form';
}

/** The step of the phone form that holds a field: 2 ground truth, 3 geometry, 4 measured frames, 5 description and terms. */
export function stepOf(path: string): number {
  if (path.startsWith(truthPath)) return 2;
  if (path.startsWith('definition')) return 3;
  if (path.startsWith('frames')) return 4;
  return 5;
}
