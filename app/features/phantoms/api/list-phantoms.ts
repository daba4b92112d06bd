import { queryOptions, useQuery } from '@tanstack/react-query';
import { phantomListSchema } from '../../../../shared/contracts/phantoms';
import { api } from '../../../lib/api-client';
import { phantomKeys, type PhantomListFilters } from './keys';

export const listPhantomsQueryOptions = (filters: PhantomListFilters = {}) =>
  queryOptions({
    queryKey: phantomKeys.list(filters),
    queryFn: ({ signal }) => api.get('/phantoms', phantomListSchema, { query: { ...filters, limit: 100 }, signal }),
  });
export const usePhantoms = (filters: PhantomListFilters = {}) => useQuery(listPhantomsQueryOptions(filters));
