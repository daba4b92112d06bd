import { z } from 'zod';
import { arrayUploadResponseSchema } from '../../../../shared/contracts/arrays';
import type { FamilyKey } from '../../../../shared/domain/families';
import { measurementKeys, patternKeys } from '../../../../shared/domain/geometry/electrical-impedance';
import { edgeKeys, pointSpreadKeys } from '../../../../shared/domain/geometry/deblurring';
import { equationKeys } from '../../../../shared/domain/geometry/integral-equation';
import { beamKeys } from '../../../../shared/domain/geometry/x-ray';
import { newShapeId } from './draft-shape';

/*
 * The parts of the phantom form as they are typed: numbers stay text until they are read. Lengths in mm, coverage in %, current in mA
 * per metre, angles in degrees. A list of numbers is one text with separators.
 */
const text = z.string();
const draftShapeSchema = z.object({
  id: text, kind: z.enum(['ellipse', 'polygon', 'annulus', 'bump']), label: text, target: z.boolean(), x: text, y: text, a: text, b: text, angle: text, value: text,
  vertices: z.array(z.tuple([text, text]).readonly()).readonly(),
});

export const truthDraftSchema = z.object({
  truthKind: z.enum(['shapes', 'expression', 'array', 'standard']), background: text, shapes: z.array(draftShapeSchema), combine: z.enum(['replace', 'add']), expression: text,
  array: arrayUploadResponseSchema.nullable(), extent: z.object({ xMin: text, xMax: text, yMin: text, yMax: text }), scale: text, offset: text,
});
export type TruthDraft = z.infer<typeof truthDraftSchema>;
export type TruthKind = TruthDraft['truthKind'];
export const truthDraftKeys = Object.keys(truthDraftSchema.shape) as (keyof TruthDraft)[];

export const eitDraftSchema = z.object({
  outline: z.enum(['disc', 'star']), radius: text, cosine: text, sine: text,
  electrodes: text, coverage: text, placing: z.enum(['even', 'listed']), firstElectrodeDeg: text, angles: text, numbering: z.enum(['clockwise', 'counter-clockwise']),
  contacts: z.enum(['one', 'each']), contactImpedance: text, contactImpedances: text,
  pattern: z.enum(patternKeys), skip: text, currents: text, current: text, measurement: z.enum(measurementKeys),
});
export type EitDraft = z.infer<typeof eitDraftSchema>;

export const xrayDraftSchema = z.object({
  radius: text, beam: z.enum(beamKeys), views: text, firstAngleDeg: text, arcDeg: text, detectors: text, detectorSpacing: text, sourceDistance: text, detectorDistance: text, cells: text,
});
export type XrayDraft = z.infer<typeof xrayDraftSchema>;

export const equationDraftSchema = z.object({ equation: z.enum(equationKeys), cells: text, points: text, depth: text, diffusivity: text });
export type EquationDraft = z.infer<typeof equationDraftSchema>;

export const deblurringDraftSchema = z.object({
  width: text, height: text, pointSpread: z.enum(pointSpreadKeys), spread: text, motionDeg: text, cells: text, edge: z.enum(edgeKeys),
});
export type DeblurringDraft = z.infer<typeof deblurringDraftSchema>;

export const emptyEit: EitDraft = {
  outline: 'disc', radius: '150', cosine: '0, 0.08', sine: '0.05', electrodes: '16', coverage: '34', placing: 'even', firstElectrodeDeg: '90', angles: '', numbering: 'clockwise',
  contacts: 'one', contactImpedance: '0.0024', contactImpedances: '', pattern: 'adjacent', skip: '1', currents: '', current: '5', measurement: 'adjacent-undriven',
};
export const emptyXray: XrayDraft = {
  radius: '100', beam: 'parallel', views: '60', firstAngleDeg: '0', arcDeg: '180', detectors: '64', detectorSpacing: '3.2', sourceDistance: '300', detectorDistance: '200', cells: '40',
};
export const emptyEquation: EquationDraft = { equation: 'phillips', cells: '200', points: '200', depth: '0.25', diffusivity: '1' };
export const emptyDeblurring: DeblurringDraft = { width: '100', height: '100', pointSpread: 'gaussian', spread: '3', motionDeg: '0', cells: '32', edge: 'reflective' };

/** The ways in which a family's ground truth can be given, the first being the usual one. */
export const truthKinds: Record<FamilyKey, readonly TruthKind[]> = {
  'electrical-impedance': ['shapes', 'expression', 'array'],
  'x-ray': ['shapes', 'expression', 'array'],
  'integral-equation': ['standard', 'expression'],
  deblurring: ['shapes', 'expression', 'array'],
};

const square = (half: string): TruthDraft['extent'] => ({ xMin: `-${half}`, xMax: half, yMin: `-${half}`, yMax: half });
const common = { combine: 'replace', array: null, scale: '1', offset: '0' } as const;
const ellipse = (label: string, x: string, y: string, a: string, b: string, angle: string, value: string): TruthDraft['shapes'][number] =>
  ({ id: newShapeId(), kind: 'ellipse', label, target: true, x, y, a, b, angle, value, vertices: [] });

/** A ground truth to begin with. */
export function emptyTruth(family: FamilyKey): TruthDraft {
  switch (family) {
    case 'electrical-impedance':
      return {
        ...common, truthKind: 'shapes', background: '1', extent: square('150'), expression: '1 + 0.9*exp(-((x + 0.045)^2 + (y - 0.0375)^2)/0.0011)',
        shapes: [ellipse('Lobe', '-54', '39', '41', '30', '29', '2'), ellipse('Rod', '60', '-39', '30', '39', '-17', '0.38')],
      };
    case 'x-ray':
      return {
        ...common, truthKind: 'shapes', background: '0', extent: square('100'), expression: 'hypot(x, y) < 0.07 ? 20 : 0',
        shapes: [{ ...ellipse('Casing', '0', '0', '80', '62', '0', '20'), target: false }, ellipse('Inclusion', '-28', '14', '16', '10', '30', '34'), ellipse('Void', '30', '-16', '12', '12', '0', '4')],
      };
    case 'integral-equation':
      return { ...common, truthKind: 'standard', background: '0', extent: square('1'), expression: 'exp(-20*(x - 0.5)^2)', shapes: [] };
    case 'deblurring':
      return {
        ...common, truthKind: 'shapes', background: '0', extent: square('50'), expression: 'abs(x) < 0.02 and abs(y) < 0.01 ? 1 : 0',
        shapes: [ellipse('Spot', '-20', '16', '8', '8', '0', '1'), ellipse('Bar', '14', '-8', '22', '4', '35', '0.7')],
      };
  }
}
