import { littleEndianBytes, sha256Hex } from '../core/hash';
import type { Source } from '../core/types';

export const verificationGroups = ['Forward models', 'Derivatives', 'Methods', 'Metrics and statistics', 'Randomness and hashes'] as const;
export type VerificationGroup = (typeof verificationGroups)[number];

/** What came out of one check. */
export interface VerificationOutcome {
  /** The value that stands against the published one. */
  readonly measured: number | string;
  /** Distance to the published value in the measure of the bound, 0 where they are equal. */
  readonly gap: number;
  /** What `measured` leaves unsaid. */
  readonly words?: string;
  /** SHA-256 over the exact bits of what was computed: equal on two engines exactly when the results are. */
  readonly digest: string;
}

/** A value published elsewhere, computed again by the code that scores the runs. One file for a small group, one line in the registry. */
export interface VerificationCheck {
  readonly key: string;
  readonly group: VerificationGroup;
  readonly name: string;
  /** What is computed, on one line. */
  readonly line: string;
  /** As printed at the source. */
  readonly published: string;
  /** Of the published value; '' for a pure number. */
  readonly unit: string;
  /** Largest gap that passes. */
  readonly bound: number;
  /** Why the bound is what it is. */
  readonly reason: string;
  readonly source: Source;
  /** 'heavy': seconds of a processor rather than milliseconds. */
  readonly cost: 'light' | 'heavy';
  run(): VerificationOutcome;
}

/** A gap that is not a number fails. */
export const withinBound = (gap: number, bound: number): boolean => gap <= bound;

/** Bound over gap: how many times larger the gap could be. Infinity where nothing differs. */
export const marginOf = (gap: number, bound: number): number => (gap === 0 ? Infinity : bound / gap);

/** SHA-256 over the bytes of arrays, numbers and texts, in their order; minus zero and zero differ. */
export function digestOf(...parts: readonly (Float64Array | number | string)[]): string {
  return sha256Hex(parts.map((part) => sha256Hex(typeof part === 'string' ? part : littleEndianBytes(typeof part === 'number' ? Float64Array.of(part) : part))).join('\n'));
}

/** Largest difference over the largest reference value; NaN where a value is. */
export function largestGap(values: ArrayLike<number>, reference: ArrayLike<number>): number {
  let difference = 0;
  let largest = 0;
  for (let i = 0; i < reference.length; i++) {
    difference = Math.max(difference, Math.abs(values[i] - reference[i]));
    largest = Math.max(largest, Math.abs(reference[i]));
  }
  return difference / largest;
}

/** Euclidean distance over the norm of the reference. */
export function euclideanGap(values: ArrayLike<number>, reference: ArrayLike<number>): number {
  let difference = 0;
  let size = 0;
  for (let i = 0; i < reference.length; i++) {
    const d = values[i] - reference[i];
    difference += d * d;
    size += reference[i] * reference[i];
  }
  return Math.sqrt(difference / size);
}

export const relativeGap = (value: number, reference: number): number => Math.abs(value - reference) / Math.abs(reference);

/** The entry of largest magnitude, the first of equals. */
export function largestEntry(values: ArrayLike<number>): number {
  let at = 0;
  for (let i = 1; i < values.length; i++) if (Math.abs(values[i]) > Math.abs(values[at])) at = i;
  return at;
}
