import { parseDecimal, shiftDecimal } from '../../../lib/decimal';
import { withUnit } from '../../../lib/problem-words';
import { familyNames, type FamilyKey } from '../../../../shared/domain/families';
import { limits } from '../../../../shared/domain/limits';
import { fieldLabel, gapToEdge, numberKeys, toShape, type DraftShape, type NumberKey } from './draft-shape';
import { formBody } from './form-geometry';
import { numberIssue, truthPath, type FormIssue } from './form-issue';
import type { PhantomForm } from './phantom-form';

/** Smallest and largest value a ground truth of the family may have. */
export function valueBounds(family: FamilyKey): { minimum: number; maximum: number } {
  return family === 'electrical-impedance' ? { minimum: limits.conductivityMin, maximum: limits.conductivityMax } : { minimum: -limits.plainValueMax, maximum: limits.plainValueMax };
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
  const body = formBody(form);
  const { valueUnit } = familyNames[form.family];
  const bounds = valueBounds(form.family);
  if (form.shapes.length > limits.shapes) issues.push({ path: `${truthPath}.shapes`, label: 'Shapes', message: `At most ${limits.shapes} shapes. Remove ${form.shapes.length - limits.shapes}.` });
  form.shapes.forEach((shape, index) => {
    const before = issues.length;
    if (!shape.label.trim()) issues.push({ path: `${truthPath}.shapes.${index}.label`, label: `Name of shape ${index + 1}`, message: 'Give the shape a name.' });
    for (const key of numberKeys(shape.kind)) {
      const lengthKey = key === 'a' || key === 'b';
      const issue = numberIssue({
        path: shapePath(shape, index, key), label: `${shape.label || 'Shape'}, ${fieldLabel(shape.kind, key, valueUnit).toLowerCase()}`, text: shape[key],
        minimum: key === 'value' ? bounds.minimum : lengthKey ? (shape.kind === 'annulus' && key === 'a' ? 0.001 : 0.1) : key === 'angle' ? -360 : -100_000,
        maximum: key === 'value' ? bounds.maximum : key === 'angle' ? 360 : 100_000,
        unit: key === 'value' ? valueUnit : key === 'angle' ? '°' : 'mm', works: key === 'value' ? '1.5' : key === 'angle' ? '0' : '20',
      });
      if (issue) issues.push(issue);
    }
    if (shape.kind === 'annulus' && !(parseDecimal(shape.a) < parseDecimal(shape.b)) && issues.length === before)
      issues.push({ path: shapePath(shape, index, 'a'), label: `${shape.label}, inner radius`, message: `The inner radius must be smaller than the outer, ${shape.b} mm.` });
    if (shape.kind === 'polygon') {
      if (shape.vertices.length < 3) issues.push({ path: `${truthPath}.shapes.${index}.vertices`, label: `${shape.label}, corners`, message: 'A polygon needs three corners or more.' });
      else if (shape.vertices.some((v) => v.some((t) => Number.isNaN(parseDecimal(t))))) issues.push({ path: `${truthPath}.shapes.${index}.vertices`, label: `${shape.label}, corners`, message: 'Every corner needs two numbers.' });
    }
    // The field of a picture goes on beyond its frame; a body ends at its edge.
    if (issues.length > before || !body || body.kind === 'rectangle') return;
    const beyond = -gapToEdge(shape, body);
    if (beyond >= 0) issues.push({ path: shapePath(shape, index, 'x'), label: `${shape.label}, place`, message: `It reaches the edge, ${Math.round(beyond)} mm beyond. Keep every shape inside the body of ${decimalMm(body.radius)} mm.` });
  });
  return issues;
}

const decimalMm = (metres: number): string => String(shiftDecimal(metres, 3));

export function truthIssues(form: PhantomForm, expressionError: string | null): FormIssue[] {
  const { valueUnit, valueName } = familyNames[form.family];
  const bounds = valueBounds(form.family);
  const background = numberIssue({ path: `${truthPath}.background`, label: 'Background', text: form.background, ...bounds, unit: valueUnit, works: form.family === 'electrical-impedance' ? '1' : '0' });
  const issues = background ? [background] : [];
  if (form.truthKind === 'standard') return issues;
  if (form.truthKind === 'shapes') return [...issues, ...shapeIssues(form)];
  if (form.truthKind === 'expression') {
    const path = `${truthPath}.expression`;
    const label = 'Expression';
    const example = form.family === 'integral-equation' ? 'the function of x, for example exp(-20*(x - 0.5)^2)' : `the ${valueName} as a function of x and y, for example 1 + 0.5*exp(-(x^2 + y^2)/0.001)`;
    if (!form.expression.trim()) issues.push({ path, label, message: `Write ${example}.` });
    else if (form.expression.length > limits.expressionLength) issues.push({ path, label, message: `At most ${limits.expressionLength} characters; there are ${form.expression.length}.` });
    else if (expressionError) issues.push({ path, label, message: expressionError });
    return issues;
  }
  return [...issues, ...arrayIssues(form)];
}

function arrayIssues(form: PhantomForm): FormIssue[] {
  if (!form.array) return [{ path: `${truthPath}.sha256`, label: 'File', message: 'Choose an image or an array.' }];
  const issues: FormIssue[] = [];
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
  if (form.family !== 'electrical-impedance') return issues;
  const lowest = Math.min(...[form.array.min, form.array.max].map((v) => parseDecimal(form.offset) + parseDecimal(form.scale) * v));
  if (lowest < limits.conductivityMin)
    issues.push({ path: `${truthPath}.offset`, label: 'Offset', message: `The lowest value becomes ${withUnit(String(Number(lowest.toPrecision(3))), 'S/m')}; conductivity must stay above 0.000001. Raise the offset by ${Number((limits.conductivityMin - lowest + 0.1).toPrecision(2))}.` });
  return issues;
}

const metres = (text: string): number => shiftDecimal(parseDecimal(text), -3);

/** The ground truth for the contract. */
export function truthCandidate(form: PhantomForm): unknown {
  const background = parseDecimal(form.background);
  switch (form.truthKind) {
    case 'standard':
      return { kind: 'standard', background };
    case 'shapes':
      return { kind: 'shapes', background, ...(form.family !== 'electrical-impedance' && form.combine === 'add' ? { combine: 'add' } : {}), shapes: form.shapes.map((s) => ({ ...toShape(s) })) };
    case 'expression':
      return { kind: 'expression', background, expression: form.expression };
    case 'array':
      return {
        kind: 'array', background, sha256: form.array?.sha256 ?? '', rows: form.array?.rows ?? 0, cols: form.array?.cols ?? 0, scale: parseDecimal(form.scale), offset: parseDecimal(form.offset),
        extent: { xMin: metres(form.extent.xMin), xMax: metres(form.extent.xMax), yMin: metres(form.extent.yMin), yMax: metres(form.extent.yMax) },
      };
  }
}
