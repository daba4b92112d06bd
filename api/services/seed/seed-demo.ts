import type { EntityManager, MikroORM } from '@mikro-orm/sqlite';
import type { Logger } from 'pino';
import { AuditEntryEntity } from '../../entities/audit-entry.ts';
import { BenchEntity } from '../../entities/bench.ts';
import { GroupEntity, MembershipEntity, type Group } from '../../entities/group.ts';
import { PhantomEntity } from '../../entities/phantom.ts';
import { SolverEntity } from '../../entities/solver.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import { demoAccounts, type StandInAccount } from '../../sign-in/demo-accounts.ts';
import { ensureDemoAccounts } from '../accounts/ensure-demo-accounts.ts';
import { storeArray } from '../arrays/store-array.ts';
import { recordAudit, siteActor } from '../audit/record-audit.ts';
import { openBench } from '../benches/change-bench-state.ts';
import { createBench } from '../benches/create-bench.ts';
import { createEntry } from '../benches/create-entry.ts';
import { entriesOf, findBench, phantomsOf } from '../benches/find-bench.ts';
import { readArrayFile } from '../files/read-upload.ts';
import { addMember, createGroup } from '../groups/change-group.ts';
import { giveVerdict } from '../phantoms/decide-version.ts';
import { findPhantomVersion } from '../phantoms/find-phantom.ts';
import { createPhantom } from '../phantoms/save-phantom.ts';
import { submitVersion } from '../phantoms/submit-version.ts';
import { slugify } from '../identifiers.ts';
import { createSolver, createSolverVersion } from '../solvers/create-solver.ts';
import { findSolver } from '../solvers/find-solver.ts';
import { actAs, type SeedContext } from './seed-context.ts';
import { demoPlan, type BenchPlan, type DemoPlan, type PhantomPlan, type SolverPlan } from './demo-plan.ts';
import { reviewDemo } from './review-demo.ts';
import { readStockPhantom, stockFolder } from './stock-phantoms.ts';

export interface SeedOptions {
  readonly orm: MikroORM;
  readonly jobs: Jobs;
  readonly clock: () => Date;
  readonly logger: Logger;
  readonly origin: string;
  readonly plan?: DemoPlan;
  readonly accounts?: readonly StandInAccount[];
  /** Folder of the stock phantoms. */
  readonly phantoms?: string;
  /** Between two looks at the runs that reviewers wait for. */
  readonly pollMs?: number;
}
export interface Seeding {
  /** Resolves once everything stands, reviewers' words included, or seeding was stopped. */
  readonly done: Promise<void>;
  readonly running: () => boolean;
  readonly stop: () => Promise<void>;
}
const finished = 'site.demo-seeded';
const dayMs = 86_400_000;

/**
 * Fills an empty site with the demonstration. Every step looks first whether its work is done, so that seeding which was
 * interrupted goes on at the next start; once complete it says so in the trail and never runs again.
 */
export function seedDemo(options: SeedOptions): Seeding {
  let running = true;
  let stopped = false;
  const done = seed(options, () => stopped)
    .catch((error: unknown) => options.logger.error({ err: error }, 'seeding the demonstration failed; the next start goes on with it'))
    .finally(() => {
      running = false;
    });
  return {
    done,
    running: () => running,
    stop: () => {
      stopped = true;
      return done;
    },
  };
}

async function seed(options: SeedOptions, stopped: () => boolean): Promise<void> {
  const { orm, jobs, clock, logger, origin, plan = demoPlan } = options;
  if ((await orm.em.fork().count(AuditEntryEntity, { action: finished })) > 0) return;
  const began = performance.now();
  const users = await ensureDemoAccounts(orm.em.fork(), clock(), options.accounts ?? demoAccounts);
  const context: SeedContext = { orm, jobs, clock, logger, origin, users, stopped, pollMs: options.pollMs ?? 1000 };
  await seedGroups(context, plan);
  for (const solver of plan.solvers) await seedSolver(context, solver);
  // The phantoms of a bench, then the bench: its runs compute while the phantoms of the next one are simulated.
  const left = new Set(plan.phantoms);
  for (const bench of plan.benches) {
    for (const phantom of plan.phantoms.filter(({ folder }) => bench.phantoms.includes(folder))) {
      if (stopped()) return;
      left.delete(phantom);
      await seedPhantom(context, phantom, options.phantoms ?? stockFolder());
    }
    await seedBench(context, bench, plan.solvers);
  }
  for (const phantom of left) {
    if (stopped()) return;
    await seedPhantom(context, phantom, options.phantoms ?? stockFolder());
  }
  // What takes long comes last, so that every bench has its first ranking early.
  for (const bench of plan.benches) {
    if (stopped()) return;
    await enterSolvers(context, bench, plan.solvers, bench.entries.filter((entry) => entry.last));
  }
  logger.info({ seconds: Math.round((performance.now() - began) / 1000) }, 'the demonstration stands; its runs are computed now');
  if (!(await reviewDemo(context, plan))) return;
  const em = orm.em.fork();
  recordAudit(em, { actor: siteActor, at: clock(), action: finished, subject: { type: 'site', id: 'demonstration' } });
  await em.flush();
  logger.info({ seconds: Math.round((performance.now() - began) / 1000) }, 'the demonstration is complete');
}

const groupOf = (em: EntityManager, slug: string): Promise<Group> => em.findOneOrFail(GroupEntity, { slug });

async function seedGroups(context: SeedContext, plan: DemoPlan): Promise<void> {
  for (const { slug, name, description, owner, members } of plan.groups) {
    const em = context.orm.em.fork();
    const acting = await actAs(context, em, owner);
    const group = (await em.findOne(GroupEntity, { slug })) ?? (await createGroup(em, acting, { name, slug, description }));
    for (const { handle, roles } of members) {
      const user = context.users.get(handle);
      if (!user) throw new Error(`The demonstration has no account '${handle}'.`);
      if ((await em.count(MembershipEntity, { group: group.id, user: user.id })) === 0) await addMember(em, acting, group, await em.findOneOrFail(UserEntity, user.id), roles);
    }
  }
}

