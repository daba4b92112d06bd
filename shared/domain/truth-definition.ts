import { z } from 'zod';
import { metres, limits } from './limits';

/**
 * Ground truths. Every family has its own admissible values (conductivity is positive, attenuation may be zero); the rest of the
 * definition is the same.
 */
const length = z.number().positive().max(100);

export const conductivitySchema = z
  .number()
  .min(limits.conductivityMin, 'Conductivity must be at least 0.000001 S/m.')
  .max(limits.conductivityMax, 'Conductivity must be at most 1 000 000 S/m.');
/** A value of any sign: attenuation differences, intensities. */
export const plainValueSchema = z.number().min(-limits.plainValueMax, 'At least -1 000 000.').max(limits.plainValueMax, 'At most 1 000 000.');

const label = z.string().trim().min(1).max(60);
type ValueSchema = z.ZodNumber;

/** The shapes with their values. A target is scored for position, resolution and amplitude. */
function shapeSchemaOf(value: ValueSchema) {
  const common = { label, value, target: z.boolean().default(true) };
  const place = { x: metres, y: metres };
  const ellipse = z.strictObject({
    kind: z.literal('ellipse'), ...common, ...place, semiAxisA: length, semiAxisB: length, angleDeg: z.number().min(-360).max(360).default(0),
  });
  const polygon = z.strictObject({ kind: z.literal('polygon'), ...common, vertices: z.array(z.tuple([metres, metres])).min(3).max(limits.polygonVertices) });
  const annulus = z.strictObject({ kind: z.literal('annulus'), ...common, ...place, innerRadius: length, outerRadius: length })
    .refine((s) => s.innerRadius < s.outerRadius, { path: ['innerRadius'], message: 'The inner radius must be smaller than the outer radius.' });
  /** Smooth bump: background + (value - background) * (1 - s^2)^2 for s = |elliptic radius| < 1. */
  const bump = z.strictObject({
    kind: z.literal('bump'), ...common, ...place, semiAxisA: length, semiAxisB: length, angleDeg: z.number().min(-360).max(360).default(0),
  });
  return z.discriminatedUnion('kind', [ellipse, polygon, annulus, bump]);
}
export const shapeSchema = shapeSchemaOf(conductivitySchema);
const plainShapeSchema = shapeSchemaOf(plainValueSchema);
export type Shape = z.infer<typeof shapeSchema>;

export const sha256Schema = z.string().regex(/^[0-9a-f]{64}$/, 'A SHA-256 has 64 hexadecimal digits.');

export const extentSchema = z
  .strictObject({ xMin: metres, xMax: metres, yMin: metres, yMax: metres })
  .refine((e) => e.xMin < e.xMax, { path: ['xMax'], message: 'xMax must be greater than xMin.' })
  .refine((e) => e.yMin < e.yMax, { path: ['yMax'], message: 'yMax must be greater than yMin.' });

/** In x and y (metres) and r, theta; on a line in x alone. */
const expressionOf = (background: ValueSchema) =>
  z.strictObject({ kind: z.literal('expression'), background, expression: z.string().trim().min(1).max(limits.expressionLength) });

/** Rows of the array run from the largest y (top of the image) down; pixels outside its extent have the background value. */
const arrayOf = (background: ValueSchema) =>
  z.strictObject({
    kind: z.literal('array'), background,
    /** The array uploaded beforehand (`POST /api/v1/arrays`), by the SHA-256 of its little-endian Float64 values. */
    sha256: sha256Schema, rows: z.int().min(2).max(limits.arraySide), cols: z.int().min(2).max(limits.arraySide),
    extent: extentSchema,
    /** Value = offset + scale * stored value (PNG grey values are stored as 0 to 1). */
    scale: z.number().default(1), offset: z.number().default(0),
  });

/** Conductivities: later shapes lie on top of earlier ones. */
export const conductivityTruthSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('shapes'), background: conductivitySchema, shapes: z.array(shapeSchema).max(limits.shapes) }),
  expressionOf(conductivitySchema),
  arrayOf(conductivitySchema),
]);

/** Values of any sign. With `combine: 'add'` the value of a shape adds to what lies below it, as tables of ellipses are printed. */
export const plainTruthSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('shapes'), background: plainValueSchema, combine: z.enum(['replace', 'add']).optional(), shapes: z.array(plainShapeSchema).max(limits.shapes) }),
  expressionOf(plainValueSchema),
  arrayOf(plainValueSchema),
]);

/** A function of one variable: the published solution of the equation, or an expression in x. */
export const lineTruthSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('standard'), background: plainValueSchema.default(0) }),
  expressionOf(plainValueSchema),
]);

export type TruthDefinition = z.infer<typeof conductivityTruthSchema> | z.infer<typeof plainTruthSchema> | z.infer<typeof lineTruthSchema>;
