import { z } from 'zod';
import { tokenScopes } from '../domain/token-scopes.ts';
import { dateTimeSchema } from './common.ts';

export const tokenLifeDays = [30, 90, 365] as const;
export const tokenParamsSchema = z.strictObject({ id: z.string().min(1).max(40) });

export const tokenCreateSchema = z.strictObject({
  name: z.string().trim().min(1, 'Say what will use it.').max(60, 'Write at most 60 characters.'),
  scopes: z
    .array(z.enum(tokenScopes))
    .min(1, 'Choose at least one.')
    .refine((scopes) => new Set(scopes).size === scopes.length, 'Name each scope once.'),
  expiresInDays: z.literal(tokenLifeDays),
});

export const tokenSchema = z.object({
  id: z.string(),
  name: z.string(),
  /** How the token begins. */
  prefix: z.string(),
  scopes: z.array(z.enum(tokenScopes)),
  createdAt: dateTimeSchema,
  lastUsedAt: dateTimeSchema.nullable(),
  expiresAt: dateTimeSchema,
  expired: z.boolean(),
});
export type TokenWire = z.infer<typeof tokenSchema>;
export const tokenListSchema = z.object({ items: z.array(tokenSchema) });
/** The only answer that ever holds the token itself. */
export const tokenCreatedSchema = tokenSchema.extend({ token: z.string() });
