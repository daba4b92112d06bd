import { z } from 'zod';
import { AppError } from '../../shared/errors.ts';

/** Where a page ends: lists run from the newest to the oldest, ties broken by the identifier. */
const placeSchema = z.tuple([z.iso.datetime(), z.string().max(80)]);

export interface Place {
  readonly at: Date;
  readonly id: string;
}

/** @throws AppError 'bad-request' for a cursor that this list did not give */
export function readCursor(cursor: string | undefined): Place | null {
  if (cursor === undefined) return null;
  try {
    const [at, id] = placeSchema.parse(JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8')));
    return { at: new Date(at), id };
  } catch {
    throw new AppError('bad-request', 'The cursor cannot be read. Use the nextCursor of the page before.');
  }
}

/** The condition for rows after the place, in the order of `newestFirst`. */
export const afterPlace = (place: Place | null) =>
  place ? { $or: [{ createdAt: { $lt: place.at } }, { createdAt: place.at, id: { $lt: place.id } }] } : {};

export const newestFirst = { createdAt: 'desc', id: 'desc' } as const;

/** One row more than the page was asked for; the rest tells whether there is a next page. */
export function cutPage<T extends { readonly createdAt: Date; readonly id: string }>(rows: readonly T[], limit: number): { rows: T[]; nextCursor: string | null } {
  const page = rows.slice(0, limit);
  const last = page.at(-1);
  const more = rows.length > limit && last !== undefined;
  return { rows: page, nextCursor: more ? Buffer.from(JSON.stringify([last.createdAt.toISOString(), last.id])).toString('base64url') : null };
}
