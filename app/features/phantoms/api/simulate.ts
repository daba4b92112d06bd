import { queryOptions, useQuery, type Query } from '@tanstack/react-query';
import { simulationSchema, type Simulation } from '../../../../shared/contracts/simulations';
import type { FamilyKey } from '../../../../shared/domain/families';
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

/** Old data stay in view while new ones are computed, but not those of another family. */
const keepOfFamily = (family: FamilyKey) => (previous: Simulation | undefined, query: Query<Simulation, Error, Simulation, ReturnType<typeof phantomKeys.unsaved>> | undefined) =>
  query?.queryKey[1]?.family === family ? previous : undefined;

/** First the data alone, which is quick; once they are there the slower checks. */
export function useLiveSimulation(definition: PhantomDefinition | null, family: FamilyKey, enabled: boolean) {
  const ready = enabled && definition?.family === family;
  const data = useQuery({ ...simulateQueryOptions(definition, false), enabled: ready, placeholderData: keepOfFamily(family) });
  const checks = useQuery({ ...simulateQueryOptions(definition, true), enabled: ready && data.isSuccess && !data.isPlaceholderData });
  return { data, checks };
}
