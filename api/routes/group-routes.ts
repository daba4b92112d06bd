import {
  groupCreateSchema,
  groupEditSchema,
  groupListQuerySchema,
  groupPageSchema,
  groupParamsSchema,
  groupSchema,
  invitationCreateSchema,
  invitationListSchema,
  invitationParamsSchema,
  invitationPreviewSchema,
  invitationSchema,
  invitationTokenSchema,
  memberListSchema,
  memberParamsSchema,
  memberRolesSchema,
} from '../../shared/contracts/group.ts';
import { actingOf } from '../http/acting-of.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { createGroup, editGroup } from '../services/groups/change-group.ts';
import { removeMember, setMemberRoles } from '../services/groups/change-members.ts';
import { findGroup } from '../services/groups/find-group.ts';
import {
  acceptInvitation,
  findInvitationByToken,
  invitationState,
  invite,
  listInvitations,
  resendInvitation,
  revokeInvitation,
} from '../services/groups/invitations.ts';
import { listGroups, listMembers, showGroup } from '../services/groups/show-groups.ts';
import type { Group } from '../entities/group.ts';

const tag = 'groups';
const ofGroup = (group: Group) => ({ groupId: group.id });

const list = defineRoute({
  method: 'get',
  path: '/groups',
  tag,
  summary: 'List groups, newest first',
  permission: 'public',
  query: groupListQuerySchema,
  response: groupPageSchema,
  handle: ({ em, actor, query }) => listGroups(em, actor, query),
});

const create = defineRoute({
  method: 'post',
  path: '/groups',
  tag,
  summary: 'Create a group and own it',
  permission: 'group.create',
  body: groupCreateSchema,
  status: 201,
  response: groupSchema,
  location: (group) => `/api/v1/groups/${group.slug}`,
  handle: async ({ em, body, ...context }) => {
    const group = await createGroup(em, actingOf(context), body);
    return showGroup(em, { ...context.actor, groups: { [group.id]: ['owner'] } }, group);
  },
});

const read = defineRoute({
  method: 'get',
  path: '/groups/:slug',
  tag,
  summary: 'Read a group',
  permission: 'public',
  params: groupParamsSchema,
  response: groupSchema,
  handle: async ({ em, actor, params }) => showGroup(em, actor, await findGroup(em, params.slug)),
});

const edit = defineRoute({
  method: 'patch',
  path: '/groups/:slug',
  tag,
  summary: 'Change name or description',
  permission: 'group.manage',
  params: groupParamsSchema,
  body: groupEditSchema,
  response: groupSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: async ({ em, body, loaded, ...context }) => showGroup(em, context.actor, await editGroup(em, actingOf(context), loaded, body)),
});

const members = defineRoute({
  method: 'get',
  path: '/groups/:slug/members',
  tag,
  summary: 'List members and their roles',
  permission: 'group.read-members',
  params: groupParamsSchema,
  response: memberListSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: ({ em, actor, loaded }) => listMembers(em, actor, loaded),
});

const setRoles = defineRoute({
  method: 'put',
  path: '/groups/:slug/members/:handle',
  tag,
  summary: 'Set the roles of a member',
  description: 'The last owner cannot be cleared.',
  permission: 'group.manage',
  params: memberParamsSchema,
  body: memberRolesSchema,
  response: memberListSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: async ({ em, params, body, loaded, ...context }) => {
    await setMemberRoles(em, actingOf(context), loaded, params.handle, body.roles);
    return listMembers(em, context.actor, loaded);
  },
});

const remove = defineRoute({
  method: 'delete',
  path: '/groups/:slug/members/:handle',
  tag,
  summary: 'Remove a member',
  permission: 'group.manage',
  params: memberParamsSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: ({ em, params, loaded, ...context }) => removeMember(em, actingOf(context), loaded, params.handle),
});

const leave = defineRoute({
  method: 'delete',
  path: '/groups/:slug/membership',
  tag,
  summary: 'Leave a group',
  permission: 'account.manage',
  params: groupParamsSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: (_group, { actor }) => ({ accountId: actor.id }),
  handle: ({ em, loaded, ...context }) => removeMember(em, actingOf(context), loaded, context.actor.handle),
});

const invitations = defineRoute({
  method: 'get',
  path: '/groups/:slug/invitations',
  tag,
  summary: 'List invitations that are open or expired',
  permission: 'group.manage',
  params: groupParamsSchema,
  response: invitationListSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: ({ em, loaded, deps }) => listInvitations(em, loaded, deps.clock()),
});

const sendInvitation = defineRoute({
  method: 'post',
  path: '/groups/:slug/invitations',
  tag,
  summary: 'Invite somebody by e-mail',
  permission: 'group.manage',
  params: groupParamsSchema,
  body: invitationCreateSchema,
  status: 201,
  response: invitationSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: async ({ em, body, loaded, ...context }) => {
    const sent = await invite(em, actingOf(context), { rng: context.deps.rng, origin: context.origin }, loaded, body);
    context.deps.mailer.kick();
    return sent;
  },
});

const sendAgain = defineRoute({
  method: 'post',
  path: '/groups/:slug/invitations/:id/sending',
  tag,
  summary: 'Send an invitation again, with a new link',
  permission: 'group.manage',
  params: invitationParamsSchema,
  response: invitationSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: async ({ em, params, loaded, ...context }) => {
    const sent = await resendInvitation(em, actingOf(context), { rng: context.deps.rng, origin: context.origin }, loaded, params.id);
    context.deps.mailer.kick();
    return sent;
  },
});

const revoke = defineRoute({
  method: 'delete',
  path: '/groups/:slug/invitations/:id',
  tag,
  summary: 'Revoke an invitation',
  permission: 'group.manage',
  params: invitationParamsSchema,
  load: ({ em, params }) => findGroup(em, params.slug),
  subject: ofGroup,
  handle: ({ em, params, loaded, ...context }) => revokeInvitation(em, actingOf(context), loaded, params.id),
});

const preview = defineRoute({
  method: 'post',
  path: '/invitations/preview',
  tag,
  summary: 'What the holder of an invitation link is invited to',
  permission: 'public',
  limit: 'sign-in',
  body: invitationTokenSchema,
  response: invitationPreviewSchema,
  handle: async ({ em, body, deps }) => {
    const invitation = await findInvitationByToken(em, body.token);
    return {
      group: invitation.group.getEntity(),
      roles: invitation.roles,
      invitedBy: { handle: invitation.invitedBy.getEntity().handle },
      expiresAt: invitation.expiresAt.toISOString(),
      state: invitationState(invitation, deps.clock()),
    };
  },
});

const accept = defineRoute({
  method: 'post',
  path: '/invitations/acceptance',
  tag,
  summary: 'Accept an invitation',
  permission: 'account.manage',
  limit: 'sign-in',
  body: invitationTokenSchema,
  response: groupSchema,
  subject: (_nothing, { actor }) => ({ accountId: actor.id }),
  handle: async ({ em, body, ...context }) => {
    const group = await acceptInvitation(em, actingOf(context), body.token);
    return showGroup(em, context.actor, group);
  },
});

export const groupRoutes: readonly Route[] = [
  list,
  create,
  read,
  edit,
  members,
  setRoles,
  remove,
  leave,
  invitations,
  sendInvitation,
  sendAgain,
  revoke,
  preview,
  accept,
];
