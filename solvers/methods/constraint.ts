import type { ForwardProblem } from '../core/types';

export const constraintChoices = [
  { value: 'none', label: 'None' },
  { value: 'nonnegative', label: 'Not negative' },
] as const;

export type ConstraintKey = (typeof constraintChoices)[number]['value'];

/** Lowest change of each unknown under a constraint: what brings the background to 0, never above 0 so that no change is always allowed; null without one. */
export function lowestChange(problem: ForwardProblem, constraint: ConstraintKey): Float64Array | null {
  return constraint === 'none' ? null : problem.background().map((value) => (value > 0 ? -value : 0));
}

/** Raises every entry to its lowest value, where there is one. */
export function raiseTo(z: Float64Array, lowest: Float64Array | null): void {
  if (lowest) for (let j = 0; j < z.length; j++) if (z[j] < lowest[j]) z[j] = lowest[j];
}
