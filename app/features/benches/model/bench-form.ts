import { benchCreateSchema, type BenchCreate } from '../../../../shared/contracts/benches';
import { axisKeys, axisWords, type AxisKey } from '../../../../shared/domain/axes';
import type { FamilyKey } from '../../../../shared/domain/families';
import { defaultDraws, defaultLadder } from '../../../../shared/domain/ladder';
import type { NoiseModel } from '../../../../solvers/noise/noise-model';
import { noiseModels } from '../../../../solvers/noise/registry';

/** What the form holds: texts as typed. */
export interface BenchForm {
  group: string;
  title: string;
  question: string;
  description: string;
  /** `slug@version`. */
  phantoms: readonly string[];
  /** Key of a noise model. */
  noiseModel: string;
  axis: AxisKey;
  /** Per cent, the same at every level; used where the axis is not the noise. */
  axisNoise: string;
  /** Per cent or plain factors, as the axis is printed, separated by commas or spaces. */
  ladder: string;
  draws: string;
  seed: string;
  rankingMetric: string;
}

const percentText = (fraction: number): string => String(Number((fraction * 100).toPrecision(6)));

export const emptyBenchForm = (group: string, seed: number): BenchForm => ({
  group, title: '', question: '', description: '', phantoms: [], noiseModel: 'gaussian', axis: 'noise', axisNoise: '0.5', ladder: defaultLadder.map(percentText).join(', '), draws: String(defaultDraws), seed: String(seed), rankingMetric: 'relative-l2-error',
});

const number = (text: string): number => (text.trim() === '' ? NaN : Number(text));

const share = (text: string): number => Number((number(text) / 100).toPrecision(12));

/** The levels typed, in the axis's own unit; what is no number stays NaN and is refused by the schema. */
export const parseLadder = (text: string, axis: AxisKey = 'noise'): number[] => text.split(/[\s,;]+/).filter(Boolean).map(axisWords[axis].print === 'share' ? share : number);

const levelText = (axis: AxisKey, level: number): string => (axisWords[axis].print === 'share' ? percentText(level) : String(level));
/** The levels that are offered first, as they are typed. */
export const offeredLevels = (axis: AxisKey): string => (axis === 'noise' ? defaultLadder : axisWords[axis].defaultLevels).map((level) => levelText(axis, level)).join(', ');

/** Axes that serve every family among the chosen phantoms; all of them while none is chosen. */
export const axesFor = (families: readonly FamilyKey[]): AxisKey[] => axisKeys.filter((key) => families.every((family) => axisWords[key].families.includes(family)));

/** Noise models that occur in every family among the chosen phantoms. */
export const noiseModelsFor = (families: readonly FamilyKey[]): NoiseModel[] => noiseModels.filter((model) => families.every((family) => model.families.includes(family)));

/** The request, or the first message of every faulty field by its dotted path. */
export function toBenchRequest(form: BenchForm): { request: BenchCreate; errors: null } | { request: null; errors: ReadonlyMap<string, string> } {
  const { axisNoise, ...typed } = form;
  const candidate = {
    ...typed,
    phantoms: form.phantoms.map((p) => ({ slug: p.split('@')[0] ?? '', version: Number(p.split('@')[1]) })),
    axis: form.axis === 'noise' ? { key: form.axis } : { key: form.axis, noise: share(axisNoise) },
    ladder: parseLadder(form.ladder, form.axis), draws: number(form.draws), seed: number(form.seed),
  };
  const parsed = benchCreateSchema.safeParse(candidate);
  if (parsed.success) return { request: candidate, errors: null };
  const errors = new Map<string, string>();
  for (const issue of parsed.error.issues) {
    const field = issue.path[0] === 'axis' && issue.path[1] === 'noise' ? 'axisNoise' : String(issue.path[0] ?? 'form');
    if (!errors.has(field)) errors.set(field, (field === 'ladder' ? ladderWords(form.axis) : words[field]) ?? issue.message);
  }
  return { request: null, errors };
}

function ladderWords(axis: AxisKey): string {
  if (axis === 'noise') return 'Write 1 to 24 increasing levels in per cent, as in 0.1, 1, 10; none above 100.';
  const { minimum, maximum, defaultLevels, print } = axisWords[axis];
  const unit = print === 'share' ? ' in per cent' : '';
  return `Write 1 to 24 increasing levels${unit}, as in ${defaultLevels.slice(0, 3).map((level) => levelText(axis, level)).join(', ')}; from ${levelText(axis, minimum)} to ${levelText(axis, maximum)}.`;
}

/** Messages that name the limit and a value that works. */
const words: Readonly<Record<string, string>> = {
  group: 'Choose the group that owns the bench.',
  title: 'Write 3 to 80 characters, as in Buried inclusions, 16 electrodes.',
  question: 'Write the question in 10 to 200 characters.',
  phantoms: 'Choose at least one published phantom.',
  axisNoise: 'Write one noise level in per cent, as in 0.5; none above 100.',
  draws: 'Write a whole number from 1 to 200.',
  seed: 'Write a whole number from 0 to 4 294 967 295.',
};
