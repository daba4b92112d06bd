import { z } from 'zod';
import { decimalText, parseDecimal } from '../../../lib/decimal';
import type { Configuration } from '../../../../shared/contracts/solvers';
import type { Method, ParameterField, RuleKey, RuleSetting } from '../../../../solvers/core/types';
import { methods } from '../../../../solvers/methods/registry';
import { parameterRules } from '../../../../solvers/parameter-choice/registry';

const text = z.string();
const ruleKeys = ['fixed', 'discrepancy', 'gcv', 'l-curve', 'quasi-optimality', 'cumulative-periodogram'] as const;
/** The form as it is typed; numbers stay text until they are read. */
export const solverFormSchema = z.object({
  bench: text, group: text, name: text, description: text, whatChanged: text, method: text,
  /** Text by parameter name, for the chosen method. */
  values: z.record(text, text), rule: z.enum(ruleKeys).nullable(),
  /** Text by 'rule.field'. */
  ruleValues: z.record(text, text),
  notTuned: z.boolean(), ownMesh: z.boolean(), sourceMayBePublished: z.boolean(),
});
export type SolverForm = z.infer<typeof solverFormSchema>;

export interface FormIssue {
  readonly path: string;
  readonly label: string;
  readonly message: string;
}

export const parameterPath = (name: string): string => `configuration.parameters.${name}`;
export const rulePath = (name: string): string => `configuration.rule.${name}`;
export const fieldId = (path: string): string => `s-${path.replaceAll('.', '-')}`;

const asText = (value: number | string): string => (typeof value === 'number' ? decimalText(value) : value);

/** Settings of a rule as fields; what 'fixed' fixes is the method's. */
export function ruleFields(method: Method, rule: RuleKey): readonly ParameterField[] {
  if (rule === 'fixed') return method.fixedValue ? [{ ...method.fixedValue, name: 'value' }] : [];
  return parameterRules.find((r) => r.key === rule)?.fields ?? [];
}

/** Everything that depends on the method, at its defaults. */
export function methodDefaults(method: Method): Pick<SolverForm, 'method' | 'values' | 'rule' | 'ruleValues'> {
  const ruleValues: Record<string, string> = {};
  for (const rule of method.capabilities.rules) for (const field of ruleFields(method, rule)) ruleValues[`${rule}.${field.name}`] = asText(field.default);
  const standing = method.defaultRule;
  if (standing) for (const [name, value] of Object.entries(standing)) if (name !== 'key') ruleValues[`${standing.key}.${name}`] = asText(value);
  return { method: method.key, values: Object.fromEntries(method.fields.map((f) => [f.name, asText(f.default)])), rule: standing?.key ?? null, ruleValues };
}

export const findMethod = (key: string): Method | undefined => methods.find((m) => m.key === key);

export function emptySolverForm(group: string, bench: string): SolverForm {
  const first = methods.find((m) => m.class === 'variational') ?? methods[0]!;
  return { bench, group, name: '', description: '', whatChanged: '', ...methodDefaults(first), notTuned: false, ownMesh: false, sourceMayBePublished: false };
}

/** The form of a stored configuration, for its next version. */
export function formFromConfiguration(base: SolverForm, configuration: Configuration): SolverForm {
  const method = findMethod(configuration.method);
  if (!method) return base;
  const defaults = methodDefaults(method);
  const values = { ...defaults.values };
  for (const [name, value] of Object.entries(configuration.parameters)) values[name] = asText(value);
  const ruleValues = { ...defaults.ruleValues };
  const { rule } = configuration;
  if (rule) for (const [name, value] of Object.entries(rule)) if (name !== 'key') ruleValues[`${rule.key}.${name}`] = asText(value);
  return { ...base, ...defaults, values, ruleValues, rule: rule?.key ?? null };
}

const written = (value: number): string => (value !== 0 && (Math.abs(value) < 1e-3 || Math.abs(value) >= 1e5) ? value.toExponential().replace('+', '') : String(value));

/** The fault of one number: names the limit and a value that works. */
export function fieldFault(field: ParameterField, typed: string): string | null {
  if (field.kind === 'choice') return field.choices?.some((c) => c.value === typed) ? null : `Choose one of ${field.choices?.map((c) => c.label).join(', ') ?? ''}.`;
  if (field.kind === 'text') return typed.trim() ? null : `Write something, for example ${field.default}.`;
  const value = parseDecimal(typed);
  const unit = field.unit ? ` ${field.unit}` : '';
  if (Number.isNaN(value)) return `Write a number, for example ${written(Number(field.default))}.`;
  if (field.minimum !== undefined && value < field.minimum) return `At least ${written(field.minimum)}${unit}. ${written(Number(field.default))} works.`;
  if (field.maximum !== undefined && value > field.maximum) return `At most ${written(field.maximum)}${unit}. ${written(Number(field.default))} works.`;
  if (field.kind === 'integer' && !Number.isInteger(value)) return `A whole number. ${Math.round(value)} works.`;
  return null;
}

