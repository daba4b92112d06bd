import { parseDecimal, shiftDecimal } from '../../../lib/decimal';
import { measuredFramesSchema, type PhantomCreate } from '../../../../shared/contracts/phantoms';
import { limits } from '../../../../shared/domain/limits';
import { phantomDefinitionSchema, type PhantomDefinition } from '../../../../shared/domain/phantom-definition';
import { fieldLabel, numberKeys, reach, toShape, type DraftShape, type NumberKey } from './draft-shape';
import { frameFacts } from './geometry-facts';
import type { PhantomForm } from './phantom-form';

/** A fault at a field: the path is the one of the request, so that the server's issues meet the same field. */
export interface FormIssue {
  readonly path: string;
  /** The field as it is called on the page. */
  readonly label: string;
  readonly message: string;
}

interface NumberRule {
  readonly path: string;
  readonly label: string;
  readonly text: string;
  readonly minimum: number;
  readonly maximum: number;
  readonly unit: string;
  readonly works: string;
}

const plain = (value: number): string => (Math.abs(value) >= 1e5 || (value !== 0 && Math.abs(value) < 1e-4) ? value.toExponential(0).replace('e', ' × 10^').replace('+', '') : String(value));

function numberIssue(rule: NumberRule): FormIssue | null {
  const value = parseDecimal(rule.text);
  const unit = rule.unit ? ` ${rule.unit}` : '';
  if (Number.isNaN(value)) return { path: rule.path, label: rule.label, message: `Write a number, for example ${rule.works}.` };
  if (value < rule.minimum) return { path: rule.path, label: rule.label, message: `At least ${plain(rule.minimum)}${unit}. ${rule.works} works.` };
  if (value > rule.maximum) return { path: rule.path, label: rule.label, message: `At most ${plain(rule.maximum)}${unit}. ${rule.works} works.` };
  return null;
}

export const geometryPath = 'definition.geometry';
export const truthPath = 'definition.truth';

function geometryRules(form: PhantomForm): NumberRule[] {
  return [
    { path: `${geometryPath}.body.radius`, label: 'Body radius', text: form.radius, minimum: 1, maximum: 10_000, unit: 'mm', works: '150' },
    { path: `${geometryPath}.electrodeCoverage`, label: 'Electrode width', text: form.coverage, minimum: 10, maximum: 90, unit: '% of the edge', works: '34' },
    { path: `${geometryPath}.contactImpedance`, label: 'Contact impedance', text: form.contactImpedance, minimum: 1e-7, maximum: 10, unit: 'Ω m²', works: '0.0024' },
    { path: `${geometryPath}.current`, label: 'Current', text: form.current, minimum: 1e-6, maximum: 100_000, unit: 'mA/m', works: '5' },
    { path: `${geometryPath}.firstElectrodeDeg`, label: 'First electrode', text: form.firstElectrodeDeg, minimum: -360, maximum: 360, unit: '°', works: '90' },
  ];
}

/** Path of a number of shape `index` in the request. */
export function shapePath(shape: DraftShape, index: number, key: NumberKey): string {
  const names: Record<NumberKey, string> = {
    x: 'x', y: 'y', a: shape.kind === 'annulus' ? 'innerRadius' : 'semiAxisA', b: shape.kind === 'annulus' ? 'outerRadius' : 'semiAxisB', angle: 'angleDeg', value: 'value',
  };
  return `${truthPath}.shapes.${index}.${names[key]}`;
}

