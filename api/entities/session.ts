import { defineEntity, p, type InferEntity } from '@mikro-orm/core';

export const SessionEntity = defineEntity({
  name: 'Session',
  tableName: 'session',
  properties: {
    /** SHA-256 of the session id: a copy of the database opens no session. */
    id: p.string().primary(),
    userId: p.string().nullable().index('session_user_index'),
    data: p.text().hidden(),
    expiresAt: p.datetime().index('session_expires_index'),
  },
});
export type Session = InferEntity<typeof SessionEntity>;
