import { recentVerdictsSchema, searchQuerySchema, searchResultSchema } from '../../shared/contracts/site.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { recentVerdicts } from '../services/site/recent-verdicts.ts';
import { search } from '../services/site/search.ts';

const tag = 'site';

const readVerdicts = defineRoute({
  method: 'get', path: '/recent-verdicts', tag, summary: 'The newest signed tables',
  permission: 'public', response: recentVerdictsSchema,
  handle: async ({ em, deps }) => ({ items: await recentVerdicts(em, deps.clock()) }),
});

const find = defineRoute({
  method: 'get', path: '/search', tag, summary: 'Find by name, identifier or the first digits of a hash',
  permission: 'public', query: searchQuerySchema, response: searchResultSchema,
  handle: async ({ em, actor, query }) => ({ items: await search(em, { q: query.q, actor }) }),
});

export const overviewRoutes: readonly Route[] = [readVerdicts, find];