function shapeIssues(form: PhantomForm): FormIssue[] {
  const issues: FormIssue[] = [];
  const radius = parseDecimal(form.radius);
  if (form.shapes.length > limits.shapes) issues.push({ path: `${truthPath}.shapes`, label: 'Shapes', message: `At most ${limits.shapes} shapes. Remove ${form.shapes.length - limits.shapes}.` });
  form.shapes.forEach((shape, index) => {
    const before = issues.length;
    if (!shape.label.trim()) issues.push({ path: `${truthPath}.shapes.${index}.label`, label: `Name of shape ${index + 1}`, message: 'Give the shape a name.' });
    for (const key of numberKeys(shape.kind)) {
      const lengthKey = key === 'a' || key === 'b';
      const issue = numberIssue({
        path: shapePath(shape, index, key), label: `${shape.label || 'Shape'}, ${fieldLabel(shape.kind, key).toLowerCase()}`, text: shape[key],
        minimum: key === 'value' ? limits.conductivityMin : lengthKey ? (shape.kind === 'annulus' && key === 'a' ? 0.001 : 0.1) : key === 'angle' ? -360 : -100_000,
        maximum: key === 'value' ? limits.conductivityMax : key === 'angle' ? 360 : 100_000,
        unit: key === 'value' ? 'S/m' : key === 'angle' ? '°' : 'mm', works: key === 'value' ? '1.5' : key === 'angle' ? '0' : '20',
      });
      if (issue) issues.push(issue);
    }
    if (shape.kind === 'annulus' && !(parseDecimal(shape.a) < parseDecimal(shape.b)) && issues.length === before)
      issues.push({ path: shapePath(shape, index, 'a'), label: `${shape.label}, inner radius`, message: `The inner radius must be smaller than the outer, ${shape.b} mm.` });
    if (shape.kind === 'polygon') {
      if (shape.vertices.length < 3) issues.push({ path: `${truthPath}.shapes.${index}.vertices`, label: `${shape.label}, corners`, message: 'A polygon needs three corners or more.' });
      else if (shape.vertices.some((v) => v.some((t) => Number.isNaN(parseDecimal(t))))) issues.push({ path: `${truthPath}.shapes.${index}.vertices`, label: `${shape.label}, corners`, message: 'Every corner needs two numbers.' });
    }
    if (issues.length === before && Number.isFinite(radius) && reach(shape) >= radius)
      issues.push({ path: shapePath(shape, index, 'x'), label: `${shape.label}, place`, message: `It reaches the edge, ${Math.round(reach(shape) - radius)} mm beyond. Keep every shape inside the body of ${form.radius} mm.` });
  });
  return issues;
}

function truthIssues(form: PhantomForm, expressionError: string | null): FormIssue[] {
  const background = numberIssue({ path: `${truthPath}.background`, label: 'Background', text: form.background, minimum: limits.conductivityMin, maximum: limits.conductivityMax, unit: 'S/m', works: '1' });
  const issues = background ? [background] : [];
  if (form.truthKind === 'shapes') return [...issues, ...shapeIssues(form)];
  if (form.truthKind === 'expression') {
    const path = `${truthPath}.expression`;
    const label = 'Expression';
    if (!form.expression.trim()) issues.push({ path, label, message: 'Write the conductivity as a function of x and y, for example 1 + 0.5*exp(-(x^2 + y^2)/0.001).' });
    else if (form.expression.length > limits.expressionLength) issues.push({ path, label, message: `At most ${limits.expressionLength} characters; there are ${form.expression.length}.` });
    else if (expressionError) issues.push({ path, label, message: expressionError });
    return issues;
  }
  if (!form.array) return [...issues, { path: `${truthPath}.sha256`, label: 'File', message: 'Choose an image or an array.' }];
  const names = { xMin: 'Left edge', xMax: 'Right edge', yMin: 'Lower edge', yMax: 'Upper edge' } as const;
  for (const key of ['xMin', 'xMax', 'yMin', 'yMax'] as const) {
    const issue = numberIssue({ path: `${truthPath}.extent.${key}`, label: names[key], text: form.extent[key], minimum: -100_000, maximum: 100_000, unit: 'mm', works: key.endsWith('Min') ? '-150' : '150' });
    if (issue) issues.push(issue);
  }
  const edge = (key: keyof PhantomForm['extent']): number => parseDecimal(form.extent[key]);
  if (edge('xMin') >= edge('xMax')) issues.push({ path: `${truthPath}.extent.xMax`, label: 'Right edge', message: 'It must lie to the right of the left edge.' });
  if (edge('yMin') >= edge('yMax')) issues.push({ path: `${truthPath}.extent.yMax`, label: 'Upper edge', message: 'It must lie above the lower edge.' });
  for (const [key, label, works] of [['scale', 'Scale', '1'], ['offset', 'Offset', '0']] as const) {
    const issue = numberIssue({ path: `${truthPath}.${key}`, label, text: form[key], minimum: -1e9, maximum: 1e9, unit: '', works });
    if (issue) issues.push(issue);
  }
  const lowest = Math.min(...[form.array.min, form.array.max].map((v) => parseDecimal(form.offset) + parseDecimal(form.scale) * v));
  if (lowest < limits.conductivityMin)
    issues.push({ path: `${truthPath}.offset`, label: 'Offset', message: `The lowest value becomes ${Number(lowest.toPrecision(3))} S/m; conductivity must stay above 0.000001. Raise the offset by ${Number((limits.conductivityMin - lowest + 0.1).toPrecision(2))}.` });
  return issues;
}

