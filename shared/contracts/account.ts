import { z } from 'zod';
import { notificationKinds } from '../domain/notifications.ts';
import { siteRoles } from '../domain/permissions.ts';
import { dateTimeSchema } from './common.ts';
import { pageOf, pageQuery } from './pagination.ts';
import { sessionGroupSchema } from './session.ts';

const notificationSettings = <T extends z.ZodType>(value: T) =>
  z.strictObject(Object.fromEntries(notificationKinds.map((kind) => [kind, value])) as Record<(typeof notificationKinds)[number], T>);

export const accountSchema = z
  .object({
    id: z.string(),
    handle: z.string(),
    since: dateTimeSchema,
    about: z.string(),
    email: z.string().nullable(),
    /** Waits for its confirmation link to be followed. */
    pendingEmail: z.string().nullable(),
    siteRoles: z.array(z.enum(siteRoles)),
    /** When an administrator last changed the site roles. */
    siteRolesSince: dateTimeSchema.nullable(),
    groups: z.array(sessionGroupSchema),
    notifications: notificationSettings(z.boolean()),
  })
  .meta({ id: 'Account' });
export type AccountWire = z.infer<typeof accountSchema>;

export const accountEditSchema = z.strictObject({
  about: z.string().trim().max(120, 'Write at most 120 characters.').optional(),
  email: z.email('Write an address such as name@group.example.').max(200).optional(),
  notifications: notificationSettings(z.boolean()).partial().optional(),
});
export const emailConfirmationSchema = z.strictObject({ token: z.string().min(20).max(100) });
/** Closing cannot be undone, so the handle is written out. */
export const accountCloseSchema = z.strictObject({ handle: z.string() });

/** Administration: accounts and their site roles. */
export const userSchema = z.object({
  handle: z.string(),
  siteRoles: z.array(z.enum(siteRoles)),
  groupCount: z.int(),
  since: dateTimeSchema,
  closed: z.boolean(),
});
export const userPageSchema = pageOf(userSchema);
export const userListQuerySchema = z.strictObject({
  ...pageQuery,
  q: z.string().trim().max(80).optional().describe('Part of the handle.'),
  role: z.enum(siteRoles).optional(),
});
export const userParamsSchema = z.strictObject({ handle: z.string().min(1).max(70) });
export const siteRolesEditSchema = z.strictObject({
  siteRoles: z.array(z.enum(['reviewer', 'administrator'])).refine((roles) => new Set(roles).size === roles.length, 'Name each role once.'),
});
export type UserWire = z.infer<typeof userSchema>;
