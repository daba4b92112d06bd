import { z } from 'zod';
import type { Method, ParameterField, RuleSetting } from '../core/types';

interface Common {
  readonly label: string;
  readonly symbol?: string;
  readonly unit?: string;
  readonly help: string;
}
/** A real number in [minimum, maximum]. */
export interface NumberSpec extends Common {
  readonly kind: 'number';
  readonly default: number;
  readonly minimum: number;
  readonly maximum: number;
  readonly scale?: 'linear' | 'log';
}
/** A whole number in [minimum, maximum]. */
export interface IntegerSpec extends Common {
  readonly kind: 'integer';
  readonly default: number;
  readonly minimum: number;
  readonly maximum: number;
}
export interface ChoiceSpec<V extends string = string> extends Common {
  readonly kind: 'choice';
  readonly default: NoInfer<V>;
  readonly choices: readonly { readonly value: V; readonly label: string }[];
}
/** A formula or another short text; `check` says what is wrong with it. */
export interface TextSpec extends Common {
  readonly kind: 'text';
  readonly default: string;
  readonly check?: (text: string) => string | null;
}
export type ParameterSpec = NumberSpec | IntegerSpec | ChoiceSpec | TextSpec;
export type ParametersOf<D> = { [K in keyof D]: D[K] extends ChoiceSpec<infer V> ? V : D[K] extends TextSpec ? string : number };

function schemaOf(spec: ParameterSpec): z.ZodType<number | string> {
  if (spec.kind === 'choice') return z.enum(spec.choices.map((choice) => choice.value)).default(spec.default);
  if (spec.kind === 'text')
    return z.string().trim().min(1, 'Write a formula.').max(60, 'At most 60 characters.').superRefine((text, ctx) => {
      const fault = spec.check?.(text);
      if (fault) ctx.addIssue({ code: 'custom', message: fault });
    }).default(spec.default);
  const range = z.number().min(spec.minimum, `At least ${spec.minimum}.`).max(spec.maximum, `At most ${spec.maximum}.`);
  return (spec.kind === 'integer' ? range.int('A whole number.') : range).default(spec.default);
}

function fieldOf(name: string, spec: ParameterSpec): ParameterField {
  const { label, symbol, unit = '', help } = spec;
  const base = { name, label, unit, help, ...(symbol === undefined ? {} : { symbol }) };
  if (spec.kind === 'choice') return { ...base, kind: 'choice', default: spec.default, choices: spec.choices };
  if (spec.kind === 'text') return { ...base, kind: 'text', default: spec.default };
  return { ...base, kind: spec.kind, default: spec.default, minimum: spec.minimum, maximum: spec.maximum, scale: spec.kind === 'number' ? spec.scale ?? 'linear' : 'linear' };
}

/** One description gives both the strict schema (a missing value takes its default, an unknown name is refused) and the form's fields. */
export function defineParameters<const D extends Record<string, ParameterSpec>>(specs: D): { schema: z.ZodType<ParametersOf<D>>; fields: readonly ParameterField[] } {
  const shape: Record<string, z.ZodType<number | string>> = {};
  const fields: ParameterField[] = [];
  for (const [name, spec] of Object.entries(specs)) {
    shape[name] = schemaOf(spec);
    fields.push(fieldOf(name, spec));
  }
  return { schema: z.strictObject(shape) as unknown as z.ZodType<ParametersOf<D>>, fields };
}

/** One field description without a schema: the meaning of the value of the rule 'fixed'. */
export function defineField(name: string, spec: ParameterSpec): ParameterField {
  return fieldOf(name, spec);
}

/** Forgets the parameter type of a method, for the registry; `prepare` reads its parameters through `readParameters`. */
export function defineMethod<P>(method: Method<P>): Method {
  return method as unknown as Method;
}

/** Parses parameters. @throws RangeError that names the method, each field at fault and what is allowed. */
export function readParameters<P>(methodName: string, schema: z.ZodType<P>, parameters: unknown): P {
  const result = schema.safeParse(parameters);
  if (result.success) return result.data;
  const faults = result.error.issues.map((issue) => `${issue.path.length > 0 ? `${issue.path.join('.')}: ` : ''}${issue.message}`);
  throw new RangeError(`Parameters of ${methodName}: ${faults.join(' ')}`);
}

/**
 * Takes the method's default where no rule is given.
 * @throws RangeError for a rule that the method does not accept, or a setting out of range
 */
export function readRule(method: Pick<Method, 'name' | 'capabilities' | 'defaultRule' | 'fixedValue'>, rule: RuleSetting | null): RuleSetting {
  const setting = rule ?? method.defaultRule;
  if (!setting) throw new RangeError(`${method.name} has no parameter-choice rule.`);
  if (!method.capabilities.rules.includes(setting.key))
    throw new RangeError(`${method.name} does not accept the rule '${setting.key}'. Accepted: ${method.capabilities.rules.join(', ')}.`);
  if (setting.key === 'discrepancy' && !(setting.safetyFactor >= 1 && setting.safetyFactor <= 10))
    throw new RangeError(`The safety factor of the discrepancy principle must lie between 1 and 10, not ${setting.safetyFactor}.`);
  if (setting.key === 'fixed' && method.fixedValue) {
    const { minimum = 0, maximum = Infinity, label, kind } = method.fixedValue;
    if (!(setting.value >= minimum && setting.value <= maximum)) throw new RangeError(`${label} must lie between ${minimum} and ${maximum}, not ${setting.value}.`);
    if (kind === 'integer' && !Number.isInteger(setting.value)) throw new RangeError(`${label} must be a whole number, not ${setting.value}.`);
  }
  return setting;
}
