import { accountCloseSchema, accountEditSchema, accountSchema, emailConfirmationSchema } from '../../shared/contracts/account.ts';
import { tokenCreateSchema, tokenCreatedSchema, tokenListSchema, tokenParamsSchema } from '../../shared/contracts/token.ts';
import { actingOf } from '../http/acting-of.ts';
import type { RequestActor } from '../http/actor.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { closeAccount, confirmEmail, editAccount, showAccount } from '../services/accounts/account.ts';
import { createToken, listTokens, revokeToken } from '../services/tokens/tokens.ts';

const tag = 'account';
const own = (_loaded: undefined, { actor }: { actor: RequestActor }) => ({ accountId: actor.id });

const read = defineRoute({
  method: 'get',
  path: '/account',
  tag,
  summary: 'Your account',
  permission: 'account.read',
  response: accountSchema,
  subject: own,
  handle: ({ em, actor }) => showAccount(em, actor.id),
});

const edit = defineRoute({
  method: 'patch',
  path: '/account',
  tag,
  summary: 'Change your line, address or notifications',
  description: 'A new address counts once its confirmation link was followed.',
  permission: 'account.manage',
  body: accountEditSchema,
  response: accountSchema,
  subject: own,
  handle: async ({ em, body, ...context }) => {
    const account = await editAccount(em, actingOf(context), { rng: context.deps.rng, origin: context.origin }, body);
    context.deps.mailer.kick();
    return account;
  },
});

const confirm = defineRoute({
  method: 'post',
  path: '/account/email-confirmation',
  tag,
  summary: 'Confirm a new e-mail address',
  permission: 'account.manage',
  limit: 'sign-in',
  body: emailConfirmationSchema,
  response: accountSchema,
  subject: own,
  handle: ({ em, body, ...context }) => confirmEmail(em, actingOf(context), body.token),
});

const close = defineRoute({
  method: 'delete',
  path: '/account',
  tag,
  summary: 'Close your account',
  description: 'Address, tokens, sessions and memberships go at once. What was submitted stays.',
  permission: 'account.manage',
  body: accountCloseSchema,
  subject: own,
  handle: async ({ em, body, session, ...context }) => {
    await closeAccount(em, actingOf(context), body.handle);
    await session.end();
  },
});

const tokens = defineRoute({
  method: 'get',
  path: '/account/tokens',
  tag,
  summary: 'List your tokens',
  permission: 'account.manage',
  response: tokenListSchema,
  subject: own,
  handle: ({ em, actor, deps }) => listTokens(em, actor.id, deps.clock()),
});

const makeToken = defineRoute({
  method: 'post',
  path: '/account/tokens',
  tag,
  summary: 'Create a token',
  description: 'The answer holds the token; it is stored hashed and never shown again.',
  permission: 'account.manage',
  body: tokenCreateSchema,
  status: 201,
  response: tokenCreatedSchema,
  subject: own,
  handle: ({ em, body, ...context }) => createToken(em, actingOf(context), context.deps.rng, body),
});

const dropToken = defineRoute({
  method: 'delete',
  path: '/account/tokens/:id',
  tag,
  summary: 'Revoke a token',
  permission: 'account.manage',
  params: tokenParamsSchema,
  subject: own,
  handle: ({ em, params, ...context }) => revokeToken(em, actingOf(context), params.id),
});

export const accountRoutes: readonly Route[] = [read, edit, confirm, close, tokens, makeToken, dropToken];
