import type { MikroORM } from '@mikro-orm/sqlite';
import { createTransport, type Transporter } from 'nodemailer';
import type { Logger } from 'pino';
import type { Env } from '../env.ts';
import { OutboxMessageEntity } from '../entities/outbox-message.ts';

const maxAttempts = 6;
const checkEveryMs = 30_000;
/** First pause after a failure; it doubles with every further one. */
const firstPauseMs = 60_000;
const batch = 20;

export interface Mailer {
  /** Delivers what waits, without making the caller wait. */
  readonly kick: () => void;
  /** Resolves once what waits now was tried. */
  readonly deliver: () => Promise<void>;
  readonly start: () => void;
  readonly stop: () => Promise<void>;
}

interface MailerOptions {
  readonly orm: MikroORM;
  readonly env: Pick<Env, 'smtpUrl' | 'mailFrom'>;
  readonly clock: () => Date;
  readonly logger: Logger;
}

/**
 * Delivers the outbox. Without an SMTP server the same transport interface builds each message and keeps it, and the
 * administrator reads it on the outbox page.
 */
export function makeMailer({ orm, env, clock, logger }: MailerOptions): Mailer {
  const transport: Transporter = env.smtpUrl ? createTransport(env.smtpUrl) : createTransport({ jsonTransport: true });
  let running: Promise<void> | undefined;
  let again = false;
  let timer: NodeJS.Timeout | undefined;
  let stopped = false;

  const round = async (): Promise<void> => {
    const em = orm.em.fork();
    const waiting = await em.find(
      OutboxMessageEntity,
      { state: 'waiting', nextAttemptAt: { $lte: clock() } },
      { orderBy: { createdAt: 'asc' }, limit: batch },
    );
    for (const message of waiting) {
      if (stopped) return;
      message.attempts += 1;
      try {
        await transport.sendMail({ from: env.mailFrom, to: message.recipient, subject: message.subject, text: message.text });
        message.state = env.smtpUrl ? 'sent' : 'kept';
        message.sentAt = clock();
        message.failure = null;
        if (env.smtpUrl) message.text = '';
      } catch (error) {
        message.failure = error instanceof Error ? error.message : 'unknown';
        if (message.attempts >= maxAttempts) message.state = 'failed';
        message.nextAttemptAt = new Date(clock().getTime() + firstPauseMs * 2 ** (message.attempts - 1));
        logger.warn({ outboxMessage: message.id, attempts: message.attempts, reason: message.failure }, 'mail not delivered');
      }
      await em.flush();
    }
    if (waiting.length === batch) again = true;
  };

  const deliver = (): Promise<void> => {
    again = true;
    running ??= (async () => {
      try {
        while (again && !stopped) {
          again = false;
          await round();
        }
      } finally {
        running = undefined;
      }
    })();
    return running;
  };
  const kick = (): void => {
    setImmediate(() => {
      if (!stopped) deliver().catch((error: unknown) => logger.error({ err: error }, 'outbox delivery failed'));
    });
  };
  return {
    kick,
    deliver,
    start: () => {
      kick();
      timer = setInterval(kick, checkEveryMs);
      timer.unref();
    },
    stop: async () => {
      stopped = true;
      clearInterval(timer);
      await running;
      transport.close();
    },
  };
}
