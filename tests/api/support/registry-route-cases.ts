import { randomUUID } from 'node:crypto';
import { toBlob } from '../../../api/entities/float64-blob.ts';
import { BenchEntity } from '../../../api/entities/bench.ts';
import { GroupEntity } from '../../../api/entities/group.ts';
import { RecomputationEntity, RunEntity, RunImageEntity } from '../../../api/entities/run.ts';
import { SolverVersionEntity } from '../../../api/entities/solver.ts';
import { UserEntity } from '../../../api/entities/user.ts';
import type { BenchState, RunState, SolverState } from '../../../shared/domain/states.ts';
import { makeBench, type MadeBench } from '../../support/registry-fixture.ts';
import type { RouteCases } from './route-case.ts';
import type { WalkWorld } from './walk-world.ts';

const empty = () => ({});
const worlds = new WeakMap<WalkWorld, Promise<MadeBench>>();

/** A bench of `own` with one finished run; it is made once and put back in shape before every request. */
function benchOf(world: WalkWorld): Promise<MadeBench> {
  const known = worlds.get(world) ?? makeWalkBench(world);
  worlds.set(world, known);
  return known;
}
async function makeWalkBench(world: WalkWorld): Promise<MadeBench> {
  const em = world.app.orm.em.fork();
  const { name } = await em.findOneOrFail(GroupEntity, { id: world.own.id });
  const mark = randomUUID().slice(0, 8);
  const bench = await makeBench(world.app, {
    title: `Walk bench ${mark}`, phantoms: 1, ladder: [0.01], draws: 1, phantomGroup: name, entries: [{ solver: `Walk entry ${mark}`, group: name, figures: () => ({ 'relative-l2-error': 0.5 }) }],
  });
  const run = em.getReference(RunEntity, bench.entries[0]!.runs[0]!);
  em.create(RunImageEntity, { run, level: 0, draw: 0, values: toBlob(Float64Array.of(1, 1, 1, 1)) });
  em.create(RecomputationEntity, {
    run, requestedBy: em.getReference(UserEntity, (await world.app.account('reviewer-demo')).id), state: 'queued', total: 1, codeVersion: null, equal: null, resultHash: null, firstDifference: null, failure: null,
    startedAt: null, finishedAt: null,
  });
  await em.flush();
  return bench;
}

const bench = (state: BenchState, rest = '') => async (world: WalkWorld): Promise<string> => {
  const { id, slug } = await benchOf(world);
  await world.app.orm.em.fork().nativeUpdate(BenchEntity, { id }, { state });
  return `/benches/${slug}${rest}`;
};
const solver = (state: SolverState, rest = '') => async (world: WalkWorld): Promise<string> => {
  const slug = (await benchOf(world)).entries[0]!.solver;
  await world.app.orm.em.fork().nativeUpdate(SolverVersionEntity, { solver: { slug }, n: 1 }, { state, registeredAt: state === 'draft' ? null : new Date() });
  return `/solvers/${slug}${rest}`;
};
const run = (rest = '', state: RunState = 'finished') => async (world: WalkWorld): Promise<string> => {
  const { id, entries } = await benchOf(world);
  const em = world.app.orm.em.fork();
  await em.nativeUpdate(BenchEntity, { id }, { state: 'open' });
  const runId = entries[0]!.runs[0]!;
  await em.nativeUpdate(RunEntity, { id: runId }, { state, review: 'unreviewed', reviewer: null });
  return `/runs/${runId}${rest}`;
};

/** Who may enter is decided by the group of the solver, so the body names one of `own`. */
const entered = new WeakMap<WalkWorld, string>();
const entryPath = async (world: WalkWorld): Promise<string> => {
  await solver('registered')(world);
  entered.set(world, (await benchOf(world)).entries[0]!.solver);
  return bench('open', '/entries')(world);
};