const metres = (text: string): number => shiftDecimal(parseDecimal(text), -3);

function candidate(form: PhantomForm): unknown {
  const background = parseDecimal(form.background);
  const truth = form.truthKind === 'shapes'
    ? { kind: 'shapes', background, shapes: form.shapes.map((s) => ({ ...toShape(s) })) }
    : form.truthKind === 'expression'
      ? { kind: 'expression', background, expression: form.expression }
      : {
          kind: 'array', background, sha256: form.array?.sha256 ?? '', rows: form.array?.rows ?? 0, cols: form.array?.cols ?? 0, scale: parseDecimal(form.scale), offset: parseDecimal(form.offset),
          extent: { xMin: metres(form.extent.xMin), xMax: metres(form.extent.xMax), yMin: metres(form.extent.yMin), yMax: metres(form.extent.yMax) },
        };
  return {
    family: 'electrical-impedance', truth, dataKind: form.dataKind, noiseReference: form.noiseReference,
    geometry: {
      body: { kind: 'disc', radius: metres(form.radius) }, electrodes: form.electrodes, electrodeCoverage: shiftDecimal(parseDecimal(form.coverage), -2),
      firstElectrodeDeg: parseDecimal(form.firstElectrodeDeg), numbering: form.numbering, contactImpedance: parseDecimal(form.contactImpedance),
      pattern: form.pattern, current: shiftDecimal(parseDecimal(form.current), -3), measurement: form.measurement,
    },
  };
}

/** What is simulated: the definition where it is complete, else the faults in it. */
export function readDefinition(form: PhantomForm, expressionError: string | null = null): { definition: PhantomDefinition | null; issues: FormIssue[] } {
  const issues = [...truthIssues(form, expressionError), ...geometryRules(form).map(numberIssue).filter((i) => i !== null)];
  if (issues.length) return { definition: null, issues };
  const parsed = phantomDefinitionSchema.safeParse(candidate(form));
  if (parsed.success) return { definition: parsed.data, issues: [] };
  return { definition: null, issues: parsed.error.issues.map((i) => ({ path: `definition.${i.path.join('.')}`, label: labelOf(`definition.${i.path.join('.')}`), message: i.message })) };
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
    const { values } = frameFacts(form.electrodes, form.pattern, form.measurement);
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

const labels: Record<string, string> = {
  group: 'Group', name: 'Name', licence: 'Licence', description: 'Description', sealedUntil: 'Opens on', whatChanged: 'What changed',
  'definition.noiseReference': 'Noise is relative to', 'definition.dataKind': 'Data', [`${geometryPath}.measurement`]: 'Measured between', [`${geometryPath}.pattern`]: 'Current pattern',
  [`${geometryPath}.body.radius`]: 'Body radius', [`${geometryPath}.electrodeCoverage`]: 'Electrode width', [`${geometryPath}.contactImpedance`]: 'Contact impedance', [`${geometryPath}.current`]: 'Current',
  [`${truthPath}.expression`]: 'Expression', [`${truthPath}.background`]: 'Background', [`${truthPath}.sha256`]: 'File',
};
/** The name of a field on the page, for an issue that the server found. */
export function labelOf(path: string): string {
  const exact = labels[path];
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
