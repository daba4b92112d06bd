import type { CheckResult, Source } from '../core/types';

/** A validation with a figure and a bound. One file in `solvers/checks`, one line in its registry. */
export interface Check<Input> {
  readonly key: string;
  readonly name: string;
  /** Unit of the figure; '' for a pure number. */
  readonly unit: string;
  readonly bound: number;
  readonly comparison: 'at-most' | 'at-least' | 'equal';
  /** LaTeX. */
  readonly formula: string;
  readonly summary: string;
  readonly source: Source;
  evaluate(input: Input): CheckResult;
}

type Described = Pick<Check<never>, 'key' | 'name' | 'unit' | 'bound' | 'comparison' | 'source'>;

/** Result of a figure that was measured; a figure that is not a number fails. */
export function judge(check: Described, figure: number, meaning: string): CheckResult {
  const holds = check.comparison === 'at-most' ? figure <= check.bound : check.comparison === 'at-least' ? figure >= check.bound : figure === check.bound;
  return {
    key: check.key, name: check.name, state: holds ? 'pass' : 'fail', figure: Number.isFinite(figure) ? figure : null, bound: check.bound,
    comparison: check.comparison, unit: check.unit, meaning, source: check.source.short,
  };
}

/** Result of a check that does not apply, with the reason. */
export function notApplicable(check: Described, reason: string): CheckResult {
  return { key: check.key, name: check.name, state: 'not-applicable', figure: null, bound: check.bound, comparison: check.comparison, unit: check.unit, meaning: reason, source: check.source.short };
}
