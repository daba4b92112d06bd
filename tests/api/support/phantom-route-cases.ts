import { randomUUID } from 'node:crypto';
import { PhantomVersionEntity } from '../../../api/entities/phantom.ts';
import { RunEntity } from '../../../api/entities/run.ts';
import { ArrayEntity } from '../../../api/entities/stored-array.ts';
import { SimulationEntity } from '../../../api/entities/simulation.ts';
import { toBlob } from '../../../api/entities/float64-blob.ts';
import { GroupEntity } from '../../../api/entities/group.ts';
import { codeVersion } from '../../../api/jobs/code-version.ts';
import { sha256Hex } from '../../../solvers/core/hash.ts';
import { discDefinition, makeBench, makePhantom, type MadeBench } from '../../support/registry-fixture.ts';
import type { PhantomState } from '../../../shared/domain/states.ts';
import type { RouteCases } from './route-case.ts';
import type { WalkWorld } from './walk-world.ts';

const empty = () => ({});
/** No two phantoms have the same content, so each has a radius of its own. */
let made = 0;

/** Address of version 1 of a phantom of `own` in the state asked for. It is simulated already, so nobody waits for a worker. */
async function phantomIn(world: WalkWorld, state: PhantomState, sealedUntil: string | null = null): Promise<string> {
  const name = `Walk phantom ${randomUUID().slice(0, 8)}`;
  const { slug, versionId } = await makePhantom(world.app, { name, radius: 0.03 + 1e-6 * ++made, group: world.own.slug, sealedUntil });
  const em = world.app.orm.em.fork();
  const { definitionHash } = await em.findOneOrFail(PhantomVersionEntity, { id: versionId });
  await em.nativeUpdate(SimulationEntity, { contentHash: definitionHash }, { codeVersion });
  if (state !== 'published') {
    const now = new Date();
    await world.app.orm.em.fork().nativeUpdate(PhantomVersionEntity, { id: versionId }, { state, publishedAt: null, submittedAt: state === 'draft' ? null : now });
  }
  return `/phantoms/${slug}`;
}
/** An array that a published phantom shows. */
async function publishedArray(world: WalkWorld): Promise<string> {
  const { versionId } = await makePhantom(world.app, { name: `Walk array ${randomUUID().slice(0, 8)}`, radius: 0.03 + 1e-6 * ++made, group: world.own.slug });
  const em = world.app.orm.em.fork();
  const values = Float64Array.of(1, 2, 3, made);
  const sha256 = sha256Hex(values);
  em.create(ArrayEntity, { sha256, kind: 'array', rows: 2, cols: 2, format: 'csv', fileName: 'walk.csv', fileSize: 8, values: toBlob(values) });
  const row = await em.findOneOrFail(PhantomVersionEntity, { id: versionId });
  if (row.definition.family !== 'electrical-impedance') throw new Error('The walk makes phantoms of electrical impedance.');
  row.definition = {
    ...row.definition, truth: { kind: 'array', background: 1, sha256, rows: 2, cols: 2, extent: { xMin: -0.1, xMax: 0.1, yMin: -0.1, yMax: 0.1 }, scale: 1, offset: 0 },
  };
  await em.flush();
  return sha256;
}
const phantomBody = (group: string) => ({ group, name: `Walk draft ${++made}`, licence: 'CC0-1.0', definition: discDefinition(0.05 + 1e-6 * made) });
const version = (state: PhantomState, rest = '') => async (world: WalkWorld): Promise<string> => `${await phantomIn(world, state)}/versions/1${rest}`;

const benches = new WeakMap<WalkWorld, Promise<MadeBench>>();
/** A run of a solver of `own`; every call puts it back in the queue. */
const run = (rest: string) => async (world: WalkWorld): Promise<string> => {
  const bench = benches.get(world) ?? makeBench(world.app, {
    title: `Walk queue ${randomUUID().slice(0, 8)}`, phantoms: 1, ladder: [0.01], draws: 1, phantomGroup: await nameOf(world),
    entries: [{ solver: `Walk solver ${randomUUID().slice(0, 8)}`, group: await nameOf(world), state: 'cancelled', figures: empty }],
  });
  benches.set(world, bench);
  const id = (await bench).entries[0]!.runs[0]!;
  await world.app.orm.em.fork().nativeUpdate(RunEntity, { id }, { state: rest === '/requeue' ? 'cancelled' : 'queued' });
  return `/runs/${id}${rest}`;
};
async function nameOf(world: WalkWorld): Promise<string> {
  return (await world.app.orm.em.fork().findOneOrFail(GroupEntity, { id: world.own.id })).name;
}

/** Uploads, simulations, phantoms and the queue. */
export const phantomRouteCases: RouteCases = {
  'POST /arrays': { path: () => '/arrays' },
  'GET /arrays/:sha256': { path: async (world) => `/arrays/${await publishedArray(world)}` },
  'POST /frames': { path: () => '/frames' },
  'POST /simulations': { path: () => '/simulations', body: empty },
  'GET /phantoms': { path: () => '/phantoms' },
  'POST /phantoms': { path: () => '/phantoms', body: ({ own }) => phantomBody(own.slug) },
  'GET /phantoms/:slug': { path: (world) => phantomIn(world, 'published') },
  'GET /phantoms/:slug #submitted': { path: (world) => phantomIn(world, 'submitted'), state: 'submitted' },
  'GET /phantoms/:slug #draft': { path: (world) => phantomIn(world, 'draft'), state: 'draft' },
  'GET /phantoms/:slug/versions/:n': { path: version('published') },
  'GET /phantoms/:slug/versions/:n #submitted': { path: version('submitted'), state: 'submitted' },
  'GET /phantoms/:slug/versions/:n #draft': { path: version('draft'), state: 'draft' },
  'GET /phantoms/:slug/versions/:n #withdrawn draft': { path: version('withdrawn'), state: 'draft' },
  'PUT /phantoms/:slug/versions/:n': { path: version('draft'), body: empty },
  'POST /phantoms/:slug/versions': { path: async (world) => `${await phantomIn(world, 'published')}/versions`, body: empty },
  'POST /phantoms/:slug/versions/:n/submit': { path: version('published', '/submit') },
  'POST /phantoms/:slug/versions/:n/verdict': { path: version('submitted', '/verdict'), body: empty },
  'POST /phantoms/:slug/versions/:n/withdraw': { path: version('draft', '/withdraw'), body: empty },
  'GET /phantoms/:slug/versions/:n/simulation': { path: version('published', '/simulation') },
  'GET /phantoms/:slug/versions/:n/simulation #draft': { path: version('draft', '/simulation'), state: 'draft' },
  'GET /phantoms/:slug/versions/:n/files/:name': { path: version('published', '/files/voltages.csv') },
  'GET /phantoms/:slug/versions/:n/files/:name #draft': { path: version('draft', '/files/definition.json'), state: 'draft' },
  'GET /phantoms/:slug/versions/:n/best': { path: version('published', '/best') },
  'GET /queue': { path: () => '/queue' },
  'GET /runs/:id/events': { path: run('/events') },
  'POST /runs/:id/cancel': { path: run('/cancel') },
  'POST /runs/:id/requeue': { path: run('/requeue') },
};
