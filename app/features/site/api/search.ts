import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { reviewCountSchema } from '../../../../shared/contracts/runs';
import { queueSchema, recentVerdictsSchema, searchResultSchema } from '../../../../shared/contracts/site';
import { api } from '../../../lib/api-client';

export const searchQueryOptions = (q: string) =>
  queryOptions({
    queryKey: ['search', q],
    queryFn: ({ signal }) => api.get('/search', searchResultSchema, { query: { q }, signal }),
    enabled: q.length >= 2,
    placeholderData: keepPreviousData,
  });

export const reviewCountQueryOptions = () =>
  queryOptions({
    queryKey: ['review', 'count'],
    queryFn: ({ signal }) => api.get('/review/count', reviewCountSchema, { signal }),
  });

export const recentVerdictsQueryOptions = () =>
  queryOptions({
    queryKey: ['recent-verdicts'],
    queryFn: ({ signal }) => api.get('/recent-verdicts', recentVerdictsSchema, { signal }),
  });

/** What the workers do. Asked again while something runs. */
export const queueQueryOptions = () =>
  queryOptions({
    queryKey: ['queue'],
    queryFn: ({ signal }) => api.get('/queue', queueSchema, { signal }),
    refetchInterval: (query) => (query.state.data && query.state.data.queued + query.state.data.running > 0 ? 5000 : false),
  });
