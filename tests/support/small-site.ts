import type { Configuration } from '../../shared/contracts/solvers';
import { HttpClient } from './http-client';
import type { Site } from './site';

/** A little of everything on a running site, made over its API by the demo accounts. */
export interface SmallSite {
  readonly phantom: string;
  readonly bench: string;
  readonly group: string;
  /** Run by solver slug. */
  readonly runs: Readonly<Record<string, string>>;
  client(handle: string): Promise<HttpClient>;
}

interface Wanted {
  readonly solvers: readonly { readonly name: string; readonly configuration: Configuration }[];
  readonly ladder: readonly number[];
  readonly draws: number;
  readonly electrodes?: 8 | 16;
}

export async function signedIn(site: Pick<Site, 'url'>, handle: string): Promise<HttpClient> {
  const client = new HttpClient(site.url);
  await client.get(`/auth/github?login=${handle}&returnTo=/account`, { follow: true });
  return client;
}

/** Groups, one published phantom with two targets, one open bench, and the given solvers with finished runs. */
export async function fillSite(site: Site, wanted: Wanted): Promise<SmallSite> {
  const clients = new Map<string, HttpClient>();
  const client = async (handle: string): Promise<HttpClient> => {
    const known = clients.get(handle) ?? (await signedIn(site, handle));
    clients.set(handle, known);
    return known;
  };
  const ask = async (handle: string, path: string, body?: unknown, status?: number): Promise<Record<string, unknown>> => {
    const answer = await (await client(handle)).post(`/api/v1${path}`, body);
    if (status === undefined ? answer.status >= 300 : answer.status !== status) throw new Error(`POST ${path} as ${handle}: ${answer.status} ${answer.text}`);
    return answer.body as Record<string, unknown>;
  };
  const curators = (await ask('curator-demo', '/groups', { name: 'Fenland Tank Imaging', description: 'Tanks with electrodes around them.' }))['slug'] as string;
  const developers = (await ask('developer-demo', '/groups', { name: 'Ridge Inversion', description: 'Plain methods.' }))['slug'] as string;

  const shape = (label: string, x: number, y: number, value: number) => ({ kind: 'ellipse', label, target: true, x, y, semiAxisA: 0.035, semiAxisB: 0.028, angleDeg: 20, value });
  const phantom = (await ask('curator-demo', '/phantoms', {
    group: curators, name: 'Two bodies', description: 'Two ellipses, $\\sigma = 1.6$ and $0.6$ S/m.', licence: 'CC-BY-4.0', frames: null, sealedUntil: null,
    definition: {
      family: 'electrical-impedance', dataKind: 'difference', noiseReference: 'difference',
      truth: { kind: 'shapes', background: 1, shapes: [shape('left', -0.06, 0.03, 1.6), shape('right', 0.055, -0.04, 0.6)] },
      geometry: {
        body: { kind: 'disc', radius: 0.15 }, electrodes: wanted.electrodes ?? 16, electrodeCoverage: 0.5, firstElectrodeDeg: 90, numbering: 'clockwise', contactImpedance: 0.002,
        pattern: 'adjacent', current: 0.005, measurement: 'adjacent-undriven',
      },
    },
  }))['slug'] as string;
  await ask('curator-demo', `/phantoms/${phantom}/versions/1/submit`);
  await ask('reviewer-demo', `/phantoms/${phantom}/versions/1/verdict`, { verdict: 'publish', reason: 'The checks pass.' });
  const bench = (await ask('curator-demo', '/benches', {
    group: curators, title: 'Two bodies bench', question: 'Which method finds both bodies?', description: 'Noise is relative to the difference signal, $\\|e\\| = \\delta\\|y\\|$.', phantoms: [{ slug: phantom, version: 1 }],
    ladder: wanted.ladder, draws: wanted.draws, seed: 20261201,
  }))['slug'] as string;
  await ask('curator-demo', `/benches/${bench}/open`);
  const slugs: string[] = [];
  for (const { name, configuration } of wanted.solvers) {
    const solver = (await ask('developer-demo', '/solvers', { group: developers, name, description: 'A published method.', configuration, declaration: { notTuned: true, ownMesh: true, sourceMayBePublished: true } }))['slug'] as string;
    await ask('developer-demo', `/benches/${bench}/entries`, { solver, version: 1 });
    slugs.push(solver);
  }
  const visitor = new HttpClient(site.url);
  const runs: Record<string, string> = {};
  for (const solver of slugs) {
    for (;;) {
      const list = (await visitor.get(`/api/v1/runs?solver=${solver}`)).body as { items: { id: string; state: string; progress: { failure: string | null } }[] };
      const run = list.items[0];
      if (run && (run.state === 'failed' || run.state === 'cancelled')) throw new Error(`${solver}: ${run.progress.failure ?? run.state}`);
      if (run?.state === 'finished') {
        runs[solver] = run.id;
        break;
      }
      await new Promise((resolve) => setTimeout(resolve, 150));
    }
  }
  return { phantom, bench, group: developers, runs, client };
}

export const tikhonov: Configuration = { method: 'tikhonov', parameters: { penalty: 'gradient', smallestAlpha: 1e-5 }, rule: { key: 'discrepancy', safetyFactor: 1.05 } };
export const truncatedSvd: Configuration = { method: 'truncated-svd', parameters: { largestIndex: 80 }, rule: { key: 'gcv' } };
export const cgls: Configuration = { method: 'cgls', parameters: { penalty: 'identity', largestIteration: 60 }, rule: { key: 'discrepancy', safetyFactor: 1.05 } };
export const totalVariation: Configuration = { method: 'total-variation', parameters: { largestIteration: 60 }, rule: { key: 'fixed', value: 1e-6 } };
export const gaussNewton: Configuration = { method: 'gauss-newton', parameters: { penalty: 'gradient', firstAlpha: 0.3, decay: 0.3, largestIteration: 4 }, rule: { key: 'discrepancy', safetyFactor: 1.1 } };
