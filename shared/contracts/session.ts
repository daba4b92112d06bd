import { z } from 'zod';
import { groupRoles, siteRoles, type Actor } from '../domain/permissions.ts';

export const sessionGroupSchema = z.object({
  id: z.string(),
  slug: z.string(),
  name: z.string(),
  roles: z.array(z.enum(groupRoles)),
});

export const sessionAccountSchema = z.object({
  id: z.string(),
  handle: z.string(),
  siteRoles: z.array(z.enum(siteRoles)),
  groups: z.array(sessionGroupSchema),
});
export type SessionAccount = z.infer<typeof sessionAccountSchema>;

/** Who asks, and how to sign in. `standIn` is null unless the local stand-in for sign-in runs. */
export const sessionSchema = z
  .object({
    account: sessionAccountSchema.nullable(),
    via: z.enum(['session', 'token']).nullable(),
    signIn: z.object({
      /** A full page load, not a fetch. Takes `returnTo` (a path of this site) and, with the stand-in, `login`. */
      url: z.string(),
      standIn: z.object({ accounts: z.array(z.object({ handle: z.string(), line: z.string() })) }).nullable(),
    }),
  })
  .meta({ id: 'Session' });
export type Session = z.infer<typeof sessionSchema>;

/** Why a sign-in came back without an account: `/sign-in?failed=...`. */
export const signInFailures = ['denied', 'expired', 'unavailable'] as const;
export type SignInFailure = (typeof signInFailures)[number];

/** The actor that `can()` of the permission table takes. */
export function actorOfAccount(account: SessionAccount | null): Actor | null {
  if (!account) return null;
  return {
    id: account.id,
    siteRoles: account.siteRoles,
    groups: Object.fromEntries(account.groups.map((group) => [group.id, group.roles])),
  };
}
