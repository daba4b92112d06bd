import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { toBlob } from '../../../api/entities/float64-blob.ts';
import { PhantomVersionEntity } from '../../../api/entities/phantom.ts';
import { SimulationEntity } from '../../../api/entities/simulation.ts';
import { ArrayEntity } from '../../../api/entities/stored-array.ts';
import { allRoutes } from '../../../api/routes/all-routes.ts';
import { encodeArray } from '../../../shared/domain/array-encoding.ts';
import { contentHash, sha256Hex } from '../../../solvers/core/hash.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { makeBench, type MadeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let bench: MadeBench;
let stranger: HttpClient;
let curator: HttpClient;
let reviewer: HttpClient;
let observer: HttpClient;
const secret = Float64Array.of(1.25, 2.5, 3.75, 4.125);
const hash = sha256Hex(secret);
const dayMs = 86_400_000;
/** What must not appear anywhere: the array's hash and values, and the truth on the grid ([1, 1, 2, 2] of the fixture). */
const traces = [hash, encodeArray(secret).data, '3.75', encodeArray(Float64Array.of(1, 1, 2, 2)).data, 'truth-array'];

beforeAll(async () => {
  app = await startTestApp();
  const sealedUntil = new Date(app.deps.clock().getTime() + 10 * dayMs).toISOString().slice(0, 10);
  bench = await makeBench(app, { title: 'Sealed bench', phantoms: 1, ladder: [0.01, 0.1], draws: 2, sealedUntil, entries: [{ solver: 'Sealed solver', figures: () => ({ 'relative-l2-error': 0.5 }) }] });
  const em = app.orm.em.fork();
  em.create(ArrayEntity, { sha256: hash, kind: 'array', rows: 2, cols: 2, format: 'csv', fileName: 'truth-array.csv', fileSize: 1, values: toBlob(secret) });
  const version = await em.findOneOrFail(PhantomVersionEntity, { phantom: { slug: bench.phantoms[0] } });
  if (version.definition.family !== 'electrical-impedance') throw new Error('The bench is one of electrical impedance.');
  version.definition = { ...version.definition, truth: { kind: 'array', background: 1, sha256: hash, rows: 2, cols: 2, extent: { xMin: -0.1, xMax: 0.1, yMin: -0.1, yMax: 0.1 }, scale: 1, offset: 0 } };
  const before = version.definitionHash;
  version.definitionHash = contentHash(version.definition);
  await em.flush();
  await em.nativeUpdate(SimulationEntity, { contentHash: before }, { contentHash: version.definitionHash });
  stranger = await app.signInAs('a-stranger');
  curator = await app.signInAs('curator-demo');
  reviewer = await app.signInAs('far-reviewer', ['reviewer']);
  // A member of the phantom's group who is no curator.
  observer = await app.signInAs('developer-demo');
});
afterAll(() => app.stop());

/** Every address that can be read with GET, filled in with the sealed phantom, its bench, solver and run. */
function addresses(): string[] {
  const run = bench.entries[0]!.runs[0]!;
  const names = ['definition.json', 'truth.npy', 'voltages.csv', 'README.txt', 'frames.csv'];
  return allRoutes
    .filter((route) => route.method === 'get' && !route.path.endsWith('/events'))
    .flatMap((route) => {
      const slug = route.path.startsWith('/phantoms') ? bench.phantoms[0]! : route.path.startsWith('/benches') ? bench.slug : route.path.startsWith('/solvers') ? bench.entries[0]!.solver : 'tarn-soil-physics';
      const path = route.path.replace(':slug', slug).replace(':n', '1').replace(':id', run).replace(':sha256', hash);
      if (path.includes(':name')) return names.map((name) => path.replace(':name', name));
      if (path.endsWith('/images')) return [`${path}?level=0&draw=median`, `${path}?level=1&draw=worst`];
      if (path.endsWith('/sensitivity')) return [`${path}?level=0`];
      if (path === '/search') return [`/search?q=${hash}`, '/search?q=Sealed'];
      return path.includes(':') ? [] : [path];
    });
}

describe('a sealed ground truth', () => {
  it('is on no page for visitors, strangers and other members of its group', async () => {
    const tried: string[] = [];
    for (const client of [app.visitor, stranger, observer]) {
      for (const address of addresses()) {
        const answer = await client.get(`/api/v1${address}`);
        tried.push(`${answer.status} ${address}`);
        const told = traces.filter((trace) => answer.text.includes(trace) && !(trace === hash && address.includes(hash) && answer.status === 404));
        expect(told, address).toEqual([]);
      }
    }
    // The walk is worth something only where the pages were really read.
    for (const part of ['/simulation', '/replay', '/files/definition.json']) expect(tried.some((line) => line.startsWith('200') && line.includes(part)), part).toBe(true);
    expect(tried.some((line) => line === `404 /arrays/${hash}`)).toBe(true);
    expect(tried.some((line) => line.startsWith('403') && line.includes('truth.npy'))).toBe(true);
  });

  it('gives the data to everybody and the truth to its curators and to reviewers', async () => {
    const at = `/api/v1/phantoms/${bench.phantoms[0]}/versions/1`;
    expect((await stranger.get(`${at}/simulation`)).body).toMatchObject({ clean: [0, 1], truth: null, truthRange: null, targets: null });
    expect((await stranger.get(at)).body).toMatchObject({ version: { sealed: true, definition: { truth: null } } });
    for (const client of [curator, reviewer]) {
      expect((await client.get(`${at}/simulation`)).body).toMatchObject({ truth: { shape: [4] } });
      expect((await client.get(at)).body).toMatchObject({ version: { sealed: true, definition: { truth: { sha256: hash } } } });
      expect((await client.get(`/api/v1/arrays/${hash}`)).status).toBe(200);
    }
  });

  it('opens on its day by the clock alone', async () => {
    app.advance(11 * dayMs);
    const at = `/api/v1/phantoms/${bench.phantoms[0]}/versions/1`;
    expect((await app.visitor.get(at)).body).toMatchObject({ version: { sealed: false, definition: { truth: { sha256: hash } } } });
    expect((await app.visitor.get(`${at}/simulation`)).body).toMatchObject({ truth: { shape: [4] } });
    expect((await app.visitor.get(`/api/v1/arrays/${hash}`)).status).toBe(200);
  });
});
