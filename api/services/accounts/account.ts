import type { EntityManager } from '@mikro-orm/sqlite';
import type { AccountWire } from '../../../shared/contracts/account.ts';
import { defaultNotifications, type NotificationSettings } from '../../../shared/domain/notifications.ts';
import { AppError } from '../../../shared/errors.ts';
import { ApiTokenEntity } from '../../entities/api-token.ts';
import { MembershipEntity } from '../../entities/group.ts';
import { SessionEntity } from '../../entities/session.ts';
import { UserEntity, type User } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { queueMail } from '../mail/queue-mail.ts';
import { randomSecret, secretHash } from '../secret-hash.ts';
import { siteRolesOf } from './site-roles.ts';

const confirmationLifeMs = 24 * 60 * 60 * 1000;

export async function showAccount(em: EntityManager, userId: string): Promise<AccountWire> {
  const user = await em.findOneOrFail(UserEntity, { id: userId });
  const memberships = await em.find(MembershipEntity, { user: userId }, { populate: ['group'], orderBy: { group: { name: 'asc' } } });
  return {
    id: user.id,
    handle: user.handle,
    since: user.createdAt.toISOString(),
    about: user.about,
    email: user.email ?? null,
    pendingEmail: user.pendingEmail ?? null,
    siteRoles: siteRolesOf(user),
    siteRolesSince: user.siteRolesSince?.toISOString() ?? null,
    groups: memberships.map(({ group, roles }) => ({ id: group.id, slug: group.$.slug, name: group.$.name, roles })),
    notifications: { ...defaultNotifications, ...user.notifications },
  };
}

/** A new e-mail address counts once the link sent to it was followed. */
export async function editAccount(
  em: EntityManager,
  { actor, now, requestId }: Acting,
  sending: { readonly rng: (bytes: number) => Uint8Array; readonly origin: string },
  input: {
    readonly about?: string | undefined;
    readonly email?: string | undefined;
    readonly notifications?: { readonly [Kind in keyof NotificationSettings]?: boolean | undefined } | undefined;
  },
): Promise<AccountWire> {
  const user = await em.findOneOrFail(UserEntity, { id: actor.id });
  if (input.about !== undefined) user.about = input.about;
  if (input.notifications) {
    user.notifications = Object.fromEntries(
      Object.entries({ ...user.notifications, ...input.notifications }).filter(([, wanted]) => wanted !== undefined),
    );
  }
  const email = input.email?.toLowerCase();
  if (email !== undefined && email !== user.email) {
    const token = randomSecret(sending.rng);
    user.pendingEmail = email;
    user.emailTokenHash = secretHash(token);
    user.emailTokenExpiresAt = new Date(now.getTime() + confirmationLifeMs);
    queueMail(
      em,
      {
        kind: 'e-mail-confirmation',
        to: email,
        subject: 'Confirm this address for Hadamark',
        text: `${user.handle} gave this address on Hadamark. Open this link within 24 hours while signed in to confirm it:\n${sending.origin}/account#confirm=${token}\n\nIf that was not you, ignore this message.`,
      },
      now,
    );
  }
  recordAudit(em, {
    actor,
    at: now,
    requestId,
    action: 'account.edited',
    subject: { type: 'account', id: user.id },
    // Addresses stay out of a trail that cannot be cleaned.
    detail: Object.keys(input).join(', '),
  });
  await em.flush();
  return showAccount(em, user.id);
}

export async function confirmEmail(em: EntityManager, { actor, now, requestId }: Acting, token: string): Promise<AccountWire> {
  const user = await em.findOne(UserEntity, { id: actor.id, emailTokenHash: secretHash(token), emailTokenExpiresAt: { $gt: now } });
  if (!user?.pendingEmail) throw new AppError('not-found', 'This confirmation link does not work here. Save the address again to get a new one.');
  user.email = user.pendingEmail;
  forgetPending(user);
  recordAudit(em, { actor, at: now, requestId, action: 'account.e-mail-confirmed', subject: { type: 'account', id: user.id } });
  await em.flush();
  return showAccount(em, user.id);
}

/**
 * Closes an account: address, tokens, sessions and memberships go at once; what it submitted stays under a handle that
 * says so. @throws AppError 'conflict' while it is the last owner of a group or the last administrator
 */
export async function closeAccount(em: EntityManager, { actor, now, requestId }: Acting, handle: string): Promise<void> {
  if (handle !== actor.handle) {
    throw new AppError('validation-failed', 'Write your handle to confirm.', [{ path: ['handle'], message: `Write '${actor.handle}'.` }]);
  }
  await em.transactional(async (inner) => {
    const user = await inner.findOneOrFail(UserEntity, { id: actor.id });
    const memberships = await inner.find(MembershipEntity, { user: user.id }, { populate: ['group'] });
    for (const membership of memberships.filter(({ roles }) => roles.includes('owner'))) {
      const others = await inner.find(MembershipEntity, { group: membership.group.id, id: { $ne: membership.id } });
      if (!others.some(({ roles }) => roles.includes('owner'))) {
        throw new AppError('conflict', `You are the last owner of ${membership.group.$.name}. Give somebody else the owner role first.`);
      }
    }
    if (user.siteRoles.includes('administrator')) {
      const others = await inner.find(UserEntity, { id: { $ne: user.id }, closedAt: null });
      if (!others.some(({ siteRoles }) => siteRoles.includes('administrator'))) {
        throw new AppError('conflict', 'You are the last administrator. Give somebody else the role first.');
      }
    }
    inner.remove(memberships);
    await inner.nativeUpdate(ApiTokenEntity, { user: user.id, revokedAt: null }, { revokedAt: now });
    await inner.nativeDelete(SessionEntity, { userId: user.id });
    recordAudit(inner, { actor, at: now, requestId, action: 'account.closed', subject: { type: 'account', id: user.id } });
    user.handle = `closed-account-${user.id.slice(0, 8)}`;
    user.githubId = null;
    user.email = null;
    user.about = '';
    user.siteRoles = [];
    forgetPending(user);
    user.closedAt = now;
  });
}

function forgetPending(user: User): void {
  user.pendingEmail = null;
  user.emailTokenHash = null;
  user.emailTokenExpiresAt = null;
}
