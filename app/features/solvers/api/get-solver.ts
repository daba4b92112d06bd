import { queryOptions, useQuery } from '@tanstack/react-query';
import { solverDetailSchema, solverListSchema, solverStabilitySchema } from '../../../../shared/contracts/solvers';
import { api } from '../../../lib/api-client';
import { solverKeys, type SolverListFilters } from './keys';

const e = encodeURIComponent;

export const listSolversQueryOptions = (filters: SolverListFilters = {}) =>
  queryOptions({ queryKey: solverKeys.list(filters), queryFn: ({ signal }) => api.get('/solvers', solverListSchema, { query: { ...filters, limit: 100 }, signal }) });
export const useSolvers = (filters: SolverListFilters = {}) => useQuery(listSolversQueryOptions(filters));

export const getSolverQueryOptions = (slug: string) =>
  queryOptions({ queryKey: solverKeys.detail(slug), queryFn: ({ signal }) => api.get(`/solvers/${e(slug)}`, solverDetailSchema, { signal }) });
export const useSolver = (slug: string) => useQuery(getSolverQueryOptions(slug));

/** One sheet for each finished run of a version. */
export const getStabilityQueryOptions = (slug: string, n: number, metric: string) =>
  queryOptions({
    queryKey: solverKeys.stability(slug, n, metric),
    queryFn: ({ signal }) => api.get(`/solvers/${e(slug)}/versions/${n}/stability`, solverStabilitySchema, { query: { metric }, signal }),
  });
export const useStability = (slug: string, n: number, metric = 'relative-l2-error') => useQuery(getStabilityQueryOptions(slug, n, metric));
