import {
  phantomBestSchema, phantomCreateSchema, phantomDetailSchema, phantomListQuerySchema, phantomListSchema, phantomParamsSchema, phantomVerdictSchema,
  phantomVersionCreateSchema, phantomVersionParamsSchema, phantomVersionUpdateSchema, withdrawSchema,
} from '../../shared/contracts/phantoms';
import { simulationSchema } from '../../shared/contracts/simulations';
import { defineRawRoute, defineRoute, type Route } from '../http/define-route.ts';
import { findGroup } from '../services/groups/find-group.ts';
import { bestQuerySchema, listBest } from '../services/phantoms/list-best.ts';
import { giveVerdict, withdrawVersion } from '../services/phantoms/decide-version.ts';
import { fileParamsSchema, versionFile } from '../services/phantoms/version-files.ts';
import { findPhantom, findPhantomVersion, phantomSubject, subjectOf } from '../services/phantoms/find-phantom.ts';
import { listPhantoms } from '../services/phantoms/list-phantoms.ts';
import { maySeeTruth } from '../services/phantoms/phantom-access.ts';
import { createPhantom, createPhantomVersion, updateDraft } from '../services/phantoms/save-phantom.ts';
import { showPhantom } from '../services/phantoms/show-phantom.ts';
import { submitVersion } from '../services/phantoms/submit-version.ts';
import { simulate } from '../services/simulations/simulate.ts';
import { toSimulationWire } from '../services/simulations/show-simulation.ts';

const tag = 'phantoms';

const readPhantoms = defineRoute({
  method: 'get', path: '/phantoms', tag, summary: 'Phantoms, newest first',
  permission: 'public', query: phantomListQuerySchema, response: phantomListSchema,
  handle: ({ em, deps, actor, query }) => listPhantoms(em, { actor, now: deps.clock(), query }),
});

const addPhantom = defineRoute({
  method: 'post', path: '/phantoms', tag, summary: 'Draft a phantom: ground truth, geometry, licence, optional measured frames',
  description: 'Upload an array or frames first and name them by their hash. Exactly the same content is never registered twice.',
  permission: 'phantom.create', body: phantomCreateSchema, response: phantomDetailSchema, status: 201,
  location: (phantom) => `/api/v1/phantoms/${phantom.slug}`,
  bodySubject: async (body, { em }) => ({ groupId: (await findGroup(em, body.group)).id }),
  handle: async ({ em, deps, actor, requestId, body }) => {
    const now = deps.clock();
    const slug = await createPhantom(em, { actor, now, requestId, group: await findGroup(em, body.group), phantom: body });
    return showPhantom(em, await findPhantom(em.fork(), slug), { actor, now });
  },
});

const readPhantom = defineRoute({
  method: 'get', path: '/phantoms/:slug', tag, summary: 'A phantom with its current version',
  permission: 'content.read', params: phantomParamsSchema, response: phantomDetailSchema,
  load: ({ em, params }) => findPhantom(em, params.slug),
  subject: phantomSubject,
  handle: ({ em, deps, actor, loaded }) => showPhantom(em, loaded, { actor, now: deps.clock() }),
});

const readVersion = defineRoute({
  method: 'get', path: '/phantoms/:slug/versions/:n', tag, summary: 'One version of a phantom in full',
  permission: 'content.read', params: phantomVersionParamsSchema, response: phantomDetailSchema,
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  handle: ({ em, deps, actor, loaded }) => showPhantom(em, loaded.phantom, { actor, now: deps.clock() }, loaded.version),
});

const changeVersion = defineRoute({
  method: 'put', path: '/phantoms/:slug/versions/:n', tag, summary: 'Change a draft',
  permission: 'phantom.edit', params: phantomVersionParamsSchema, body: phantomVersionUpdateSchema, response: phantomDetailSchema,
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  handle: async ({ em, deps, actor, requestId, loaded, body }) => {
    const now = deps.clock();
    await updateDraft(em, { actor, now, requestId, ...loaded, terms: body });
    return shownAgain(em, loaded, { actor, now });
  },
});

const addVersion = defineRoute({
  method: 'post', path: '/phantoms/:slug/versions', tag, summary: 'Draft the next version',
  permission: 'phantom.edit', params: phantomParamsSchema, body: phantomVersionCreateSchema, response: phantomDetailSchema, status: 201,
  location: ({ slug, version }) => `/api/v1/phantoms/${slug}/versions/${version.n}`,
  load: ({ em, params }) => findPhantom(em, params.slug),
  subject: phantomSubject,
  handle: async ({ em, deps, actor, requestId, loaded, body }) => {
    const now = deps.clock();
    const n = await createPhantomVersion(em, { actor, now, requestId, phantom: loaded, terms: body });
    const fresh = await findPhantomVersion(em.fork(), loaded.slug, n);
    return showPhantom(em, fresh.phantom, { actor, now }, fresh.version);
  },
});

