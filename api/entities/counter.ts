import { defineEntity, p, type InferEntity } from '@mikro-orm/core';

/** The last number given out under a prefix (PH, SV, BN, RN). Numbers are never given out twice while their row stands. */
export const CounterEntity = defineEntity({
  name: 'Counter',
  tableName: 'counter',
  properties: {
    prefix: p.string().primary(),
    value: p.integer(),
  },
});
export type Counter = InferEntity<typeof CounterEntity>;
