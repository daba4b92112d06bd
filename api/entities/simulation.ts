import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { CheckResultWire } from '../../shared/contracts/common';
import type { Simulation as SimulationWire } from '../../shared/contracts/simulations';
import { timestamps } from './base.ts';

/** A simulation without its arrays and its checks. */
export type SimulationSummary = Omit<SimulationWire, 'contentHash' | 'frame' | 'reference' | 'clean' | 'truth' | 'checks' | 'seconds'>;

/** The clean data of a definition, computed once. */
export const SimulationEntity = defineEntity({
  name: 'Simulation',
  tableName: 'simulation',
  properties: {
    /** SHA-256 of the canonical definition. */
    contentHash: p.string().primary(),
    ...timestamps,
    codeVersion: p.string(),
    summary: p.json().$type<SimulationSummary>(),
    modelErrorFloor: p.float().$type<number>(),
    noiseScale: p.float().$type<number>(),
    /** Null until the slower checks ran. */
    checks: p.json().$type<CheckResultWire[]>().nullable(),
    seconds: p.float().$type<number>(),
    /** Little-endian Float64: data with the target, of the background, and the clean data in the phantom's data kind. */
    frame: p.blob().lazy().hidden(),
    reference: p.blob().lazy().hidden(),
    clean: p.blob().lazy().hidden(),
    /** Ground truth on the inside pixels of the evaluation grid. */
    truthImage: p.blob().lazy().hidden(),
  },
});
export type Simulation = InferEntity<typeof SimulationEntity>;
