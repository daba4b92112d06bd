import { keepPreviousData, queryOptions, useQuery } from '@tanstack/react-query';
import { arrayResponseSchema } from '../../../../shared/contracts/arrays';
import { phantomBestSchema, phantomDetailSchema } from '../../../../shared/contracts/phantoms';
import { simulationSchema } from '../../../../shared/contracts/simulations';
import { api } from '../../../lib/api-client';
import { phantomKeys } from './keys';

const e = encodeURIComponent;
export const versionPath = (slug: string, n: number): string => `/phantoms/${e(slug)}/versions/${n}`;

/** A phantom with one of its versions: the current one, or version `n`. */
export const getPhantomQueryOptions = (slug: string, n?: number) =>
  queryOptions({
    queryKey: phantomKeys.version(slug, n ?? 'current'),
    queryFn: ({ signal }) => api.get(n === undefined ? `/phantoms/${e(slug)}` : versionPath(slug, n), phantomDetailSchema, { signal }),
  });
export const usePhantom = (slug: string, n?: number) => useQuery(getPhantomQueryOptions(slug, n));

/** Clean data of a stored version; immutable once the version is. */
export const getPhantomSimulationQueryOptions = (slug: string, n: number) =>
  queryOptions({
    queryKey: phantomKeys.simulation(slug, n),
    queryFn: ({ signal }) => api.get(`${versionPath(slug, n)}/simulation`, simulationSchema, { signal }),
    staleTime: 10 * 60_000,
  });
export const usePhantomSimulation = (slug: string, n: number) => useQuery(getPhantomSimulationQueryOptions(slug, n));

export const getPhantomBestQueryOptions = (slug: string, n: number, noise: number) =>
  queryOptions({
    queryKey: phantomKeys.best(slug, n, noise),
    queryFn: ({ signal }) => api.get(`${versionPath(slug, n)}/best`, phantomBestSchema, { query: { noise }, signal }),
    placeholderData: keepPreviousData,
  });
export const usePhantomBest = (slug: string, n: number, noise: number) => useQuery(getPhantomBestQueryOptions(slug, n, noise));

/** An uploaded array, for its picture. */
export const getArrayQueryOptions = (sha256: string) =>
  queryOptions({
    queryKey: phantomKeys.array(sha256),
    queryFn: ({ signal }) => api.get(`/arrays/${e(sha256)}`, arrayResponseSchema, { signal }),
    staleTime: Infinity,
  });