async function seedSolver(context: SeedContext, plan: SolverPlan): Promise<void> {
  const em = context.orm.em.fork();
  const slug = slugify(plan.name);
  const acting = await actAs(context, em, plan.developer);
  const declaration = { notTuned: true, ownMesh: false, sourceMayBePublished: true };
  if ((await em.count(SolverEntity, { slug })) === 0) {
    const { name, description, configuration, group } = plan;
    await createSolver(em, { ...acting, group: await groupOf(em, group), solver: { group, name, description, configuration, declaration, register: true } });
  }
  for (const [index, { configuration, whatChanged }] of (plan.versions ?? []).entries()) {
    const inner = context.orm.em.fork();
    const solver = await findSolver(inner, slug);
    if (solver.versions.length > index + 1) continue;
    await createSolverVersion(inner, { ...acting, now: context.clock(), solver, version: { configuration, declaration, whatChanged, register: true } });
  }
}

/** Draft, submission with its checks, and the reviewer's word, each where it is missing. */
async function seedPhantom(context: SeedContext, plan: PhantomPlan, folder: string): Promise<void> {
  const { orm, jobs, clock, logger, origin } = context;
  const stock = await readStockPhantom(plan.folder, folder);
  const em = orm.em.fork();
  const acting = await actAs(context, em, plan.curator);
  const found = await em.findOne(PhantomEntity, { slug: slugify(stock.name) });
  let slug = found?.slug;
  if (slug === undefined) {
    if (stock.values) {
      const { name, bytes } = stock.values;
      const { format, ...table } = readArrayFile(name, bytes);
      await storeArray(em, { ...acting, kind: 'array', format, table, fileName: name, fileSize: bytes.length });
    }
    const { name, licence, definition, description } = stock;
    const sealedUntil = plan.sealedForDays === undefined ? null : new Date(clock().getTime() + plan.sealedForDays * dayMs).toISOString().slice(0, 10);
    slug = await createPhantom(em, {
      ...acting, group: await groupOf(em, plan.group), phantom: { group: plan.group, name, licence, definition, description, frames: null, sealedUntil },
    });
  }
  try {
    const drafted = orm.em.fork();
    const draft = await findPhantomVersion(drafted, slug, 1);
    if (draft.version.state === 'draft') await submitVersion(drafted, jobs, { ...acting, now: clock(), ...draft, origin });
    if (!plan.published) return;
    const submitted = orm.em.fork();
    const waiting = await findPhantomVersion(submitted, slug, 1);
    if (waiting.version.state !== 'submitted') return;
    await giveVerdict(submitted, { ...(await actAs(context, submitted, plan.published.by)), ...waiting, verdict: 'publish', reason: plan.published.reason, origin });
  } catch (error) {
    // One phantom that cannot be published must not keep the others from the reader.
    logger.error({ err: error, phantom: plan.folder }, 'a phantom of the demonstration was not published');
  }
}

async function seedBench(context: SeedContext, plan: BenchPlan, solvers: readonly SolverPlan[]): Promise<void> {
  const { orm, clock, logger } = context;
  const slug = slugify(plan.title);
  const em = orm.em.fork();
  const acting = await actAs(context, em, plan.curator);
  if ((await em.count(BenchEntity, { slug })) === 0) {
    const phantoms: { slug: string; version: number }[] = [];
    for (const folder of plan.phantoms) phantoms.push({ slug: slugify((await readStockPhantom(folder)).name), version: 1 });
    const { group, title, question, description, ladder, draws, seed: benchSeed, axis = { key: 'noise' }, noiseModel = 'gaussian' } = plan;
    await createBench(em, {
      ...acting, group: await groupOf(em, group),
      bench: { group, title, question, description, phantoms, axis, noiseModel, ladder: [...ladder], draws, seed: benchSeed, rankingMetric: 'relative-l2-error' },
    });
  }
  const opened = orm.em.fork();
  const bench = await findBench(opened, slug);
  const unpublished = phantomsOf(bench).filter(({ version }) => version.state !== 'published');
  if (unpublished.length > 0) {
    logger.error({ bench: slug, phantoms: unpublished.map(({ version }) => version.name) }, 'a bench of the demonstration waits for its phantoms');
    return;
  }
  if (bench.state === 'draft') await openBench(opened, { ...acting, now: clock(), bench });
  await enterSolvers(context, plan, solvers, plan.entries.filter((entry) => !entry.last));
}

/** Enters what is not entered yet; a bench that waits for its phantoms gets nothing. */
async function enterSolvers(context: SeedContext, plan: BenchPlan, solvers: readonly SolverPlan[], entries: BenchPlan['entries']): Promise<void> {
  const { orm, jobs } = context;
  const slug = slugify(plan.title);
  for (const { solver: key, by, version } of entries) {
    const name = solvers.find((solver) => solver.key === key)?.name;
    if (name === undefined) throw new Error(`The demonstration has no solver '${key}'.`);
    const inner = orm.em.fork();
    const entered = await findBench(inner, slug);
    if (entered.state !== 'open') return;
    const solver = await findSolver(inner, slugify(name));
    const n = version ?? Math.max(...solver.versions.getItems().map((row) => row.n));
    if (entriesOf(entered).some((entry) => entry.solver.id === solver.id && entry.version.n === n)) continue;
    await createEntry(inner, { ...(await actAs(context, inner, by)), bench: entered, solver, version: n });
    jobs.kick();
  }
}
