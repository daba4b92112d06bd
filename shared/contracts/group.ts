import { z } from 'zod';
import { groupRoles } from '../domain/permissions.ts';
import { accountRefSchema, dateTimeSchema, slugSchema } from './common.ts';
import { pageOf, pageQuery } from './pagination.ts';

const nameSchema = z.string().trim().min(3, 'Write at least 3 characters.').max(80, 'Write at most 80 characters.');
const descriptionSchema = z.string().trim().max(500, 'Write at most 500 characters.');
export const groupRolesSchema = z
  .array(z.enum(groupRoles))
  .min(1, 'Choose at least one role.')
  .max(groupRoles.length)
  .refine((roles) => new Set(roles).size === roles.length, 'Name each role once.');

export const groupParamsSchema = z.strictObject({ slug: slugSchema });
export const memberParamsSchema = z.strictObject({ slug: slugSchema, handle: z.string().min(1).max(70) });
export const invitationParamsSchema = z.strictObject({ slug: slugSchema, id: z.string().min(1).max(40) });

export const groupListQuerySchema = z.strictObject({ ...pageQuery, q: z.string().trim().max(80).optional().describe('Part of the name.') });
export const groupCreateSchema = z.strictObject({ name: nameSchema, slug: slugSchema.optional(), description: descriptionSchema.default('') });
export const groupEditSchema = z.strictObject({ name: nameSchema.optional(), description: descriptionSchema.optional() });
export const memberRolesSchema = z.strictObject({ roles: groupRolesSchema });
export const invitationCreateSchema = z.strictObject({
  email: z.email('Write an address such as name@group.example.').max(200),
  roles: groupRolesSchema,
});
/** The token comes from the link in the invitation; it travels in the body so that no log holds it. */
export const invitationTokenSchema = z.strictObject({ token: z.string().min(20).max(100) });

export const groupSchema = z
  .object({
    id: z.string(),
    slug: slugSchema,
    name: z.string(),
    description: z.string(),
    since: dateTimeSchema,
    memberCount: z.int(),
    /** Roles of the reader in this group. */
    yourRoles: z.array(z.enum(groupRoles)),
  })
  .meta({ id: 'Group' });
export type GroupWire = z.infer<typeof groupSchema>;
export const groupPageSchema = pageOf(groupSchema);

export const memberSchema = z.object({
  handle: z.string(),
  roles: z.array(z.enum(groupRoles)),
  since: dateTimeSchema,
  you: z.boolean(),
});
export const memberListSchema = z.object({ items: z.array(memberSchema) });
export type MemberWire = z.infer<typeof memberSchema>;

export const invitationStates = ['open', 'expired', 'accepted', 'revoked'] as const;
export const invitationSchema = z.object({
  id: z.string(),
  email: z.string(),
  roles: z.array(z.enum(groupRoles)),
  invitedBy: accountRefSchema,
  sentAt: dateTimeSchema,
  expiresAt: dateTimeSchema,
  state: z.enum(invitationStates),
});
export const invitationListSchema = z.object({ items: z.array(invitationSchema) });
export type InvitationWire = z.infer<typeof invitationSchema>;

/** What the holder of an invitation's link sees before accepting. */
export const invitationPreviewSchema = z.object({
  group: z.object({ slug: slugSchema, name: z.string(), description: z.string() }),
  roles: z.array(z.enum(groupRoles)),
  invitedBy: accountRefSchema,
  expiresAt: dateTimeSchema,
  state: z.enum(invitationStates),
});
