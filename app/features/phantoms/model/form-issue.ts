import { parseDecimal } from '../../../lib/decimal';

/** A fault at a field: the path is the one of the request, so that the server's issues meet the same field. */
export interface FormIssue {
  readonly path: string;
  /** The field as it is called on the page. */
  readonly label: string;
  readonly message: string;
}

export interface NumberRule {
  readonly path: string;
  readonly label: string;
  readonly text: string;
  readonly minimum: number;
  readonly maximum: number;
  readonly unit: string;
  readonly works: string;
  readonly whole?: boolean;
}

const plain = (value: number): string => (Math.abs(value) >= 1e5 || (value !== 0 && Math.abs(value) < 1e-4) ? value.toExponential(0).replace('e', ' × 10^').replace('+', '') : String(value));

export function numberIssue(rule: NumberRule): FormIssue | null {
  const value = parseDecimal(rule.text);
  const unit = rule.unit ? ` ${rule.unit}` : '';
  const issue = (message: string): FormIssue => ({ path: rule.path, label: rule.label, message });
  if (Number.isNaN(value)) return issue(`Write a number, for example ${rule.works}.`);
  if (rule.whole && !Number.isInteger(value)) return issue(`A whole number, for example ${rule.works}.`);
  if (value < rule.minimum) return issue(`At least ${plain(rule.minimum)}${unit}. ${rule.works} works.`);
  if (value > rule.maximum) return issue(`At most ${plain(rule.maximum)}${unit}. ${rule.works} works.`);
  return null;
}

/**
 * The numbers of a list: separated by spaces, semicolons, or commas with a space or a point in play. NaN for what is none.
 * '0,1 0,2' is two numbers with decimal commas, '0.1,0.2' two with points.
 */
export function parseNumbers(text: string): number[] {
  const parts = text.trim().split(/[\s;]+|,(?=\s|$)/).flatMap((part) => (/^-?\d+,\d+$/.test(part) ? [part] : part.split(',')));
  return parts.filter((part) => part !== '').map(parseDecimal);
}

/** A list that holds something that is no number. */
export function listIssue(path: string, label: string, values: readonly number[], works: string): FormIssue | null {
  const at = values.findIndex(Number.isNaN);
  return at < 0 ? null : { path, label, message: `Entry ${at + 1} is not a number. ${works} works.` };
}

export const geometryPath = 'definition.geometry';
export const truthPath = 'definition.truth';
