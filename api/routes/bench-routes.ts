import {
  benchCreateSchema, benchDetailSchema, benchListQuerySchema, benchListSchema, benchParamsSchema, benchUpdateSchema, citationSchema, comparisonQuerySchema, comparisonSchema, costEstimateSchema,
  costQuerySchema, entryCreateSchema, rankingQuerySchema, rankingSchema, seriesQuerySchema, seriesSchema,
} from '../../shared/contracts/benches.ts';
import { defineRawRoute, defineRoute, type Route } from '../http/define-route.ts';
import { rankingCsv, tableCsv } from '../services/benches/bench-csv.ts';
import { rankBench } from '../services/benches/bench-ranking.ts';
import { benchSeries } from '../services/benches/bench-series.ts';
import { closeBench, openBench } from '../services/benches/change-bench-state.ts';
import { citeBench } from '../services/benches/cite-bench.ts';
import { compareBench } from '../services/benches/compare-bench.ts';
import { createBench, editBench } from '../services/benches/create-bench.ts';
import { createEntry } from '../services/benches/create-entry.ts';
import { estimateCost } from '../services/benches/estimate-cost.ts';
import { benchSubject, findBench, findBenchRow } from '../services/benches/find-bench.ts';
import { listBenches } from '../services/benches/list-benches.ts';
import { showBench } from '../services/benches/show-bench.ts';
import { findGroup } from '../services/groups/find-group.ts';
import { findSolver } from '../services/solvers/find-solver.ts';

const tag = 'benches';

const readBenches = defineRoute({
  method: 'get', path: '/benches', tag, summary: 'Benches, newest first',
  permission: 'public', query: benchListQuerySchema, response: benchListSchema,
  handle: ({ em, actor, query }) => listBenches(em, { actor, query }),
});

const addBench = defineRoute({
  method: 'post', path: '/benches', tag, summary: 'Draft a bench: phantom versions, noise ladder, draws, seed, ranking metric',
  permission: 'bench.create', body: benchCreateSchema, response: benchDetailSchema, status: 201,
  location: (bench) => `/api/v1/benches/${bench.slug}`,
  bodySubject: async (body, { em }) => ({ groupId: (await findGroup(em, body.group)).id }),
  handle: async ({ em, actor, deps, requestId, body }) => {
    const slug = await createBench(em, { actor, now: deps.clock(), requestId, group: await findGroup(em, body.group), bench: body });
    return showBench(em, { bench: await findBench(em, slug), actor, now: deps.clock() });
  },
});

const readBench = defineRoute({
  method: 'get', path: '/benches/:slug', tag, summary: 'A bench with its phantoms, its entries and the state of every run',
  permission: 'content.read', params: benchParamsSchema, response: benchDetailSchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: ({ em, actor, deps, loaded }) => showBench(em, { bench: loaded, actor, now: deps.clock() }),
});

const updateBench = defineRoute({
  method: 'put', path: '/benches/:slug', tag, summary: 'Change a draft',
  permission: 'bench.edit', params: benchParamsSchema, body: benchUpdateSchema, response: benchDetailSchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: async ({ em, actor, deps, requestId, loaded, body }) => {
    await editBench(em, { actor, now: deps.clock(), requestId, bench: loaded, terms: body });
    return showBench(em, { bench: await findBench(em, loaded.slug), actor, now: deps.clock() });
  },
});

const startBench = defineRoute({
  method: 'post', path: '/benches/:slug/open', tag, summary: 'Open a draft for entries; what it asks never changes from then on',
  permission: 'bench.edit', params: benchParamsSchema, response: benchDetailSchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: async ({ em, actor, deps, requestId, loaded }) => {
    await openBench(em, { actor, now: deps.clock(), requestId, bench: loaded });
    return showBench(em, { bench: loaded, actor, now: deps.clock() });
  },
});

const endBench = defineRoute({
  method: 'post', path: '/benches/:slug/close', tag, summary: 'Close it: frozen and citable, its hash covers the results',
  permission: 'bench.edit', params: benchParamsSchema, response: benchDetailSchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: async ({ em, actor, deps, requestId, loaded }) => {
    await closeBench(em, { actor, now: deps.clock(), requestId, bench: loaded });
    return showBench(em, { bench: loaded, actor, now: deps.clock() });
  },
});

