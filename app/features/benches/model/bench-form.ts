import { benchCreateSchema, type BenchCreate } from '../../../../shared/contracts/benches';
import { defaultDraws, defaultLadder } from '../../../../shared/domain/ladder';

/** What the form holds: texts as typed. */
export interface BenchForm {
  group: string;
  title: string;
  question: string;
  description: string;
  /** `slug@version`. */
  phantoms: readonly string[];
  /** Per cent, separated by commas or spaces. */
  ladder: string;
  draws: string;
  seed: string;
  rankingMetric: string;
}

const percentText = (fraction: number): string => String(Number((fraction * 100).toPrecision(6)));

export const emptyBenchForm = (group: string, seed: number): BenchForm => ({
  group, title: '', question: '', description: '', phantoms: [], ladder: defaultLadder.map(percentText).join(', '), draws: String(defaultDraws), seed: String(seed), rankingMetric: 'relative-l2-error',
});

const number = (text: string): number => (text.trim() === '' ? NaN : Number(text));

/** The levels typed, as fractions; what is no number stays NaN and is refused by the schema. */
export const parseLadder = (text: string): number[] => text.split(/[\s,;]+/).filter(Boolean).map((t) => Number((number(t) / 100).toPrecision(12)));

/** The request, or the first message of every faulty field by its dotted path. */
export function toBenchRequest(form: BenchForm): { request: BenchCreate; errors: null } | { request: null; errors: ReadonlyMap<string, string> } {
  const candidate = {
    ...form,
    phantoms: form.phantoms.map((p) => ({ slug: p.split('@')[0] ?? '', version: Number(p.split('@')[1]) })),
    ladder: parseLadder(form.ladder), draws: number(form.draws), seed: number(form.seed),
  };
  const parsed = benchCreateSchema.safeParse(candidate);
  if (parsed.success) return { request: candidate, errors: null };
  const errors = new Map<string, string>();
  for (const issue of parsed.error.issues) {
    const field = String(issue.path[0] ?? 'form');
    if (!errors.has(field)) errors.set(field, words[field] ?? issue.message);
  }
  return { request: null, errors };
}

/** Messages that name the limit and a value that works. */
const words: Readonly<Record<string, string>> = {
  group: 'Choose the group that owns the bench.',
  title: 'Write 3 to 80 characters, as in Buried inclusions, 16 electrodes.',
  question: 'Write the question in 10 to 200 characters.',
  phantoms: 'Choose at least one published phantom.',
  ladder: 'Write 1 to 24 increasing levels in per cent, as in 0.1, 1, 10; none above 100.',
  draws: 'Write a whole number from 1 to 200.',
  seed: 'Write a whole number from 0 to 4 294 967 295.',
};
