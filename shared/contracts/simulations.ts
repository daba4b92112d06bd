import { z } from 'zod';
import { checkResultSchema, gridSchema, hashSchema } from './common';
import { encodedArraySchema } from '../domain/array-encoding';
import { dataKinds, noiseReferences, phantomDefinitionSchema } from '../domain/phantom-definition';

/** POST /simulations: clean data of an unsaved phantom. With `checks` the slower checks run too. */
export const simulationRequestSchema = z.strictObject({ definition: phantomDefinitionSchema, checks: z.boolean().default(false) });

export const targetSchema = z.object({ label: z.string(), x: z.number(), y: z.number(), area: z.number(), contrast: z.number() });

export const simulationSchema = z.object({
  /** SHA-256 over the canonical definition. */
  contentHash: hashSchema,
  dataKind: z.enum(dataKinds), noiseReference: z.enum(noiseReferences),
  /** Unit of data, 'V'. */
  dataUnit: z.string(),
  /** Voltages with the target, of the reference (background), and the clean data in the phantom's data kind; pattern-major. */
  frame: z.array(z.number()), reference: z.array(z.number()), clean: z.array(z.number()),
  patterns: z.int(), valuesPerPattern: z.int(),
  /** Printed names: of each pattern ('1–2'), and of each value within its pattern. */
  patternNames: z.array(z.string()), channelNames: z.array(z.array(z.string())),
  /** Norm that the relative noise level refers to, V. */
  noiseScale: z.number(),
  /** Largest absolute change between frame and reference, V. */
  largestChange: z.number(),
  grid: gridSchema,
  /** Truth on the inside pixels, anti-aliased; null while sealed. */
  truth: encodedArraySchema.nullable(), truthRange: z.tuple([z.number(), z.number()]).nullable(),
  background: z.number(), unit: z.string(),
  targets: z.array(targetSchema).nullable(),
  /** Gap between the simulating and the inverting model on the background, relative to the noise reference. */
  modelErrorFloor: z.number(),
  simulation: z.object({ unknowns: z.int(), elements: z.int(), kind: z.string() }),
  inversion: z.object({ cells: z.int(), nodes: z.int() }),
  checks: z.array(checkResultSchema),
  seconds: z.number(),
});
export type Simulation = z.infer<typeof simulationSchema>;
