import { keepPreviousData, queryOptions, useQuery } from '@tanstack/react-query';
import { simulationSchema } from '../../../../shared/contracts/simulations';
import type { PhantomDefinition } from '../../../../shared/domain/phantom-definition';
import { api } from '../../../lib/api-client';
import { phantomKeys } from './keys';

/** The signal ends a request whose definition has changed meanwhile, so that an old answer never overtakes a new one. */
export const simulateQueryOptions = (definition: PhantomDefinition | null, checks: boolean) =>
  queryOptions({
    queryKey: phantomKeys.unsaved(definition, checks),
    queryFn: ({ signal }) => api.post('/simulations', simulationSchema, { json: { definition, checks }, signal }),
    staleTime: Infinity,
    gcTime: 60_000,
    retry: false,
  });

/** First the data alone, which is quick; once they are there the slower checks. */
export function useLiveSimulation(definition: PhantomDefinition | null, enabled: boolean) {
  const ready = enabled && definition !== null;
  const data = useQuery({ ...simulateQueryOptions(definition, false), enabled: ready, placeholderData: keepPreviousData });
  const checks = useQuery({ ...simulateQueryOptions(definition, true), enabled: ready && data.isSuccess && !data.isPlaceholderData });
  return { data, checks };
}
