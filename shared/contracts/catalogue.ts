import { z } from 'zod';
import { familyKeySchema } from './common';
import { axisKeySchema } from '../domain/axes';
import { dataKinds } from '../domain/phantom-definition';

/**
 * What this instance can compute, straight from the registries in `solvers/`: the forms, the reference page and scripts
 * read these lists.
 */
export const sourceSchema = z.object({
  /** Author and year. */
  short: z.string(), full: z.string(),
  /** The reference was written from memory and not compared with the original. */
  fromMemory: z.boolean(),
});
export type SourceWire = z.infer<typeof sourceSchema>;

export const parameterFieldSchema = z.object({
  name: z.string(), label: z.string(), symbol: z.string().nullable(), unit: z.string(), help: z.string(),
  kind: z.enum(['number', 'integer', 'choice', 'text']), default: z.union([z.number(), z.string()]),
  minimum: z.number().nullable(), maximum: z.number().nullable(), scale: z.enum(['linear', 'log']),
  choices: z.array(z.object({ value: z.string(), label: z.string() })),
});
export type ParameterFieldWire = z.infer<typeof parameterFieldSchema>;

export const methodSchema = z.object({
  key: z.string(), name: z.string(), class: z.string(), summary: z.string(), formula: z.string(), sources: z.array(sourceSchema),
  fields: z.array(parameterFieldSchema),
  /** The parameters as JSON Schema, draft 2020-12. */
  parameterSchema: z.record(z.string(), z.unknown()),
  capabilities: z.object({
    linear: z.boolean(), nonlinear: z.boolean(), direct: z.boolean(), statistical: z.boolean(),
    families: z.array(familyKeySchema), dataKinds: z.array(z.enum(dataKinds)), rules: z.array(z.string()),
  }),
  defaultRule: z.record(z.string(), z.union([z.string(), z.number()])).nullable(),
  /** What the value of the rule 'fixed' means for this method. */
  fixedValue: parameterFieldSchema.nullable(),
});
export type MethodWire = z.infer<typeof methodSchema>;

export const metricSchema = z.object({
  key: z.string(), name: z.string(), short: z.string(), unit: z.string(), better: z.enum(['lower', 'higher', 'one', 'zero']), formula: z.string(),
  summary: z.string(), sources: z.array(sourceSchema), traps: z.array(z.string()),
});
export type MetricWire = z.infer<typeof metricSchema>;

export const ruleSchema = z.object({
  key: z.string(), name: z.string(), summary: z.string(), formula: z.string(), sources: z.array(sourceSchema),
  /** The rule is told the norm of the noise. */
  usesNoiseLevel: z.boolean(),
  fields: z.array(parameterFieldSchema),
  /** How this code settles what sources leave open. */
  conventions: z.array(z.string()),
  /** Keys of the methods that accept it. */
  methods: z.array(z.string()),
});
export type RuleWire = z.infer<typeof ruleSchema>;

export const noiseModelSchema = z.object({
  key: z.string(), name: z.string(), summary: z.string(), formula: z.string(), sources: z.array(sourceSchema), exact: z.boolean(), families: z.array(familyKeySchema),
});
export type NoiseModelWire = z.infer<typeof noiseModelSchema>;

export const checkDescriptionSchema = z.object({
  key: z.string(), name: z.string(),
  /** What it looks at: a simulated phantom, the model that inverts, a prepared method, a finished run. */
  appliesTo: z.enum(['phantom', 'problem', 'method', 'run']),
  unit: z.string(), bound: z.number(), comparison: z.enum(['at-most', 'at-least', 'equal']), formula: z.string(), summary: z.string(), sources: z.array(sourceSchema),
});
export type CheckDescription = z.infer<typeof checkDescriptionSchema>;

export const statisticSchema = z.object({
  key: z.string(), name: z.string(),
  /** What is compared or summarised, and over what. */
  over: z.string(), formula: z.string(), summary: z.string(), traps: z.array(z.string()), sources: z.array(sourceSchema),
});
export type StatisticWire = z.infer<typeof statisticSchema>;

export const problemDefinitionSchema = z.object({
  key: z.string(), name: z.string(), family: familyKeySchema, summary: z.string(), formula: z.string(),
  facts: z.array(z.tuple([z.string(), z.string()])), conventions: z.array(z.string()), sources: z.array(sourceSchema),
});
export type ProblemDefinitionWire = z.infer<typeof problemDefinitionSchema>;

export const axisDescriptionSchema = z.object({
  key: axisKeySchema, name: z.string(), line: z.string(), print: z.enum(['share', 'factor']), minimum: z.number(), maximum: z.number(),
  defaultLevels: z.array(z.number()), families: z.array(familyKeySchema),
});
export type AxisDescription = z.infer<typeof axisDescriptionSchema>;

export const conventionSchema = z.object({ key: z.string(), name: z.string(), text: z.string() });
export type ConventionWire = z.infer<typeof conventionSchema>;

export const problemListSchema = z.object({ items: z.array(problemDefinitionSchema) });
export const axisListSchema = z.object({ items: z.array(axisDescriptionSchema) });
export const conventionListSchema = z.object({ items: z.array(conventionSchema) });
export const methodListSchema = z.object({ items: z.array(methodSchema) });
export const metricListSchema = z.object({ items: z.array(metricSchema) });
export const ruleListSchema = z.object({ items: z.array(ruleSchema) });
export const noiseModelListSchema = z.object({ items: z.array(noiseModelSchema) });
export const checkListSchema = z.object({ items: z.array(checkDescriptionSchema) });
export const statisticListSchema = z.object({ items: z.array(statisticSchema) });
