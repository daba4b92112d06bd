import { certificateSchema } from '../../shared/contracts/certificates.ts';
import {
  recomputationSchema, replaySchema, runDetailSchema, runImageQuerySchema, runImageSchema, runListQuerySchema, runListSchema, runParamsSchema, sensitivityQuerySchema,
  sensitivitySchema, trialListSchema, trialQuerySchema,
} from '../../shared/contracts/runs.ts';
import { RecomputationEntity } from '../entities/run.ts';
import { actingOf } from '../http/acting-of.ts';
import { defineRawRoute, defineRoute, type Route } from '../http/define-route.ts';
import { caution } from '../services/benches/caution.ts';
import { certifyRun } from '../services/runs/certify-run.ts';
import { findRun, requireFinished, runSubject } from '../services/runs/find-run.ts';
import { listRuns } from '../services/runs/list-runs.ts';
import { listTrials } from '../services/runs/list-trials.ts';
import { newestRecomputation, toRecomputation } from '../services/runs/newest-recomputation.ts';
import { requestRecomputation } from '../services/runs/queue-run.ts';
import { sensitivity } from '../services/runs/recompute-draw.ts';
import { replayRun } from '../services/runs/replay-run.ts';
import { runTableCsv, runTrialsCsv } from '../services/runs/run-csv.ts';
import { showImage } from '../services/runs/show-image.ts';
import { showRun } from '../services/runs/show-run.ts';

const tag = 'runs';

const readRuns = defineRoute({
  method: 'get', path: '/runs', tag, summary: 'Runs, newest first',
  permission: 'public', query: runListQuerySchema, response: runListSchema,
  handle: ({ em, deps, query }) => listRuns(em, { query, now: deps.clock() }),
});

const readRun = defineRoute({
  method: 'get', path: '/runs/:id', tag, summary: 'A run with its error tables, stability sheets, checks, provenance and verdicts',
  permission: 'content.read', params: runParamsSchema, response: runDetailSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: ({ em, actor, deps, loaded }) => showRun(em, { run: loaded, actor, now: deps.clock(), secondsLeft: deps.jobs.secondsLeft(loaded.id) }),
});

const readTrials = defineRoute({
  method: 'get', path: '/runs/:id/trials', tag, summary: 'All figures of every draw',
  permission: 'content.read', params: runParamsSchema, query: trialQuerySchema, response: trialListSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async ({ em, loaded, query }) => ({ items: await listTrials(em, { run: loaded, level: query.level }) }),
});

const readImage = defineRoute({
  method: 'get', path: '/runs/:id/images', tag, summary: 'The reconstruction of one draw, and the truth beside it',
  description: 'The median and the worst draw of each level are stored; the others are computed again and their hash compared.',
  permission: 'content.read', params: runParamsSchema, query: runImageQuerySchema, response: runImageSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: ({ em, actor, deps, loaded, query }) => showImage(em, deps.jobs, { run: loaded, actor, now: deps.clock(), level: query.level, draw: query.draw }),
});

const readReplay = defineRoute({
  method: 'get', path: '/runs/:id/replay', tag, summary: 'All that is needed to recompute the run elsewhere with the same code',
  permission: 'content.read', params: runParamsSchema, response: replaySchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: ({ em, actor, deps, loaded }) => replayRun(em, { run: loaded, actor, now: deps.clock() }),
});

const readSensitivity = defineRoute({
  method: 'get', path: '/runs/:id/sensitivity', tag, summary: 'Error against the regularisation parameter, and the choices of the rule',
  permission: 'content.read', params: runParamsSchema, query: sensitivityQuerySchema, response: sensitivitySchema, limit: 'simulate',
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: ({ em, deps, loaded, query }) => {
    requireFinished(loaded);
    return sensitivity(em, deps.jobs, loaded, query.level);
  },
});

const recompute = defineRoute({
  method: 'post', path: '/runs/:id/recomputations', tag, summary: 'Compute a finished run again and compare every bit',
  permission: 'run.recompute', params: runParamsSchema, response: recomputationSchema, status: 202,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async (context) => {
    const { em, deps, loaded } = context;
    const { id } = await requestRecomputation(em, deps.jobs, { ...actingOf(context), run: loaded });
    return toRecomputation(await em.fork().findOneOrFail(RecomputationEntity, { id }, { populate: ['requestedBy'] }));
  },
});

const readRecomputation = defineRoute({
  method: 'get', path: '/runs/:id/recomputations', tag, summary: 'The newest recomputation, null while nobody asked for one',
  permission: 'content.read', params: runParamsSchema, response: recomputationSchema.nullable(),
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: ({ em, loaded }) => newestRecomputation(em, loaded.id),
});

const readCertificate = defineRoute({
  method: 'get', path: '/runs/:id/certificate', tag, summary: 'What a printed certificate of a finished run says',
  permission: 'content.read', params: runParamsSchema, response: certificateSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: ({ em, actor, deps, loaded, origin }) => certifyRun(em, { run: loaded, actor, now: deps.clock(), origin }),
});

const downloadTable = defineRawRoute({
  method: 'get', path: '/runs/:id/table.csv', tag, summary: 'The error table as CSV', produces: ['text/csv'],
  permission: 'content.read', params: runParamsSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async ({ em, loaded }) => ({ kind: 'file' as const, contentType: 'text/csv; charset=utf-8', fileName: `${loaded.id}-table.csv`, body: await runTableCsv(em, loaded) }),
});

const downloadTrials = defineRawRoute({
  method: 'get', path: '/runs/:id/trials.csv', tag, summary: 'Every draw as CSV', produces: ['text/csv'],
  permission: 'content.read', params: runParamsSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async ({ em, loaded }) => ({ kind: 'file' as const, contentType: 'text/csv; charset=utf-8', fileName: `${loaded.id}-trials.csv`, body: await runTrialsCsv(em, loaded) }),
});

const downloadRun = defineRawRoute({
  method: 'get', path: '/runs/:id/run.json', tag, summary: 'The run with every draw as one JSON file', produces: ['application/json'],
  permission: 'content.read', params: runParamsSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async ({ em, actor, deps, loaded }) => {
    const run = runDetailSchema.parse(await showRun(em, { run: loaded, actor, now: deps.clock() }));
    const { items } = trialListSchema.parse({ items: await listTrials(em, { run: loaded }) });
    return { kind: 'file' as const, contentType: 'application/json; charset=utf-8', fileName: `${loaded.id}.json`, body: `${JSON.stringify({ caution, run, trials: items }, null, 1)}\n` };
  },
});

export const runRoutes: readonly Route[] = [
  readRuns, readRun, readTrials, readImage, readReplay, readSensitivity, recompute, readRecomputation, readCertificate, downloadTable, downloadTrials, downloadRun,
];