const addEntry = defineRoute({
  method: 'post', path: '/benches/:slug/entries', tag, summary: 'Enter a registered solver version: one run for each phantom is queued',
  permission: 'entry.create', params: benchParamsSchema, body: entryCreateSchema, response: benchDetailSchema, status: 201,
  load: ({ em, params }) => findBench(em, params.slug),
  bodySubject: async (body, { em }) => ({ groupId: (await findSolver(em, body.solver)).group.id }),
  handle: async ({ em, actor, deps, requestId, loaded, body }) => {
    await createEntry(em, { actor, now: deps.clock(), requestId, bench: loaded, solver: await findSolver(em, body.solver), version: body.version });
    deps.jobs.kick();
    em.clear();
    return showBench(em, { bench: await findBench(em, loaded.slug), actor, now: deps.clock() });
  },
});

const readCost = defineRoute({
  method: 'get', path: '/benches/:slug/cost', tag, summary: 'What an entry with a method will take, from runs of the same method',
  permission: 'content.read', params: benchParamsSchema, query: costQuerySchema, response: costEstimateSchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: ({ em, deps, loaded, query }) => estimateCost(em, { bench: loaded, method: query.method, now: deps.clock(), workers: deps.env.workers }),
});

const readRanking = defineRoute({
  method: 'get', path: '/benches/:slug/ranking', tag, summary: 'The ranking at a noise level, with tie groups and the test behind them',
  permission: 'content.read', params: benchParamsSchema, query: rankingQuerySchema, response: rankingSchema,
  load: ({ em, params }) => findBenchRow(em, params.slug),
  subject: benchSubject,
  handle: ({ em, loaded, query }) => rankBench(em, { bench: loaded, noise: query.noise, metric: query.metric ?? loaded.rankingMetric, over: query.over }),
});

const readComparison = defineRoute({
  method: 'get', path: '/benches/:slug/comparison', tag, summary: 'Methods compared over phantoms, or over the draws of one: tests, pairs with intervals, performance profiles',
  permission: 'content.read', params: benchParamsSchema, query: comparisonQuerySchema, response: comparisonSchema,
  load: ({ em, params }) => findBenchRow(em, params.slug),
  subject: benchSubject,
  handle: ({ em, loaded, query }) => compareBench(em, { bench: loaded, noise: query.noise, metric: query.metric ?? loaded.rankingMetric, over: query.over, phantom: query.phantom }),
});

const readSeries = defineRoute({
  method: 'get', path: '/benches/:slug/series', tag, summary: 'Error against noise for every entry, with the stability sheets',
  permission: 'content.read', params: benchParamsSchema, query: seriesQuerySchema, response: seriesSchema,
  load: ({ em, params }) => findBenchRow(em, params.slug),
  subject: benchSubject,
  handle: ({ em, loaded, query }) => benchSeries(em, { bench: loaded, metric: query.metric ?? loaded.rankingMetric, phantom: query.phantom }),
});

const downloadRanking = defineRawRoute({
  method: 'get', path: '/benches/:slug/ranking.csv', tag, summary: 'The ranking as CSV', produces: ['text/csv'],
  permission: 'content.read', params: benchParamsSchema, query: rankingQuerySchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: async ({ em, loaded, query, deps }) => ({
    kind: 'file' as const,
    contentType: 'text/csv; charset=utf-8',
    fileName: `${loaded.slug}-ranking.csv`,
    body: await rankingCsv(em, { bench: loaded, noise: query.noise, metric: query.metric ?? loaded.rankingMetric, over: query.over, now: deps.clock() }),
  }),
});

const downloadTable = defineRawRoute({
  method: 'get', path: '/benches/:slug/table.csv', tag, summary: 'The full error table as CSV: every entry, phantom, noise level and metric', produces: ['text/csv'],
  permission: 'content.read', params: benchParamsSchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: async ({ em, loaded, deps }) => ({
    kind: 'file' as const,
    contentType: 'text/csv; charset=utf-8',
    fileName: `${loaded.slug}-table.csv`,
    body: await tableCsv(em, { bench: loaded, now: deps.clock() }),
  }),
});

const readCitation = defineRoute({
  method: 'get', path: '/benches/:slug/citation', tag, summary: 'How to cite the bench as it stands: BibTeX and plain text',
  permission: 'content.read', params: benchParamsSchema, response: citationSchema,
  load: ({ em, params }) => findBench(em, params.slug),
  subject: benchSubject,
  handle: ({ loaded, deps, origin }) => citeBench({ bench: loaded, now: deps.clock(), origin }),
});

export const benchRoutes: readonly Route[] = [
  readBenches, addBench, readBench, updateBench, startBench, endBench, addEntry, readCost, readRanking, readComparison, readSeries, downloadRanking, downloadTable, readCitation,
];
