import { siteRolesEditSchema, userListQuerySchema, userPageSchema, userParamsSchema, userSchema } from '../../shared/contracts/account.ts';
import { auditPageSchema, auditQuerySchema } from '../../shared/contracts/audit.ts';
import { outboxPageSchema, outboxQuerySchema } from '../../shared/contracts/outbox.ts';
import { actingOf } from '../http/acting-of.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { listUsers, setSiteRoles } from '../services/accounts/site-roles.ts';
import { listAudit } from '../services/audit/list-audit.ts';
import { listOutbox } from '../services/mail/list-outbox.ts';

const tag = 'administration';

const users = defineRoute({
  method: 'get',
  path: '/admin/users',
  tag,
  summary: 'List accounts, newest first',
  permission: 'site.administer',
  query: userListQuerySchema,
  response: userPageSchema,
  handle: ({ em, query }) => listUsers(em, query),
});

const setRoles = defineRoute({
  method: 'put',
  path: '/admin/users/:handle/site-roles',
  tag,
  summary: "Set an account's site roles",
  description: 'The last administrator cannot be cleared.',
  permission: 'site.administer',
  params: userParamsSchema,
  body: siteRolesEditSchema,
  response: userSchema,
  handle: ({ em, params, body, ...context }) => setSiteRoles(em, actingOf(context), params.handle, body.siteRoles),
});

const audit = defineRoute({
  method: 'get',
  path: '/admin/audit',
  tag,
  summary: 'Read the audit trail, newest first',
  permission: 'site.administer',
  query: auditQuerySchema,
  response: auditPageSchema,
  handle: ({ em, query }) => listAudit(em, query),
});

const outbox = defineRoute({
  method: 'get',
  path: '/admin/outbox',
  tag,
  summary: 'Read the outbox, newest first',
  permission: 'site.administer',
  query: outboxQuerySchema,
  response: outboxPageSchema,
  handle: async ({ em, query, deps }) => ({ ...(await listOutbox(em, query)), delivers: deps.env.smtpUrl !== null }),
});

export const adminRoutes: readonly Route[] = [users, setRoles, audit, outbox];
