import { randomUUID } from 'node:crypto';
import { invite } from '../../../api/services/groups/invitations.ts';
import { GroupEntity } from '../../../api/entities/group.ts';
import type { RouteCases } from './route-case.ts';
import type { WalkWorld } from './walk-world.ts';

const empty = () => ({});

async function newInvitation(world: WalkWorld): Promise<string> {
  const { app, own } = world;
  const em = app.orm.em.fork();
  const group = await em.findOneOrFail(GroupEntity, { id: own.id });
  const owner = await app.account(world.handleOf('owner'));
  const actor = { id: owner.id, handle: owner.handle, siteRoles: [], groups: {} };
  const sent = await invite(em, { actor, now: new Date() }, { rng: app.deps.rng, origin: app.url }, group, {
    email: `${randomUUID()}@hadamark.example`,
    roles: ['observer'],
  });
  return sent.id;
}

async function newMember(world: WalkWorld): Promise<string> {
  const { app, own } = world;
  const { addMember } = await import('../../../api/services/groups/change-group.ts');
  const em = app.orm.em.fork();
  const group = await em.findOneOrFail(GroupEntity, { id: own.id });
  const user = await app.account(`walk-${randomUUID().slice(0, 8)}`);
  await addMember(em, { actor: { id: user.id, handle: user.handle, siteRoles: [], groups: {} }, now: new Date() }, group, user, ['observer']);
  return user.handle;
}

/** Site, session, account, groups and administration. */
export const foundationRouteCases: RouteCases = {
  'GET /health': { path: () => '/health' },
  'GET /verification': { path: () => '/verification' },
  'GET /verification.csv': { path: () => '/verification.csv' },
  'GET /session': { path: () => '/session' },
  'DELETE /session': { path: () => '/session', endsSession: true },
  'GET /account': { path: () => '/account' },
  'PATCH /account': { path: () => '/account', body: empty },
  'POST /account/email-confirmation': { path: () => '/account/email-confirmation', body: empty },
  // The wrong handle is refused after the permission check, so nobody is closed.
  'DELETE /account': { path: () => '/account', body: () => ({ handle: 'not-this-one' }) },
  'GET /account/tokens': { path: () => '/account/tokens' },
  'POST /account/tokens': { path: () => '/account/tokens', body: empty },
  'DELETE /account/tokens/:id': {
    path: async (world, walker) => {
      if (walker === 'visitor') return '/account/tokens/none';
      const made = await world.clients[walker].post('/api/v1/account/tokens', { name: 'walk', scopes: ['read'], expiresInDays: 30 });
      return `/account/tokens/${(made.body as { id: string }).id}`;
    },
  },
  'GET /groups': { path: () => '/groups' },
  'POST /groups': { path: () => '/groups', body: empty },
  'GET /groups/:slug': { path: ({ own }) => `/groups/${own.slug}` },
  'PATCH /groups/:slug': { path: ({ own }) => `/groups/${own.slug}`, body: empty },
  'GET /groups/:slug/members': { path: ({ own }) => `/groups/${own.slug}/members` },
  'PUT /groups/:slug/members/:handle': {
    path: ({ own, handleOf }) => `/groups/${own.slug}/members/${handleOf('observer')}`,
    body: () => ({ roles: ['observer'] }),
  },
  'DELETE /groups/:slug/members/:handle': { path: async (world) => `/groups/${world.own.slug}/members/${await newMember(world)}` },
  'DELETE /groups/:slug/membership': {
    path: async (world, walker) => {
      // A group of the walker's own with a second owner, so that leaving is possible and harms nobody.
      if (walker === 'visitor') return `/groups/${world.own.slug}/membership`;
      const group = await world.app.group(`Left ${randomUUID().slice(0, 8)}`, { 'walk-keeper': ['owner'], [world.handleOf(walker)]: ['observer'] });
      return `/groups/${group.slug}/membership`;
    },
  },
  'GET /groups/:slug/invitations': { path: ({ own }) => `/groups/${own.slug}/invitations` },
  'POST /groups/:slug/invitations': { path: ({ own }) => `/groups/${own.slug}/invitations`, body: empty },
  'POST /groups/:slug/invitations/:id/sending': { path: async (world) => `/groups/${world.own.slug}/invitations/${await newInvitation(world)}/sending` },
  'DELETE /groups/:slug/invitations/:id': { path: async (world) => `/groups/${world.own.slug}/invitations/${await newInvitation(world)}` },
  'POST /invitations/preview': { path: () => '/invitations/preview', body: empty },
  'POST /invitations/acceptance': { path: () => '/invitations/acceptance', body: empty },
  'GET /admin/users': { path: () => '/admin/users' },
  'PUT /admin/users/:handle/site-roles': { path: ({ handleOf }) => `/admin/users/${handleOf('stranger')}/site-roles`, body: () => ({ siteRoles: [] }) },
  'GET /admin/audit': { path: () => '/admin/audit' },
  'GET /admin/outbox': { path: () => '/admin/outbox' },
};
