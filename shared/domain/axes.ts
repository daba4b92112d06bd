import { z } from 'zod';
import type { FamilyKey } from './families';

/** What a run varies from level to level. On every axis but the noise, the noise is fixed. */
export const axisKeys = ['noise', 'contrast', 'electrode-displacement', 'contact-impedance', 'body-outline', 'missing-angles', 'missing-channels'] as const;
export const axisKeySchema = z.enum(axisKeys);
export type AxisKey = z.infer<typeof axisKeySchema>;

export interface AxisWords {
  readonly name: string;
  /** Head of a table's column. */
  readonly short: string;
  /** What a level means, one sentence. */
  readonly line: string;
  /** 'share' is printed in per cent, 'factor' as a plain number. */
  readonly print: 'share' | 'factor';
  readonly minimum: number;
  readonly maximum: number;
  readonly defaultLevels: readonly number[];
  readonly families: readonly FamilyKey[];
}

const every: readonly FamilyKey[] = ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'];

export const axisWords: Record<AxisKey, AxisWords> = {
  noise: {
    name: 'Noise', short: 'noise', line: 'Relative level of the noise added to the data.', print: 'share', minimum: 1e-8, maximum: 1,
    defaultLevels: [0.0001, 0.0003, 0.001, 0.002, 0.005, 0.01, 0.02, 0.05, 0.1, 0.3], families: every,
  },
  contrast: {
    name: 'Contrast', short: 'contrast', line: 'The departure of the ground truth from its background times this factor; conductivities keep their sign, because their logarithm is scaled.', print: 'factor', minimum: 0.01, maximum: 10,
    defaultLevels: [0.1, 0.25, 0.5, 1, 1.5, 2, 3], families: every,
  },
  'electrode-displacement': {
    name: 'Misplaced electrodes', short: 'misplaced', line: 'Standard deviation of the places of the electrodes in the experiment, as a share of their spacing; the inversion is not told.', print: 'share', minimum: 1e-4, maximum: 0.2,
    defaultLevels: [0.002, 0.005, 0.01, 0.02, 0.05, 0.1], families: ['electrical-impedance'],
  },
  'contact-impedance': {
    name: 'Wrong contact impedance', short: 'contact', line: 'The contact impedance of the experiment is larger than the one that the inversion is told, by this share of it.', print: 'share', minimum: 0.001, maximum: 10,
    defaultLevels: [0.02, 0.05, 0.1, 0.2, 0.5, 1], families: ['electrical-impedance'],
  },
  'body-outline': {
    name: 'Wrong outline', short: 'outline', line: 'The body of the experiment is stretched: r(theta) grows by this share of the radius times cos 2 theta; the inversion is not told.', print: 'share', minimum: 1e-4, maximum: 0.15,
    defaultLevels: [0.002, 0.005, 0.01, 0.02, 0.05, 0.1], families: ['electrical-impedance'],
  },
  'missing-angles': {
    name: 'Missing angles', short: 'missing', line: 'Share of the views lost at the end of the arc; the inversion has the others.', print: 'share', minimum: 0.01, maximum: 0.9,
    defaultLevels: [0.1, 0.2, 0.35, 0.5, 0.65, 0.8], families: ['x-ray'],
  },
  'missing-channels': {
    name: 'Missing channels', short: 'missing', line: 'Share of the data values lost at random places; the inversion has the others.', print: 'share', minimum: 0.005, maximum: 0.9,
    defaultLevels: [0.05, 0.1, 0.2, 0.35, 0.5, 0.7], families: every,
  },
};

/** The axis of a bench: the noise itself, or another one at a fixed relative noise. */
export const axisSettingSchema = z.discriminatedUnion('key', [
  z.strictObject({ key: z.literal('noise') }),
  z.strictObject({ key: z.enum(axisKeys.filter((key) => key !== 'noise') as [Exclude<AxisKey, 'noise'>, ...Exclude<AxisKey, 'noise'>[]]), noise: z.number().min(1e-8).max(1) }),
]);
export type AxisSetting = z.infer<typeof axisSettingSchema>;

/** What is wrong with levels on an axis, null where nothing is. */
export function levelsFault(axis: AxisKey, levels: readonly number[]): string | null {
  const { minimum, maximum, name } = axisWords[axis];
  const bad = levels.find((level) => !(level >= minimum && level <= maximum));
  return bad === undefined ? null : `${name}: levels lie between ${minimum} and ${maximum}, not ${bad}.`;
}
