import { keepPreviousData, queryOptions, useQuery } from '@tanstack/react-query';
import { benchDetailSchema, benchListSchema, costEstimateSchema, rankingSchema, seriesSchema } from '../../../../shared/contracts/benches';
import { phantomDetailSchema, phantomListSchema } from '../../../../shared/contracts/phantoms';
import type { FamilyKey } from '../../../../shared/domain/families';
import { simulationSchema } from '../../../../shared/contracts/simulations';
import { api } from '../../../lib/api-client';

const e = encodeURIComponent;

/** What the solver form and page read of benches and phantoms. Keys begin with the noun, so that their changes reach them. */
export const useOpenBenches = () =>
  useQuery({ queryKey: ['benches', 'list', { state: 'open' }], queryFn: ({ signal }) => api.get('/benches', benchListSchema, { query: { state: 'open', limit: 100 }, signal }) });

export const useBenchChoice = (slug: string) =>
  useQuery({ queryKey: ['benches', 'detail', slug, 'choice'], queryFn: ({ signal }) => api.get(`/benches/${e(slug)}`, benchDetailSchema, { signal }), enabled: slug !== '' });

export const useCost = (bench: string, method: string) =>
  useQuery({
    queryKey: ['benches', 'detail', bench, 'cost', method], queryFn: ({ signal }) => api.get(`/benches/${e(bench)}/cost`, costEstimateSchema, { query: { method }, signal }), enabled: bench !== '',
    placeholderData: keepPreviousData,
  });

/** The other methods of the bench on one phantom. */
export const useOthers = (bench: string, phantom: string) =>
  useQuery({
    queryKey: ['benches', 'detail', bench, 'series', 'relative-l2-error', phantom], enabled: bench !== '' && phantom !== '',
    queryFn: ({ signal }) => api.get(`/benches/${e(bench)}/series`, seriesSchema, { query: { metric: 'relative-l2-error', phantom }, signal }),
  });

export const benchRankingQueryOptions = (bench: string, noise: number) =>
  queryOptions({
    queryKey: ['benches', 'detail', bench, 'ranking', noise, 'standing'], placeholderData: keepPreviousData,
    queryFn: ({ signal }) => api.get(`/benches/${e(bench)}/ranking`, rankingSchema, { query: { noise }, signal }),
  });

/** Published phantoms of a family, newest first, for a preview without a bench. */
export const usePublishedPhantoms = (family: FamilyKey | null) =>
  useQuery({
    queryKey: ['phantoms', 'list', { family, state: 'published' }], enabled: family !== null,
    queryFn: ({ signal }) => api.get('/phantoms', phantomListSchema, { query: { family: family ?? undefined, state: 'published', limit: 100 }, signal }),
  });

const versionPath = (slug: string, n: number): string => `/phantoms/${e(slug)}/versions/${n}`;
/** Definition and simulated data of a phantom version, for the preview. */
export const usePreviewPhantom = (slug: string, n: number) => {
  const enabled = slug !== '' && n > 0;
  const detail = useQuery({ queryKey: ['phantoms', 'detail', slug, 'version', n], queryFn: ({ signal }) => api.get(versionPath(slug, n), phantomDetailSchema, { signal }), enabled });
  const simulation = useQuery({ queryKey: ['phantoms', 'detail', slug, 'version', n, 'simulation'], queryFn: ({ signal }) => api.get(`${versionPath(slug, n)}/simulation`, simulationSchema, { signal }), enabled, staleTime: 10 * 60_000 });
  return { detail, simulation };
};
