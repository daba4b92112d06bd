import { sessionSchema } from '../../shared/contracts/session.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { describeSession } from '../services/accounts/describe-session.ts';

const readSession = defineRoute({
  method: 'get',
  path: '/session',
  tag: 'session',
  summary: 'Who is signed in, with which roles, and how to sign in',
  permission: 'public',
  response: sessionSchema,
  handle: ({ em, actor, deps }) => describeSession(em, { actor, standIn: deps.env.github ? null : deps.standInAccounts }),
});

const endSession = defineRoute({
  method: 'delete',
  path: '/session',
  tag: 'session',
  summary: 'Sign out',
  permission: 'public',
  handle: ({ session }) => session.end(),
});

export const sessionRoutes: readonly Route[] = [readSession, endSession];
