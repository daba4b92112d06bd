import { keepPreviousData, queryOptions, useQuery } from '@tanstack/react-query';
import { runImageSchema, trialListSchema } from '../../../../shared/contracts/runs';
import { decodeArray } from '../../../../shared/domain/array-encoding';
import { api } from '../../../lib/api-client';
import { runKeys } from './keys';

const e = encodeURIComponent;
export type DrawChoice = number | 'median' | 'worst';

/** One reconstruction with its truth, decoded to the pixels inside the body. Stored results never change. */
export const getRunImageQueryOptions = (id: string, level: number, draw: DrawChoice) =>
  queryOptions({
    queryKey: runKeys.image(id, level, draw),
    staleTime: Infinity,
    queryFn: async ({ signal }) => {
      const answer = await api.get(`/runs/${e(id)}/images`, runImageSchema, { query: { level, draw }, signal });
      return { ...answer, image: decodeArray(answer.image), truth: answer.truth ? decodeArray(answer.truth) : null };
    },
  });
export type RunImageDecoded = Awaited<ReturnType<NonNullable<ReturnType<typeof getRunImageQueryOptions>['queryFn']>>>;

export const useRunImage = (id: string, level: number, draw: DrawChoice, enabled = true) =>
  useQuery({ ...getRunImageQueryOptions(id, level, draw), placeholderData: keepPreviousData, enabled });

export const listTrialsQueryOptions = (id: string, level?: number) =>
  queryOptions({
    queryKey: runKeys.trials(id, level),
    queryFn: async ({ signal }) => (await api.get(`/runs/${e(id)}/trials`, trialListSchema, { query: { level }, signal })).items,
  });
