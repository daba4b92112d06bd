import type { MikroORM } from '@mikro-orm/sqlite';
import { Store, type SessionData } from 'express-session';
import { SessionEntity } from '../entities/session.ts';
import { secretHash } from '../services/secret-hash.ts';

/** For a cookie without an end of its own; the site's has one. */
const fallbackLifeMs = 60 * 60 * 1000;

type Done = (error?: unknown) => void;

/** Sessions in SQLite. There is no `touch`: a session ends a fixed time after sign-in, and reading writes nothing. */
export class SqliteSessionStore extends Store {
  readonly #orm: MikroORM;
  readonly #clock: () => Date;

  constructor(orm: MikroORM, clock: () => Date) {
    super();
    this.#orm = orm;
    this.#clock = clock;
  }

  override get(sid: string, callback: (error: unknown, session?: SessionData | null) => void): void {
    this.#run(async () => {
      const row = await this.#orm.em.fork().findOne(SessionEntity, { id: secretHash(sid), expiresAt: { $gt: this.#clock() } });
      return row ? (JSON.parse(row.data) as SessionData) : null;
    }, callback);
  }

  override set(sid: string, session: SessionData, callback?: Done): void {
    this.#run(async () => {
      const em = this.#orm.em.fork();
      await em.upsert(SessionEntity, {
        id: secretHash(sid),
        userId: session.userId ?? null,
        data: JSON.stringify(session),
        expiresAt: this.#expiry(session),
      });
    }, callback);
  }

  override destroy(sid: string, callback?: Done): void {
    this.#run(async () => {
      await this.#orm.em.fork().nativeDelete(SessionEntity, { id: secretHash(sid) });
    }, callback);
  }

  /** Deletes what has run out. Called at start and now and then. */
  async sweep(): Promise<void> {
    await this.#orm.em.fork().nativeDelete(SessionEntity, { expiresAt: { $lte: this.#clock() } });
  }

  #expiry(session: SessionData): Date {
    return new Date(this.#clock().getTime() + (session.cookie.originalMaxAge ?? fallbackLifeMs));
  }

  #run<T>(work: () => Promise<T>, callback?: (error: unknown, value?: T) => void): void {
    work().then(
      (value) => callback?.(null, value),
      (error: unknown) => callback?.(error),
    );
  }
}
