import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { benchCreateSchema, benchUpdateSchema } from '../../../shared/contracts/benches';
import { axisWords } from '../../../shared/domain/axes';
import { familyNames } from '../../../shared/domain/families';
import { AppError, type Issue } from '../../../shared/errors.ts';
import { metrics } from '../../../solvers/metrics/registry';
import { noiseModels } from '../../../solvers/noise/registry';
import { BenchEntity, BenchPhantomEntity } from '../../entities/bench.ts';
import { GroupEntity, type Group } from '../../entities/group.ts';
import { PhantomVersionEntity, type PhantomVersion } from '../../entities/phantom.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { freeSlug, nextId } from '../identifiers.ts';
import { benchHash, type LoadedBench } from './find-bench.ts';

type Terms = z.output<typeof benchUpdateSchema>;

export async function createBench(em: EntityManager, input: Acting & { readonly group: Group; readonly bench: z.output<typeof benchCreateSchema> }): Promise<string> {
  const { actor, now, group, bench: given } = input;
  const versions = await checkTerms(em, given, Object.keys(actor.groups));
  return em.transactional(async (inner) => {
    const bench = inner.create(BenchEntity, {
      id: await nextId(inner, 'bench'),
      slug: await freeSlug(given.title, async (slug) => slug === 'new' || (await inner.count(BenchEntity, { slug })) > 0),
      title: given.title,
      question: given.question,
      description: given.description,
      family: familyOf(versions),
      group: inner.getReference(GroupEntity, group.id),
      createdBy: inner.getReference(UserEntity, actor.id),
      axis: given.axis,
      noiseModel: given.noiseModel,
      ladder: [...given.ladder],
      draws: given.draws,
      seed: given.seed,
      rankingMetric: given.rankingMetric,
      state: 'draft',
      contentHash: hashOf(given, versions),
      openedAt: null,
      closedAt: null,
    });
    listPhantoms(inner, bench.id, versions);
    recordAudit(inner, {
      actor, at: now, action: 'bench.created', subject: { type: 'bench', id: bench.id }, groupId: group.id,
      after: { title: given.title, contentHash: bench.contentHash }, requestId: input.requestId,
    });
    await inner.flush();
    return bench.slug;
  });
}

/** Changes a draft. An open bench never changes: a correction is another bench. */
export async function editBench(em: EntityManager, input: Acting & { readonly bench: LoadedBench; readonly terms: Terms }): Promise<void> {
  const { actor, now, bench, terms } = input;
  if (bench.state !== 'draft') throw new AppError('conflict', `The bench is ${bench.state}: what it asks does not change any more. Make another bench.`);
  const versions = await checkTerms(em, terms, Object.keys(actor.groups));
  await em.transactional(async (inner) => {
    await inner.nativeDelete(BenchPhantomEntity, { bench: bench.id });
    const row = await inner.findOneOrFail(BenchEntity, bench.id);
    const before = { title: row.title, contentHash: row.contentHash };
    Object.assign(row, {
      title: terms.title, question: terms.question, description: terms.description, family: familyOf(versions), axis: terms.axis, noiseModel: terms.noiseModel, ladder: [...terms.ladder],
      draws: terms.draws, seed: terms.seed, rankingMetric: terms.rankingMetric, contentHash: hashOf(terms, versions),
    });
    listPhantoms(inner, row.id, versions);
    recordAudit(inner, {
      actor, at: now, action: 'bench.edited', subject: { type: 'bench', id: row.id }, groupId: bench.group.id,
      before, after: { title: row.title, contentHash: row.contentHash }, requestId: input.requestId,
    });
    await inner.flush();
  });
  em.clear();
}

/**
 * Phantom versions in the order given. They may still be drafts of the reader's own groups: opening asks for published ones.
 * @throws AppError 'validation-failed' with an issue at each field at fault
 */
async function checkTerms(em: EntityManager, terms: Terms, groupIds: readonly string[]): Promise<PhantomVersion[]> {
  const issues: Issue[] = [];
  if (!metrics.some((metric) => metric.key === terms.rankingMetric)) {
    issues.push({ path: ['rankingMetric'], message: `No metric is called '${terms.rankingMetric}'. There are: ${metrics.map((metric) => metric.key).join(', ')}.` });
  }
  const versions: PhantomVersion[] = [];
  for (const [index, { slug, version: n }] of terms.phantoms.entries()) {
    const version = await em.findOne(PhantomVersionEntity, {
      n,
      phantom: { slug },
      $or: [{ state: 'published' }, { phantom: { group: { $in: [...groupIds] } }, state: { $ne: 'withdrawn' } }],
    });
    if (!version) issues.push({ path: ['phantoms', index], message: `There is no version ${n} of '${slug}' that a bench can use.` });
    else if (versions.some((other) => other.id === version.id)) issues.push({ path: ['phantoms', index], message: 'Listed twice.' });
    else versions.push(version);
  }
  const families = new Set(versions.map((version) => version.definition.family));
  if (families.size > 1) issues.push({ path: ['phantoms'], message: 'All phantoms of a bench belong to one problem family.' });
  const references = new Set(versions.map((version) => version.definition.noiseReference));
  if (references.size > 1) {
    issues.push({ path: ['phantoms'], message: 'All phantoms of a bench state their noise relative to the same thing: the voltages, the difference signal or the data.' });
  }
  const model = noiseModels.find((own) => own.key === terms.noiseModel);
  if (!model) issues.push({ path: ['noiseModel'], message: `No noise model is called '${terms.noiseModel}'. There are: ${noiseModels.map((own) => own.key).join(', ')}.` });
  for (const family of families) if (model && !model.families.includes(family)) issues.push({ path: ['noiseModel'], message: `${model.name}: this noise does not occur in ${familyNames[family].name}.` });
  const { key } = terms.axis;
  const unserved = [...families].filter((family) => !axisWords[key].families.includes(family));
  if (unserved.length > 0) issues.push({ path: ['axis', 'key'], message: `${axisWords[key].name}: this axis does not serve ${unserved.map((family) => familyNames[family].name).join(', ')}.` });
  if (issues.length > 0) throw new AppError('validation-failed', 'Correct the fields named in issues.', issues);
  return versions;
}

function familyOf(versions: readonly PhantomVersion[]): PhantomVersion['definition']['family'] {
  const first = versions[0];
  if (!first) throw new AppError('validation-failed', 'Choose at least one phantom.', [{ path: ['phantoms'], message: 'Choose at least one phantom.' }]);
  return first.definition.family;
}

const hashOf = (terms: Terms, versions: readonly PhantomVersion[]): string => benchHash({ ...terms, phantomHashes: versions.map((version) => version.contentHash) });

function listPhantoms(em: EntityManager, benchId: string, versions: readonly PhantomVersion[]): void {
  versions.forEach((version, position) =>
    em.create(BenchPhantomEntity, { bench: em.getReference(BenchEntity, benchId), phantomVersion: em.getReference(PhantomVersionEntity, version.id), position }),
  );
}
