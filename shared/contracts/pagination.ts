import { z } from 'zod';

/** A whole number written in a query string. Coercion would read an empty value as 0, so the text is checked first. */
export const queryInteger = (minimum: number, maximum: number) =>
  z
    .string()
    .regex(/^-?\d{1,15}$/, 'Write a whole number.')
    .transform(Number)
    .pipe(z.int().min(minimum).max(maximum));

export const defaultPageSize = 50;

/** Spread into a resource's query: `z.strictObject({ ...pageQuery, state: ... })`. */
export const pageQuery = {
  cursor: z.string().max(500).optional().describe('The nextCursor of the page before.'),
  limit: queryInteger(1, 200).optional().describe(`Rows on a page, ${defaultPageSize} when absent.`),
};
export const pageQuerySchema = z.strictObject(pageQuery);
export interface PageQuery {
  readonly cursor?: string | undefined;
  readonly limit?: number | undefined;
}

/** One page of a list, and where the next begins. */
export const pageOf = <T extends z.ZodType>(item: T) =>
  z.object({ items: z.array(item), nextCursor: z.string().nullable() });
