import { defaultLadder } from '../../../shared/domain/ladder';

/** The rule's range and its levels; relative noise as fractions. */
export interface RuleScale {
  readonly min: number;
  readonly max: number;
  readonly levels: readonly number[];
}

/** A ladder's ends are the rule's ends. A ladder of one level gets a factor of 10 to each side. */
export function ruleScale(levels: readonly number[] = defaultLadder): RuleScale {
  const first = levels[0] ?? 1e-4;
  const last = levels[levels.length - 1] ?? 0.3;
  return levels.length > 1 ? { min: first, max: last, levels } : { min: first / 10, max: last <= 1 ? Math.min(1, last * 10) : last * 10, levels };
}

export const clampNoise = (scale: RuleScale, noise: number): number => Math.min(scale.max, Math.max(scale.min, noise));

/** Share of the rule's length, 0 to 1. */
export const toShare = (scale: RuleScale, noise: number): number => Math.log(noise / scale.min) / Math.log(scale.max / scale.min);
export const fromShare = (scale: RuleScale, share: number): number =>
  scale.min * (scale.max / scale.min) ** Math.min(1, Math.max(0, share));

/** Within 0.03 decades of a level the drag snaps to it. */
const snapDecades = 0.03;
/** Closer than this to a level the reading is the level's own, not interpolated. */
const onLevelDecades = 0.004;
const decades = (a: number, b: number): number => Math.abs(Math.log10(a / b));

export const snap = (scale: RuleScale, noise: number): number => scale.levels.find((l) => decades(l, noise) < snapDecades) ?? noise;

/** Index of the nearest level, and whether the noise is on it. */
export function nearestLevel(scale: RuleScale, noise: number): { index: number; level: number; on: boolean } {
  let index = 0;
  scale.levels.forEach((level, i) => {
    if (decades(level, noise) < decades(scale.levels[index] ?? level, noise)) index = i;
  });
  const level = scale.levels[index] ?? noise;
  return { index, level, on: decades(level, noise) < onLevelDecades };
}

/** The next ladder level in a direction; the end of the ladder holds. */
export function stepLevel(scale: RuleScale, noise: number, direction: 1 | -1): number {
  const { levels } = scale;
  if (direction > 0) return levels.find((l) => l > noise * 1.001) ?? levels[levels.length - 1] ?? noise;
  return [...levels].reverse().find((l) => l < noise * 0.999) ?? levels[0] ?? noise;
}
