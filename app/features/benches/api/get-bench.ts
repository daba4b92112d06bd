import { keepPreviousData, queryOptions, useQuery } from '@tanstack/react-query';
import { benchDetailSchema, benchListSchema, citationSchema, comparisonSchema, rankingSchema, seriesSchema, type Ranking } from '../../../../shared/contracts/benches';
import { api } from '../../../lib/api-client';
import { benchKeys } from './keys';

const e = encodeURIComponent;

export const listBenchesQueryOptions = (filters: Record<string, string | undefined> = {}) =>
  queryOptions({ queryKey: benchKeys.list(filters), queryFn: ({ signal }) => api.get('/benches', benchListSchema, { query: filters, signal }) });

/** Runs of an open bench go on while it is looked at. */
export const getBenchQueryOptions = (slug: string) =>
  queryOptions({
    queryKey: benchKeys.detail(slug),
    queryFn: ({ signal }) => api.get(`/benches/${e(slug)}`, benchDetailSchema, { signal }),
    refetchInterval: (query) => (query.state.data && query.state.data.runsFinished < query.state.data.runsTotal ? 10_000 : false),
  });
export const useBench = (slug: string) => useQuery(getBenchQueryOptions(slug));

/** While the cursor moves the ranking before stays on screen. */
export const getRankingQueryOptions = (slug: string, noise: number, metric?: string, over?: Ranking['over']) =>
  queryOptions({
    queryKey: benchKeys.ranking(slug, noise, metric, over),
    queryFn: ({ signal }) => api.get(`/benches/${e(slug)}/ranking`, rankingSchema, { query: { noise, metric, over }, signal }),
    placeholderData: keepPreviousData,
  });

export interface ComparisonFilters {
  noise: number;
  metric: string;
  over: Ranking['over'];
  /** Slug of the phantom whose draws are compared; all phantoms without it. */
  phantom?: string | undefined;
}

export const getComparisonQueryOptions = (slug: string, filters: ComparisonFilters) =>
  queryOptions({
    queryKey: benchKeys.comparison(slug, filters),
    queryFn: ({ signal }) => api.get(`/benches/${e(slug)}/comparison`, comparisonSchema, { query: { ...filters }, signal }),
    placeholderData: keepPreviousData,
  });

export const getSeriesQueryOptions = (slug: string, metric?: string, phantom?: string) =>
  queryOptions({
    queryKey: benchKeys.series(slug, metric, phantom),
    queryFn: ({ signal }) => api.get(`/benches/${e(slug)}/series`, seriesSchema, { query: { metric, phantom }, signal }),
    placeholderData: keepPreviousData,
  });

export const getCitationQueryOptions = (slug: string) =>
  queryOptions({ queryKey: benchKeys.citation(slug), queryFn: ({ signal }) => api.get(`/benches/${e(slug)}/citation`, citationSchema, { signal }) });
