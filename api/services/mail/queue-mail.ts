import type { EntityManager } from '@mikro-orm/sqlite';
import type { NotificationKind } from '../../../shared/domain/notifications.ts';
import { defaultNotifications } from '../../../shared/domain/notifications.ts';
import { OutboxMessageEntity } from '../../entities/outbox-message.ts';
import type { User } from '../../entities/user.ts';

export interface MailMessage {
  readonly kind: string;
  readonly to: string;
  readonly subject: string;
  readonly text: string;
}

/** Puts a message in the outbox within the caller's unit of work. After the flush, `mailer.kick()` delivers it. */
export function queueMail(em: EntityManager, message: MailMessage, now: Date): void {
  em.create(OutboxMessageEntity, {
    kind: message.kind,
    recipient: message.to,
    subject: oneLine(message.subject),
    text: message.text,
    state: 'waiting',
    nextAttemptAt: now,
    sentAt: null,
    failure: null,
  });
}

/** Writes to those of the users who have an address and did not turn this kind off; nobody twice. */
export function queueNotification(
  em: EntityManager,
  users: Iterable<User>,
  message: { readonly kind: NotificationKind; readonly subject: string; readonly text: string },
  now: Date,
): void {
  const written = new Set<string>();
  for (const user of users) {
    const wanted = user.notifications[message.kind] ?? defaultNotifications[message.kind];
    if (!wanted || user.email === null || user.email === undefined || user.closedAt || written.has(user.id)) continue;
    written.add(user.id);
    queueMail(em, { ...message, to: user.email }, now);
  }
}

function oneLine(text: string): string {
  return text.replace(/[\r\n]+/g, ' ').slice(0, 200);
}