const submit = defineRoute({
  method: 'post', path: '/phantoms/:slug/versions/:n/submit', tag, summary: 'Simulate a draft, run its checks and hand it to the reviewers',
  description: 'A failed check blocks it; the checks are in extra.checks of the answer.',
  permission: 'phantom.edit', limit: 'simulate', params: phantomVersionParamsSchema, response: phantomDetailSchema,
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  handle: async ({ em, deps, actor, requestId, origin, loaded }) => {
    await submitVersion(em, deps.jobs, { actor, now: deps.clock(), requestId, origin, ...loaded });
    deps.mailer.kick();
    return shownAgain(em, loaded, { actor, now: deps.clock() });
  },
});

const decide = defineRoute({
  method: 'post', path: '/phantoms/:slug/versions/:n/verdict', tag, summary: 'Publish a submitted version, or ask for changes',
  permission: 'phantom.review', params: phantomVersionParamsSchema, body: phantomVerdictSchema, response: phantomDetailSchema,
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  handle: async ({ em, deps, actor, requestId, origin, loaded, body }) => {
    const now = deps.clock();
    await giveVerdict(em, { actor, now, requestId, origin, ...loaded, ...body });
    deps.mailer.kick();
    return shownAgain(em, loaded, { actor, now });
  },
});

const withdraw = defineRoute({
  method: 'post', path: '/phantoms/:slug/versions/:n/withdraw', tag, summary: 'Withdraw a version; what was ranked on it stays',
  permission: 'phantom.edit', params: phantomVersionParamsSchema, body: withdrawSchema, response: phantomDetailSchema,
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  handle: async ({ em, deps, actor, requestId, loaded, body }) => {
    const now = deps.clock();
    await withdrawVersion(em, { actor, now, requestId, ...loaded, ...body });
    return shownAgain(em, loaded, { actor, now });
  },
});

const readSimulation = defineRoute({
  method: 'get', path: '/phantoms/:slug/versions/:n/simulation', tag, summary: 'Clean data of a version; the ground truth too, unless it is sealed to the reader',
  permission: 'content.read', params: phantomVersionParamsSchema, response: simulationSchema,
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  // What a sealed version shows changes with the day and the reader, so both are in the tag.
  etag: ({ contentHash, truth, checks }) => `${contentHash}-${truth ? 'open' : 'sealed'}-${checks.length}`,
  handle: async ({ em, deps, actor, loaded }) => {
    const { phantom, version } = loaded;
    const simulation = await simulate(em, deps.jobs, { definition: version.definition, checks: false });
    return toSimulationWire(simulation, maySeeTruth(actor, phantom, version, deps.clock()));
  },
});

const readFile = defineRawRoute({
  method: 'get', path: '/phantoms/:slug/versions/:n/files/:name', tag,
  summary: 'A file of a version: definition.json, truth.npy, voltages.csv (data.csv outside electrical impedance), noisy-frames.npy, frames.csv or README.txt',
  permission: 'content.read', params: fileParamsSchema,
  produces: ['application/json', 'application/octet-stream', 'text/csv', 'text/plain'],
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  handle: ({ em, deps, actor, origin, params, loaded }) => versionFile(em, deps.jobs, { ...loaded, name: params.name, actor, now: deps.clock(), origin }),
});

const readBest = defineRoute({
  method: 'get', path: '/phantoms/:slug/versions/:n/best', tag, summary: 'Runs on a version at a noise level, best first',
  permission: 'content.read', params: phantomVersionParamsSchema, query: bestQuerySchema, response: phantomBestSchema,
  load: ({ em, params }) => findPhantomVersion(em, params.slug, params.n),
  subject: subjectOf,
  handle: ({ em, loaded, query }) => listBest(em, { version: loaded.version, ...query }),
});

/** Read anew after a change, as the next reader sees it. */
async function shownAgain(em: Parameters<typeof findPhantomVersion>[0], at: { phantom: { slug: string }; version: { n: number } }, reader: Parameters<typeof showPhantom>[2]): ReturnType<typeof showPhantom> {
  const fork = em.fork();
  const { phantom, version } = await findPhantomVersion(fork, at.phantom.slug, at.version.n);
  return showPhantom(fork, phantom, reader, version);
}

export const phantomRoutes: readonly Route[] = [
  readPhantoms, addPhantom, readPhantom, readVersion, changeVersion, addVersion, submit, decide, withdraw, readSimulation, readFile, readBest,
];