/** The catalogue, solvers, benches, runs and reviews. */
export const registryRouteCases: RouteCases = {
  'GET /methods': { path: () => '/methods' },
  'GET /metrics': { path: () => '/metrics' },
  'GET /rules': { path: () => '/rules' },
  'GET /noise-models': { path: () => '/noise-models' },
  'GET /checks': { path: () => '/checks' },
  'GET /statistics': { path: () => '/statistics' },
  'GET /problems': { path: () => '/problems' },
  'GET /axes': { path: () => '/axes' },
  'GET /conventions': { path: () => '/conventions' },
  'GET /recent-verdicts': { path: () => '/recent-verdicts' },
  'GET /search': { path: () => '/search?q=walk' },
  'GET /solvers': { path: () => '/solvers' },
  'POST /solvers': {
    path: () => '/solvers',
    body: ({ own }) => ({ group: own.slug, name: 'Walk solver', configuration: { method: 'no-such-method', parameters: {}, rule: null }, declaration: { notTuned: true, ownMesh: false } }),
  },
  'GET /solvers/:slug': { path: solver('registered') },
  'GET /solvers/:slug #draft': { path: solver('draft'), state: 'draft' },
  'GET /solvers/:slug/versions/:n/stability': { path: solver('registered', '/versions/1/stability') },
  'POST /solvers/:slug/versions': { path: solver('registered', '/versions'), body: empty },
  'POST /solvers/:slug/versions/:n/register': { path: solver('draft', '/versions/1/register') },
  'POST /solvers/:slug/versions/:n/withdraw': { path: solver('registered', '/versions/1/withdraw'), body: empty },
  'GET /benches': { path: () => '/benches' },
  'POST /benches': {
    path: () => '/benches',
    body: ({ own }) => ({ group: own.slug, title: 'Walk bench', question: 'Does nobody but a curator come here?', phantoms: [{ slug: 'no-such-phantom', version: 1 }], seed: 1 }),
  },
  'GET /benches/:slug': { path: bench('open') },
  'GET /benches/:slug #draft': { path: bench('draft'), state: 'draft' },
  'PUT /benches/:slug': { path: bench('draft'), body: empty },
  'POST /benches/:slug/open': { path: bench('draft', '/open') },
  'POST /benches/:slug/close': { path: bench('open', '/close') },
  'POST /benches/:slug/entries': { path: entryPath, body: (world) => ({ solver: entered.get(world), version: 1 }) },
  'GET /benches/:slug/cost': { path: bench('open', '/cost?method=tikhonov') },
  'GET /benches/:slug/ranking': { path: bench('open', '/ranking') },
  'GET /benches/:slug/ranking #draft': { path: bench('draft', '/ranking'), state: 'draft' },
  'GET /benches/:slug/series': { path: bench('open', '/series') },
  'GET /benches/:slug/comparison': { path: bench('open', '/comparison') },
  'GET /benches/:slug/comparison #draft': { path: bench('draft', '/comparison'), state: 'draft' },
  'GET /benches/:slug/ranking.csv': { path: bench('open', '/ranking.csv') },
  'GET /benches/:slug/table.csv': { path: bench('open', '/table.csv') },
  'GET /benches/:slug/citation': { path: bench('closed', '/citation') },
  'GET /runs': { path: () => '/runs' },
  'GET /runs/:id': { path: run() },
  'GET /runs/:id/trials': { path: run('/trials') },
  'GET /runs/:id/images': { path: run('/images?level=0&draw=0') },
  'GET /runs/:id/replay': { path: run('/replay') },
  // Of a run that failed: the refusal comes after the permission, and no worker has to compute.
  'GET /runs/:id/sensitivity': { path: run('/sensitivity?level=0', 'failed') },
  'POST /runs/:id/recomputations': { path: run('/recomputations') },
  'GET /runs/:id/recomputations': { path: run('/recomputations') },
  'GET /runs/:id/certificate': { path: run('/certificate') },
  'GET /runs/:id/table.csv': { path: run('/table.csv') },
  'GET /runs/:id/trials.csv': { path: run('/trials.csv') },
  'GET /runs/:id/run.json': { path: run('/run.json') },
  'GET /review': { path: () => '/review' },
  'GET /review/count': { path: () => '/review/count' },
  'POST /runs/:id/review': { path: run('/review') },
  'DELETE /runs/:id/review': { path: run('/review') },
  'POST /runs/:id/verdicts': { path: run('/verdicts'), body: empty },
  'GET /runs/:id/comments': { path: run('/comments') },
  'POST /runs/:id/comments': { path: run('/comments'), body: () => ({ text: '' }) },
};
