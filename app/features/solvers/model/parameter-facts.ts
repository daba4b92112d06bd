import { formatNumber } from '../../../lib/format';
import type { Configuration } from '../../../../shared/contracts/solvers';
import type { ParameterField, RuleSetting } from '../../../../solvers/core/types';
import { parameterRules } from '../../../../solvers/parameter-choice/registry';

const short = (value: number): string => (Number.isInteger(value) && Math.abs(value) < 1e5 ? String(value) : formatNumber(value, Math.abs(value) < 1e-3 ? 1 : 2));

/** '0.1 to 10.' for the help line. */
export function allowedRange(field: ParameterField): string {
  const { minimum, maximum } = field;
  if (minimum !== undefined && maximum !== undefined) return `${short(minimum)} to ${short(maximum)}.`;
  if (minimum !== undefined) return `${short(minimum)} or more.`;
  if (maximum !== undefined) return `${short(maximum)} or less.`;
  return '';
}

/** The same for the table of a solver's page. */
export function allowedWords(field: ParameterField): string {
  if (field.kind === 'text') return 'a formula';
  return field.kind === 'choice' ? `${field.choices?.length ?? 0} choices` : allowedRange(field).replace(/\.$/, '') || 'any';
}

export function valueWords(field: ParameterField, value: number | string | undefined): string {
  if (value === undefined) return '–';
  if (field.kind === 'choice') return field.choices?.find((c) => c.value === value)?.label ?? String(value);
  return typeof value === 'number' ? (Number.isInteger(value) ? String(value) : formatNumber(value, 3)) : value;
}

/** 'discrepancy principle, factor 1.05'. */
export function ruleWords(rule: RuleSetting | Configuration['rule']): string {
  if (!rule) return 'none, there is no parameter to choose';
  const name = parameterRules.find((r) => r.key === rule.key)?.name.toLowerCase() ?? rule.key;
  if (rule.key === 'discrepancy') return `${name}, factor ${formatNumber(rule.safetyFactor, 3)}`;
  if (rule.key === 'fixed') return `${name} at ${formatNumber(rule.value, 3)}`;
  return name.replace(/^l-/, 'L-');
}

export const noiseWords = (rule: Configuration['rule']): string =>
  !rule ? 'not asked by a rule' : parameterRules.find((r) => r.key === rule.key)?.usesNoiseLevel ? 'told, not estimated' : 'not used by the rule';
