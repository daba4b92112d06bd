import { z } from 'zod';
import { deblurringGeometrySchema } from './geometry/deblurring';
import { eitGeometrySchema } from './geometry/electrical-impedance';
import { integralEquationGeometrySchema } from './geometry/integral-equation';
import { xrayGeometrySchema } from './geometry/x-ray';
import { conductivityTruthSchema, lineTruthSchema, plainTruthSchema } from './truth-definition';

/*
 * A phantom as it is registered: ground truth and acquisition geometry. Lengths in m, angles in degrees counter-clockwise from
 * the x axis, conductivity in S/m, contact impedance in ohm m^2, current per unit height in A/m. Its canonical JSON (sorted
 * keys) is what the content hash covers.
 */

export const dataKinds = ['difference', 'absolute'] as const;
export type DataKind = (typeof dataKinds)[number];

/**
 * delta is the norm of the noise over the norm of this reference: the raw voltages (of the frame with the target), the
 * difference signal, or, outside electrical impedance, the data.
 */
export const noiseReferences = ['voltages', 'difference', 'data'] as const;
export type NoiseReference = (typeof noiseReferences)[number];

const otherData = { dataKind: z.literal('absolute').default('absolute'), noiseReference: z.literal('data').default('data') };

/** The fields of a definition, family by family. */
export const familyDefinitionFields = {
  'electrical-impedance': {
    family: z.literal('electrical-impedance'), truth: conductivityTruthSchema, geometry: eitGeometrySchema,
    dataKind: z.enum(dataKinds), noiseReference: z.enum(['voltages', 'difference']),
  },
  'x-ray': { family: z.literal('x-ray'), truth: plainTruthSchema, geometry: xrayGeometrySchema, ...otherData },
  'integral-equation': { family: z.literal('integral-equation'), truth: lineTruthSchema, geometry: integralEquationGeometrySchema, ...otherData },
  deblurring: { family: z.literal('deblurring'), truth: plainTruthSchema, geometry: deblurringGeometrySchema, ...otherData },
} as const;

const fields = familyDefinitionFields;
export const phantomDefinitionSchema = z
  .discriminatedUnion('family', [
    z.strictObject(fields['electrical-impedance']),
    z.strictObject(fields['x-ray']),
    z.strictObject(fields['integral-equation']),
    z.strictObject(fields.deblurring),
  ])
  .superRefine((d, ctx) => {
    if (d.dataKind === 'absolute' && d.noiseReference === 'difference')
      ctx.addIssue({ code: 'custom', path: ['noiseReference'], message: 'Absolute data have no difference signal: state the noise relative to the voltages.' });
  });
export type PhantomDefinition = z.infer<typeof phantomDefinitionSchema>;
/** What a form or script may send: defaults not yet filled in. */
export type PhantomDefinitionInput = z.input<typeof phantomDefinitionSchema>;
export type DefinitionOf<F extends PhantomDefinition['family']> = Extract<PhantomDefinition, { family: F }>;
export type Geometry = PhantomDefinition['geometry'];

/** A definition whose ground truth may be sealed to the reader. */
export const readableDefinitionSchema = z.discriminatedUnion('family', [
  z.object({ ...fields['electrical-impedance'], truth: conductivityTruthSchema.nullable() }),
  z.object({ ...fields['x-ray'], truth: plainTruthSchema.nullable() }),
  z.object({ ...fields['integral-equation'], truth: lineTruthSchema.nullable() }),
  z.object({ ...fields.deblurring, truth: plainTruthSchema.nullable() }),
]);
export type ReadableDefinition = z.infer<typeof readableDefinitionSchema>;

/** What an inversion knows of a phantom: everything but the ground truth. `background` in the unit of the unknown. */
export const problemDescriptorSchema = z.discriminatedUnion('family', [
  z.object({ family: z.literal('electrical-impedance'), geometry: eitGeometrySchema, dataKind: z.enum(dataKinds), background: z.number() }),
  z.object({ family: z.literal('x-ray'), geometry: xrayGeometrySchema, dataKind: z.enum(dataKinds), background: z.number() }),
  z.object({ family: z.literal('integral-equation'), geometry: integralEquationGeometrySchema, dataKind: z.enum(dataKinds), background: z.number() }),
  z.object({ family: z.literal('deblurring'), geometry: deblurringGeometrySchema, dataKind: z.enum(dataKinds), background: z.number() }),
]);
export type ProblemDescriptor = z.infer<typeof problemDescriptorSchema>;
