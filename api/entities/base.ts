import { randomUUID } from 'node:crypto';
import { p } from '@mikro-orm/core';

/** Spread first into every entity's properties. Domain entities override `id` with a readable one. */
export const timestamps = {
  createdAt: p.datetime().onCreate(() => new Date()),
  updatedAt: p
    .datetime()
    .onCreate(() => new Date())
    .onUpdate(() => new Date()),
};
export const uuidKey = {
  id: p
    .string()
    .primary()
    .onCreate(() => randomUUID()),
};
export const baseProperties = { ...uuidKey, ...timestamps };
