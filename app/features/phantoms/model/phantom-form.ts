import { z } from 'zod';
import { decimalText, shiftDecimal } from '../../../lib/decimal';
import { licences } from '../../../../shared/contracts/common';
import { arrayUploadResponseSchema, frameUploadResponseSchema } from '../../../../shared/contracts/arrays';
import type { PhantomVersionDetail } from '../../../../shared/contracts/phantoms';
import { measurementKeys, patternKeys } from '../../../../shared/domain/geometry/electrical-impedance';
import { dataKinds, noiseReferences } from '../../../../shared/domain/phantom-definition';
import { fromShape, newShapeId } from './draft-shape';

const text = z.string();
const draftShapeSchema = z.object({
  id: text, kind: z.enum(['ellipse', 'polygon', 'annulus', 'bump']), label: text, target: z.boolean(), x: text, y: text, a: text, b: text, angle: text, value: text,
  vertices: z.array(z.tuple([text, text]).readonly()).readonly(),
});

/** The form as it is typed: numbers stay text until they are read, lengths in mm, coverage in %, current in mA per metre. */
export const phantomFormSchema = z.object({
  group: text, name: text, description: text, licence: z.union([z.literal(''), z.enum(licences)]), whatChanged: text,
  truthKind: z.enum(['shapes', 'expression', 'array']), background: text, shapes: z.array(draftShapeSchema), expression: text,
  array: arrayUploadResponseSchema.nullable(), extent: z.object({ xMin: text, xMax: text, yMin: text, yMax: text }), scale: text, offset: text,
  radius: text, electrodes: z.union([z.literal(8), z.literal(16), z.literal(32)]), coverage: text, firstElectrodeDeg: text, numbering: z.enum(['clockwise', 'counter-clockwise']),
  contactImpedance: text, pattern: z.enum(patternKeys), current: text, measurement: z.enum(measurementKeys),
  dataKind: z.enum(dataKinds), noiseReference: z.enum(noiseReferences),
  framesOrigin: z.enum(['none', 'tank', 'living']), frames: frameUploadResponseSchema.nullable(), instrument: text,
  ethicsReference: text, ethicsApproved: z.boolean(), deidentified: z.boolean(), currentWithinStandard: z.boolean(),
  sealed: z.boolean(), sealedUntil: text,
});
export type PhantomForm = z.infer<typeof phantomFormSchema>;

export function emptyForm(group = ''): PhantomForm {
  return {
    group, name: '', description: '', licence: '', whatChanged: '',
    truthKind: 'shapes', background: '1',
    shapes: [
      { id: newShapeId(), kind: 'ellipse', label: 'Lobe', target: true, x: '-54', y: '39', a: '41', b: '30', angle: '29', value: '2', vertices: [] },
      { id: newShapeId(), kind: 'ellipse', label: 'Rod', target: true, x: '60', y: '-39', a: '30', b: '39', angle: '-17', value: '0.38', vertices: [] },
    ],
    expression: '1 + 0.9*exp(-((x + 0.045)^2 + (y - 0.0375)^2)/0.0011)',
    array: null, extent: { xMin: '-150', xMax: '150', yMin: '-150', yMax: '150' }, scale: '1', offset: '0',
    radius: '150', electrodes: 16, coverage: '34', firstElectrodeDeg: '90', numbering: 'clockwise',
    contactImpedance: '0.0024', pattern: 'adjacent', current: '5', measurement: 'adjacent-undriven',
    dataKind: 'difference', noiseReference: 'voltages',
    framesOrigin: 'none', frames: null, instrument: '', ethicsReference: '', ethicsApproved: false, deidentified: false, currentWithinStandard: false,
    sealed: false, sealedUntil: '',
  };
}

const mm = (metres: number): string => decimalText(shiftDecimal(metres, 3));

/** A stored version as the form shows it. A sealed truth that the reader may not see leaves the shapes empty. */
export function formFromVersion(group: string, version: PhantomVersionDetail): PhantomForm {
  const { geometry, truth } = version.definition;
  const start: PhantomForm = {
    ...emptyForm(group), name: version.name, description: version.description, licence: version.licence,
    radius: mm(geometry.body.radius), electrodes: geometry.electrodes, coverage: decimalText(shiftDecimal(geometry.electrodeCoverage, 2)),
    firstElectrodeDeg: decimalText(geometry.firstElectrodeDeg), numbering: geometry.numbering,
    contactImpedance: decimalText(geometry.contactImpedance), pattern: geometry.pattern, current: decimalText(shiftDecimal(geometry.current, 3)), measurement: geometry.measurement,
    dataKind: version.definition.dataKind, noiseReference: version.definition.noiseReference,
    sealed: version.sealedUntil !== null, sealedUntil: version.sealedUntil ?? '', shapes: [],
  };
  const frames: Partial<PhantomForm> = version.frames
    ? { framesOrigin: version.frames.origin, instrument: version.frames.instrument, frames: { ...version.frames, min: 0, max: 0, fileName: '', fileSize: 0, referenceNorm: 0, largestChange: 0 } }
    : {};
  if (!truth) return { ...start, ...frames };
  const background = decimalText(truth.background);
  if (truth.kind === 'shapes') return { ...start, ...frames, truthKind: 'shapes', background, shapes: truth.shapes.map(fromShape) };
  if (truth.kind === 'expression') return { ...start, ...frames, truthKind: 'expression', background, expression: truth.expression };
  return {
    ...start, ...frames, truthKind: 'array', background, scale: decimalText(truth.scale), offset: decimalText(truth.offset),
    extent: { xMin: mm(truth.extent.xMin), xMax: mm(truth.extent.xMax), yMin: mm(truth.extent.yMin), yMax: mm(truth.extent.yMax) },
    array: { sha256: truth.sha256, rows: truth.rows, cols: truth.cols, min: Number.NaN, max: Number.NaN, mean: Number.NaN, format: 'npy', fileName: '', fileSize: 0 },
  };
}

const storageKey = (key: string): string => `hadamark.phantom-form.${key}`;

/** Unsent input outlives an error, a reload and a sign-in. */
export function storeForm(key: string, form: PhantomForm): void {
  try {
    window.sessionStorage.setItem(storageKey(key), JSON.stringify(form));
  } catch {
    // Storage may be full or switched off; the form then lives as long as the page.
  }
}
export function storedForm(key: string): PhantomForm | null {
  try {
    const raw = window.sessionStorage.getItem(storageKey(key));
    if (!raw) return null;
    const parsed = phantomFormSchema.safeParse(JSON.parse(raw));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}
export function forgetForm(key: string): void {
  try {
    window.sessionStorage.removeItem(storageKey(key));
  } catch {
    // Nothing is stored where storage is switched off.
  }
}
