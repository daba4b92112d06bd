import type { EntityManager } from '@mikro-orm/sqlite';
import type { RunImage } from '../../../shared/contracts/runs';
import { encodeArray } from '../../../shared/domain/array-encoding';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { fromBlob } from '../../entities/float64-blob.ts';
import { SimulationEntity } from '../../entities/simulation.ts';
import { loadAxisCases } from '../../jobs/axis-cases.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import { maySeeTruth } from '../phantoms/phantom-access.ts';
import type { LoadedRun } from './find-run.ts';
import { toTrial } from './list-trials.ts';
import { drawOfLevel, recomputeImage } from './recompute-draw.ts';

/** The reconstruction of one draw. The truth is null while it is sealed for the reader. */
export async function showImage(
  em: EntityManager,
  jobs: Pick<Jobs, 'recomputeDraw'>,
  input: { readonly run: LoadedRun; readonly actor: Actor | null; readonly now: Date; readonly level: number; readonly draw: number | 'median' | 'worst' },
): Promise<RunImage> {
  const { run, level } = input;
  const draw = typeof input.draw === 'number' ? input.draw : await drawOfLevel(em, run, level, input.draw);
  const { image, stored, trial } = await recomputeImage(em, jobs, run, level, draw);
  const truth = await truthFor(em, input, level);
  return { level, draw, image: encodeArray(image), truth: truth ? encodeArray(truth) : null, imageHash: trial.imageHash, stored, trial: toTrial(trial, stored) };
}

/** The ground truth on the evaluation grid, where the reader may see it; of a level of another axis its own. */
export async function truthFor(em: EntityManager, input: { readonly run: LoadedRun; readonly actor: Actor | null; readonly now: Date }, level?: number): Promise<Float64Array | null> {
  const version = input.run.phantomVersion.$;
  if (!maySeeTruth(input.actor, version.phantom.$, version, input.now)) return null;
  const own = level === undefined ? undefined : (await loadAxisCases(em, input.run))?.[level];
  if (own) return own.truthImage;
  const simulation = await em.findOneOrFail(SimulationEntity, { contentHash: version.definitionHash }, { populate: ['truthImage'] });
  return fromBlob(simulation.truthImage.$);
}
