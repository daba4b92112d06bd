import type { EntityManager } from '@mikro-orm/sqlite';

export const idPrefixes = { phantom: 'PH', solver: 'SV', bench: 'BN', run: 'RN' } as const;

/**
 * The next readable identifier, e.g. 'PH-031'. One statement raises and reads the counter, so two requests never get the
 * same number; inside a transaction that fails the number is given out again.
 */
export async function nextId(em: EntityManager, noun: keyof typeof idPrefixes): Promise<string> {
  const prefix = idPrefixes[noun];
  const rows: { value: number }[] = await em.execute(
    'insert into `counter` (`prefix`, `value`) values (?, 1) on conflict (`prefix`) do update set `value` = `value` + 1 returning `value`',
    [prefix],
  );
  const value = rows[0]?.value;
  if (value === undefined) throw new Error(`The counter of ${prefix} gave no number.`);
  return `${prefix}-${String(value).padStart(3, '0')}`;
}

/** 'Two discs, 16 electrodes' -> 'two-discs-16-electrodes'; 'unnamed' where no Latin letter or digit is left. */
export function slugify(name: string): string {
  const slug = name
    .normalize('NFKD')
    // The accent that the normal form has split off is no gap in a word.
    .replace(/\p{M}+/gu, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .slice(0, 70)
    .replace(/^-+|-+$/g, '');
  return slug === '' ? 'unnamed' : slug;
}

/** The slug of a name, with the first free number behind it where it is taken. */
export async function freeSlug(name: string, taken: (slug: string) => Promise<boolean>): Promise<string> {
  const slug = slugify(name);
  for (let n = 1; ; n++) {
    const candidate = n === 1 ? slug : `${slug}-${n}`;
    if (!(await taken(candidate))) return candidate;
  }
}
