import type { EntityManager } from '@mikro-orm/sqlite';
import type { TrialWire } from '../../../shared/contracts/runs';
import { RunImageEntity, TrialEntity, type Trial } from '../../entities/run.ts';

/** All figures of every draw, by level and draw. */
export async function listTrials(em: EntityManager, input: { readonly run: { readonly id: string }; readonly level?: number | undefined }): Promise<TrialWire[]> {
  const at = { run: input.run.id, ...(input.level === undefined ? {} : { level: input.level }) };
  const [trials, images] = await Promise.all([
    em.find(TrialEntity, at, { orderBy: { level: 'asc', draw: 'asc' } }),
    em.find(RunImageEntity, at, { fields: ['level', 'draw'] }),
  ]);
  const stored = new Set(images.map((image) => `${image.level}/${image.draw}`));
  return trials.map((trial) => toTrial(trial, stored.has(`${trial.level}/${trial.draw}`)));
}

export function toTrial(trial: Trial, imageStored: boolean): TrialWire {
  const { level, draw, noiseNorm, iterations, forwardSolves, stop, metrics, imageHash } = trial;
  return {
    level, draw, noiseNorm, parameter: trial.parameter ?? null, iterations, forwardSolves, stop, metrics, supAt: trial.supAt ?? null, seconds: trial.seconds ?? null, imageHash, imageStored,
  };
}
