import { randomUUID } from 'node:crypto';
import type { EntityManager } from '@mikro-orm/sqlite';
import { AppError } from '../../../shared/errors.ts';
import type { InvitationWire } from '../../../shared/contracts/group.ts';
import type { GroupRole } from '../../../shared/domain/permissions.ts';
import { InvitationEntity, type Group, type Invitation } from '../../entities/group.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { queueMail } from '../mail/queue-mail.ts';
import { randomSecret, secretHash } from '../secret-hash.ts';
import { addMember } from './change-group.ts';

const lifeDays = 14;
const dayMs = 24 * 60 * 60 * 1000;

interface Sending {
  readonly rng: (bytes: number) => Uint8Array;
  /** Scheme and host for the link in the message. */
  readonly origin: string;
}

export function invitationState(invitation: Invitation, now: Date): InvitationWire['state'] {
  if (invitation.acceptedAt) return 'accepted';
  if (invitation.revokedAt) return 'revoked';
  return invitation.expiresAt <= now ? 'expired' : 'open';
}

export async function listInvitations(em: EntityManager, group: Group, now: Date): Promise<{ items: InvitationWire[] }> {
  const rows = await em.find(
    InvitationEntity,
    { group: group.id, acceptedAt: null, revokedAt: null },
    { populate: ['invitedBy'], orderBy: { sentAt: 'desc', id: 'desc' }, limit: 200 },
  );
  return { items: rows.map((row) => wire(row, now)) };
}

/** Invites by e-mail. An invitation still open for the same address is replaced, so that one link works at a time. */
export async function invite(
  em: EntityManager,
  acting: Acting,
  sending: Sending,
  group: Group,
  input: { readonly email: string; readonly roles: readonly GroupRole[] },
): Promise<InvitationWire> {
  const email = input.email.toLowerCase();
  for (const open of await em.find(InvitationEntity, { group: group.id, email, acceptedAt: null, revokedAt: null })) {
    open.revokedAt = acting.now;
  }
  const token = randomSecret(sending.rng);
  const invitation = em.create(InvitationEntity, {
    id: randomUUID(),
    group,
    invitedBy: em.getReference(UserEntity, acting.actor.id),
    email,
    roles: [...input.roles],
    tokenHash: secretHash(token),
    sentAt: acting.now,
    expiresAt: new Date(acting.now.getTime() + lifeDays * dayMs),
    acceptedAt: null,
    acceptedBy: null,
    revokedAt: null,
  });
  recordAudit(em, {
    actor: acting.actor,
    at: acting.now,
    requestId: acting.requestId,
    action: 'group.invitation-sent',
    subject: { type: 'invitation', id: invitation.id },
    groupId: group.id,
    after: { roles: input.roles },
  });
  send(em, acting, sending, group, invitation, token);
  await em.flush();
  await em.populate(invitation, ['invitedBy']);
  return wire(invitation, acting.now);
}

/** A new link for the same invitation; the old link stops working. */
export async function resendInvitation(em: EntityManager, acting: Acting, sending: Sending, group: Group, id: string): Promise<InvitationWire> {
  const invitation = await openInvitation(em, group, id);
  const token = randomSecret(sending.rng);
  invitation.tokenHash = secretHash(token);
  invitation.sentAt = acting.now;
  invitation.expiresAt = new Date(acting.now.getTime() + lifeDays * dayMs);
  recordAudit(em, {
    actor: acting.actor,
    at: acting.now,
    requestId: acting.requestId,
    action: 'group.invitation-sent',
    subject: { type: 'invitation', id },
    groupId: group.id,
    detail: 'sent again',
  });
  send(em, acting, sending, group, invitation, token);
  await em.flush();
  return wire(invitation, acting.now);
}

export async function revokeInvitation(em: EntityManager, { actor, now, requestId }: Acting, group: Group, id: string): Promise<void> {
  const invitation = await openInvitation(em, group, id);
  invitation.revokedAt = now;
  recordAudit(em, { actor, at: now, requestId, action: 'group.invitation-revoked', subject: { type: 'invitation', id }, groupId: group.id });
  await em.flush();
}

/** @throws AppError 'not-found' for a token that no invitation has */
export async function findInvitationByToken(em: EntityManager, token: string): Promise<Invitation> {
  const invitation = await em.findOne(InvitationEntity, { tokenHash: secretHash(token) }, { populate: ['group', 'invitedBy'] });
  if (!invitation) throw new AppError('not-found', 'This invitation link does not work. Ask the group for a new one.');
  return invitation;
}

/** Whoever holds the link may accept it once, with the account they are signed in with. */
export async function acceptInvitation(em: EntityManager, acting: Acting, token: string): Promise<Group> {
  return em.transactional(async (inner) => {
    const invitation = await findInvitationByToken(inner, token);
    const state = invitationState(invitation, acting.now);
    if (state !== 'open') throw new AppError('conflict', `This invitation is ${state}. Ask the group for a new one.`);
    const user = await inner.findOneOrFail(UserEntity, { id: acting.actor.id });
    invitation.acceptedAt = acting.now;
    invitation.acceptedBy = inner.getReference(UserEntity, user.id, { wrapped: true });
    await addMember(inner, acting, invitation.group.getEntity(), user, invitation.roles);
    return invitation.group.getEntity();
  });
}

async function openInvitation(em: EntityManager, group: Group, id: string): Promise<Invitation> {
  const invitation = await em.findOne(InvitationEntity, { id, group: group.id, acceptedAt: null, revokedAt: null }, { populate: ['invitedBy'] });
  if (!invitation) throw new AppError('not-found', 'There is no such open invitation.');
  return invitation;
}

function send(em: EntityManager, acting: Acting, sending: Sending, group: Group, invitation: Invitation, token: string): void {
  queueMail(
    em,
    {
      kind: 'invitation',
      to: invitation.email,
      subject: `Invitation to ${group.name} on Hadamark`,
      text: [
        `${acting.actor.handle} invites you to ${group.name} as ${invitation.roles.join(' and ')}.`,
        '',
        'Open this link, sign in and accept:',
        // After the #, so that no server logs the token.
        `${sending.origin}/groups/${group.slug}#invitation=${token}`,
        '',
        `The link works once and until ${invitation.expiresAt.toISOString().slice(0, 10)}. If you did not expect it, ignore it.`,
      ].join('\n'),
    },
    acting.now,
  );
}

function wire(invitation: Invitation, now: Date): InvitationWire {
  return {
    id: invitation.id,
    email: invitation.email,
    roles: invitation.roles,
    invitedBy: { handle: invitation.invitedBy.getEntity().handle },
    sentAt: invitation.sentAt.toISOString(),
    expiresAt: invitation.expiresAt.toISOString(),
    state: invitationState(invitation, now),
  };
}
