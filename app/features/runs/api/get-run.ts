import { queryOptions, useQuery } from '@tanstack/react-query';
import { runDetailSchema, runListSchema } from '../../../../shared/contracts/runs';
import { api } from '../../../lib/api-client';
import { runKeys } from './keys';

const e = encodeURIComponent;

export const getRunQueryOptions = (id: string) =>
  queryOptions({ queryKey: runKeys.detail(id), queryFn: ({ signal }) => api.get(`/runs/${e(id)}`, runDetailSchema, { signal }) });
export const useRun = (id: string) => useQuery(getRunQueryOptions(id));

export const listRunsQueryOptions = (filters: Record<string, string | undefined>) =>
  queryOptions({ queryKey: runKeys.list(filters), queryFn: ({ signal }) => api.get('/runs', runListSchema, { query: filters, signal }) });
