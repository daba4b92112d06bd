import type { EntityManager } from '@mikro-orm/sqlite';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { AppError } from '../../../shared/errors.ts';
import { contentHash } from '../../../solvers/core/hash';
import { codeVersion } from '../../jobs/code-version.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import type { SimulationOutput } from '../../jobs/tasks.ts';
import { toBlob } from '../../entities/float64-blob.ts';
import { PhantomVersionEntity } from '../../entities/phantom.ts';
import { SimulationEntity, type Simulation } from '../../entities/simulation.ts';
import { loadArrayValues } from '../arrays/find-array.ts';

export interface SimulateRequest {
  readonly definition: PhantomDefinition;
  /** Also the slower checks. */
  readonly checks: boolean;
}

/**
 * The simulation of a definition: the stored one, or computed in a worker and stored under its content hash.
 * @throws AppError 'simulation-failed' with the field at fault where it is known
 */
export async function simulate(em: EntityManager, jobs: Jobs, request: SimulateRequest): Promise<Simulation> {
  const hash = contentHash(request.definition);
  const stored = await em.findOne(SimulationEntity, { contentHash: hash });
  if (stored && (await mayKeep(em, stored)) && (stored.checks || !request.checks)) return stored;
  const { truth } = request.definition;
  const arrayValues = truth.kind === 'array' ? await loadArrayValues(em, { ...truth, kind: 'array' }) : null;
  const output = await jobs.simulate(hash, { definition: request.definition, arrayValues, checks: request.checks });
  return store(em, hash, output);
}

/** Data of a version that left its group are never computed anew; previews follow the code. */
async function mayKeep(em: EntityManager, stored: Simulation): Promise<boolean> {
  if (stored.codeVersion === codeVersion) return true;
  return (await em.count(PhantomVersionEntity, { definitionHash: stored.contentHash, state: { $in: ['submitted', 'published', 'withdrawn'] } })) > 0;
}

async function store(em: EntityManager, hash: string, output: SimulationOutput): Promise<Simulation> {
  const { summary, checks, seconds } = output;
  const row = {
    codeVersion,
    summary,
    modelErrorFloor: summary.modelErrorFloor,
    noiseScale: summary.noiseScale,
    seconds,
    frame: toBlob(output.frame),
    reference: toBlob(output.reference),
    clean: toBlob(output.clean),
    truthImage: toBlob(output.truthImage),
  };
  return em.transactional(async (inner) => {
    // Somebody else may have stored the same meanwhile.
    const existing = await inner.findOne(SimulationEntity, { contentHash: hash }, { populate: ['frame', 'reference', 'clean', 'truthImage'] });
    if (!existing) return inner.create(SimulationEntity, { contentHash: hash, checks, ...row });
    if (existing.codeVersion !== codeVersion && !(await mayKeep(inner, existing))) {
      const { frame, reference, clean, truthImage, ...scalars } = row;
      Object.assign(existing, scalars, { checks });
      existing.frame.set(frame);
      existing.reference.set(reference);
      existing.clean.set(clean);
      existing.truthImage.set(truthImage);
    } else if (checks) existing.checks = checks;
    return existing;
  });
}

/** The simulation of a version that has one. @throws AppError 'not-found' */
export async function findSimulation(em: EntityManager, definitionHash: string): Promise<Simulation> {
  const stored = await em.findOne(SimulationEntity, { contentHash: definitionHash });
  if (!stored) throw new AppError('not-found', 'This version is not simulated yet. It is when it is submitted.');
  return stored;
}

const previewDays = 30;

/** Simulations that no version uses are previews; old ones are computed again when somebody asks. */
export async function forgetOldPreviews(em: EntityManager, now: Date): Promise<void> {
  const used = await em.find(PhantomVersionEntity, {}, { fields: ['definitionHash'] });
  await em.nativeDelete(SimulationEntity, { updatedAt: { $lt: new Date(now.getTime() - previewDays * 86_400_000) }, contentHash: { $nin: used.map((version) => version.definitionHash) } });
}
