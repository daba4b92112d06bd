import { z } from 'zod';

/**
 * A phantom as it is registered: ground truth and acquisition geometry. Lengths in m, angles in degrees counter-clockwise
 * from the x axis, conductivity in S/m, contact impedance in ohm m^2, current per unit height in A/m. Its canonical JSON
 * (sorted keys) is what the content hash covers.
 */
export const limits = {
  shapes: 24,
  polygonVertices: 200,
  expressionLength: 500,
  arraySide: 1024,
  frames: 10_000,
  conductivityMin: 1e-6,
  conductivityMax: 1e6,
} as const;

const metres = z.number().min(-100).max(100);
const length = z.number().positive().max(100);
export const conductivitySchema = z
  .number()
  .min(limits.conductivityMin, 'Conductivity must be at least 0.000001 S/m.')
  .max(limits.conductivityMax, 'Conductivity must be at most 1 000 000 S/m.');

const label = z.string().trim().min(1).max(60);
/** A target is scored for position, resolution and amplitude. */
const common = { label, value: conductivitySchema, target: z.boolean().default(true) };

export const ellipseSchema = z.strictObject({
  kind: z.literal('ellipse'), ...common, x: metres, y: metres, semiAxisA: length, semiAxisB: length, angleDeg: z.number().min(-360).max(360).default(0),
});
export const polygonSchema = z.strictObject({
  kind: z.literal('polygon'), ...common, vertices: z.array(z.tuple([metres, metres])).min(3).max(limits.polygonVertices),
});
export const annulusSchema = z.strictObject({
  kind: z.literal('annulus'), ...common, x: metres, y: metres, innerRadius: length, outerRadius: length,
}).refine((s) => s.innerRadius < s.outerRadius, { path: ['innerRadius'], message: 'The inner radius must be smaller than the outer radius.' });
/** Smooth bump: background + (value - background) * (1 - s^2)^2 for s = |elliptic radius| < 1. */
export const bumpSchema = z.strictObject({
  kind: z.literal('bump'), ...common, x: metres, y: metres, semiAxisA: length, semiAxisB: length, angleDeg: z.number().min(-360).max(360).default(0),
});
export const shapeSchema = z.discriminatedUnion('kind', [ellipseSchema, polygonSchema, annulusSchema, bumpSchema]);
export type Shape = z.infer<typeof shapeSchema>;

export const sha256Schema = z.string().regex(/^[0-9a-f]{64}$/, 'A SHA-256 has 64 hexadecimal digits.');

export const extentSchema = z
  .strictObject({ xMin: metres, xMax: metres, yMin: metres, yMax: metres })
  .refine((e) => e.xMin < e.xMax, { path: ['xMax'], message: 'xMax must be greater than xMin.' })
  .refine((e) => e.yMin < e.yMax, { path: ['yMax'], message: 'yMax must be greater than yMin.' });

/** Ground truth by shapes (later ones on top), by an expression in x and y, or by an uploaded array. */
export const shapesTruthSchema = z.strictObject({ kind: z.literal('shapes'), background: conductivitySchema, shapes: z.array(shapeSchema).max(limits.shapes) });
export const expressionTruthSchema = z.strictObject({
  kind: z.literal('expression'), background: conductivitySchema,
  /** In x and y (metres) and r, theta; the value is the conductivity in S/m. */
  expression: z.string().trim().min(1).max(limits.expressionLength),
});
/** Rows of the array run from the largest y (top of the image) down; pixels outside its extent have the background value. */
export const arrayTruthSchema = z.strictObject({
  kind: z.literal('array'), background: conductivitySchema,
  /** The array uploaded beforehand (`POST /api/v1/arrays`), by the SHA-256 of its little-endian Float64 values. */
  sha256: sha256Schema, rows: z.int().min(2).max(limits.arraySide), cols: z.int().min(2).max(limits.arraySide),
  extent: extentSchema,
  /** Conductivity = offset + scale * stored value (PNG grey values are stored as 0 to 1). */
  scale: z.number().default(1), offset: z.number().default(0),
});
export const truthSchema = z.discriminatedUnion('kind', [shapesTruthSchema, expressionTruthSchema, arrayTruthSchema]);
export type TruthDefinition = z.infer<typeof truthSchema>;

export const electrodeCounts = [8, 16, 32] as const;
export const patternKeys = ['adjacent', 'trigonometric'] as const;
export type PatternKey = (typeof patternKeys)[number];
export const measurementKeys = ['adjacent-undriven', 'adjacent-all', 'electrode-voltages'] as const;
export type MeasurementKey = (typeof measurementKeys)[number];
export const dataKinds = ['difference', 'absolute'] as const;
export type DataKind = (typeof dataKinds)[number];

/**
 * Complete electrode model on a disc. Electrode 1 is centred at `firstElectrodeDeg`; the others follow clockwise or
 * counter-clockwise at equal spacing. `electrodeCoverage` is the share of the boundary under all electrodes.
 */
export const eitGeometrySchema = z
  .strictObject({
    body: z.strictObject({ kind: z.literal('disc'), radius: z.number().min(1e-3).max(10) }),
    electrodes: z.literal(electrodeCounts),
    electrodeCoverage: z.number().min(0.1, 'At least 10 % of the boundary.').max(0.9, 'At most 90 % of the boundary.'),
    firstElectrodeDeg: z.number().min(-360).max(360).default(90),
    numbering: z.enum(['clockwise', 'counter-clockwise']).default('clockwise'),
    contactImpedance: z.number().min(1e-7, 'At least 1e-7 ohm m².').max(10, 'At most 10 ohm m².'),
    pattern: z.enum(patternKeys),
    /** Amplitude of the current per unit height, A/m. */
    current: z.number().positive().max(100),
    measurement: z.enum(measurementKeys),
  })
  .refine((g) => !(g.pattern === 'trigonometric' && g.measurement === 'adjacent-undriven'), {
    path: ['measurement'],
    message: 'Trigonometric patterns drive every electrode: measure all adjacent pairs or all electrode voltages.',
  });
export type EitGeometry = z.infer<typeof eitGeometrySchema>;

/**
 * delta is the norm of the noise over the norm of this reference: the raw voltages (of the frame with the target) or the
 * difference signal.
 */
export const noiseReferences = ['voltages', 'difference'] as const;
export type NoiseReference = (typeof noiseReferences)[number];

export const phantomDefinitionFields = {
  family: z.literal('electrical-impedance'),
  truth: truthSchema,
  geometry: eitGeometrySchema,
  dataKind: z.enum(dataKinds),
  noiseReference: z.enum(noiseReferences),
};
export const phantomDefinitionSchema = z
  .strictObject(phantomDefinitionFields)
  .superRefine((d, ctx) => {
    if (d.dataKind === 'absolute' && d.noiseReference === 'difference')
      ctx.addIssue({ code: 'custom', path: ['noiseReference'], message: 'Absolute data have no difference signal: state the noise relative to the voltages.' });
  });
export type PhantomDefinition = z.infer<typeof phantomDefinitionSchema>;
/** What a form or script may send: defaults not yet filled in. */
export type PhantomDefinitionInput = z.input<typeof phantomDefinitionSchema>;