function readRule(method: Method, form: SolverForm, issues: FormIssue[]): RuleSetting | null {
  const key = form.rule;
  if (!key) {
    if (method.capabilities.rules.length > 0) issues.push({ path: 'configuration.rule', label: 'Rule', message: 'Choose how the parameter is found.' });
    return null;
  }
  const numbers: Record<string, number> = {};
  for (const field of ruleFields(method, key)) {
    const typed = form.ruleValues[`${key}.${field.name}`] ?? '';
    const fault = fieldFault(field, typed);
    if (fault) issues.push({ path: rulePath(field.name), label: field.label, message: fault });
    numbers[field.name] = parseDecimal(typed);
  }
  if (key === 'fixed') return { key, value: numbers.value ?? Number.NaN };
  if (key === 'discrepancy') return { key, safetyFactor: numbers.safetyFactor ?? Number.NaN };
  return { key };
}

/** The configuration where it is complete, else the faults in it. What the method's own schema refuses is named at its field. */
export function readConfiguration(form: SolverForm): { configuration: Configuration | null; issues: FormIssue[] } {
  const method = findMethod(form.method);
  if (!method) return { configuration: null, issues: [{ path: 'configuration.method', label: 'Method', message: 'Choose a method.' }] };
  const issues: FormIssue[] = [];
  const parameters: Record<string, number | string> = {};
  for (const field of method.fields) {
    const typed = form.values[field.name] ?? '';
    const fault = fieldFault(field, typed);
    if (fault) issues.push({ path: parameterPath(field.name), label: field.label, message: fault });
    parameters[field.name] = field.kind === 'choice' || field.kind === 'text' ? typed : parseDecimal(typed);
  }
  const rule = readRule(method, form, issues);
  if (issues.length === 0) {
    const parsed = method.parameters.safeParse(parameters);
    if (!parsed.success)
      for (const issue of parsed.error.issues) {
        const name = String(issue.path[0] ?? '');
        issues.push({ path: parameterPath(name), label: method.fields.find((f) => f.name === name)?.label ?? 'Parameters', message: issue.message });
      }
  }
  return issues.length ? { configuration: null, issues } : { configuration: { method: method.key, parameters, rule }, issues };
}

export type SolverMode = 'new' | 'next';

/** What stands between the form and its submission. */
export function readSolverForm(form: SolverForm, mode: SolverMode): { configuration: Configuration | null; issues: FormIssue[] } {
  const { configuration, issues } = readConfiguration(form);
  const name = form.name.trim();
  const terms: FormIssue[] = [];
  if (mode === 'new') {
    if (!form.group) terms.push({ path: 'group', label: 'Group', message: 'Choose the group that will own it.' });
    if (name.length < 3) terms.push({ path: 'name', label: 'Name in the table', message: 'Give it a name of 3 letters or more.' });
    if (name.length > 80) terms.push({ path: 'name', label: 'Name in the table', message: `At most 80 characters; there are ${name.length}.` });
  } else if (form.whatChanged.trim().length < 5) terms.push({ path: 'whatChanged', label: 'What changed', message: 'Say what changed, in 5 letters or more.' });
  return { configuration, issues: [...terms, ...issues] };
}

/** The step of the phone form that holds a field: 1 bench and name, 2 method, 3 parameters, 4 rule, 5 declaration. */
export function stepOf(path: string): number {
  if (path.startsWith('configuration.parameters')) return 3;
  if (path.startsWith('configuration.rule')) return 4;
  if (path.startsWith('configuration')) return 2;
  if (path.startsWith('declaration')) return 5;
  return 1;
}

export function labelOf(path: string, form: SolverForm): string {
  const method = findMethod(form.method);
  const parameter = method?.fields.find((f) => parameterPath(f.name) === path);
  if (parameter) return parameter.label;
  if (path.startsWith('configuration.rule')) return 'Rule';
  return { name: 'Name in the table', group: 'Group', whatChanged: 'What changed', description: 'Description' }[path] ?? 'The form';
}

const storageKey = (key: string): string => `hadamark.solver-form.${key}`;
export function storeSolverForm(key: string, form: SolverForm): void {
  try {
    window.sessionStorage.setItem(storageKey(key), JSON.stringify(form));
  } catch {
    // Storage may be full or switched off; the form then lives as long as the page.
  }
}
export function storedSolverForm(key: string): SolverForm | null {
  try {
    const parsed = solverFormSchema.safeParse(JSON.parse(window.sessionStorage.getItem(storageKey(key)) ?? 'null'));
    return parsed.success && findMethod(parsed.data.method) ? parsed.data : null;
  } catch {
    return null;
  }
}
export function forgetSolverForm(key: string): void {
  try {
    window.sessionStorage.removeItem(storageKey(key));
  } catch {
    // Nothing is stored where storage is switched off.
  }
}
