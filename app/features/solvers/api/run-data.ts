import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { runImageSchema, sensitivitySchema, trialListSchema } from '../../../../shared/contracts/runs';
import { decodeArray } from '../../../../shared/domain/array-encoding';
import { api } from '../../../lib/api-client';

const e = encodeURIComponent;
/** What the solver page reads of its runs. Results of a finished run never change. */
const still = { staleTime: Infinity } as const;

export const sensitivityQueryOptions = (run: string, level: number) =>
  queryOptions({
    queryKey: ['runs', 'detail', run, 'sensitivity', level], ...still, placeholderData: keepPreviousData,
    queryFn: ({ signal }) => api.get(`/runs/${e(run)}/sensitivity`, sensitivitySchema.nullable(), { query: { level }, signal }),
  });

export const runTrialsQueryOptions = (run: string) =>
  queryOptions({ queryKey: ['runs', 'detail', run, 'trials', 'all'], ...still, queryFn: async ({ signal }) => (await api.get(`/runs/${e(run)}/trials`, trialListSchema, { signal })).items });

export const runPictureQueryOptions = (run: string, level: number, draw: number) =>
  queryOptions({
    queryKey: ['runs', 'detail', run, 'image', level, draw], ...still,
    queryFn: async ({ signal }) => {
      const answer = await api.get(`/runs/${e(run)}/images`, runImageSchema, { query: { level, draw }, signal });
      return { ...answer, image: decodeArray(answer.image), truth: answer.truth ? decodeArray(answer.truth) : null };
    },
  });
