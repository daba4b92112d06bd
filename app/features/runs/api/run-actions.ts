import { useMutation, useQuery, useQueryClient, queryOptions } from '@tanstack/react-query';
import { z } from 'zod';
import { commentListSchema, commentSchema, recomputationSchema, runDetailSchema, type RunDetail } from '../../../../shared/contracts/runs';
import type { Verdict } from '../../../../shared/domain/states';
import { api } from '../../../lib/api-client';
import { runKeys } from './keys';

const e = encodeURIComponent;

/** A change of a run: its page, its lists, the benches and the review queue all show it. */
function useRunMutation<V>(id: string, send: (values: V) => Promise<unknown>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: send,
    onSuccess: async () => {
      await Promise.all([client.invalidateQueries({ queryKey: runKeys.detail(id), exact: true }), client.invalidateQueries({ queryKey: ['review'] }), client.invalidateQueries({ queryKey: ['benches'] }), client.invalidateQueries({ queryKey: [...runKeys.all, 'list'] })]);
    },
  });
}

export interface VerdictInput {
  verdict: Verdict;
  reason: string;
  inspected: ('table' | 'images' | 'checks' | 'provenance')[];
}
export const useCreateVerdict = (id: string) => useRunMutation<VerdictInput>(id, (json) => api.post(`/runs/${e(id)}/verdicts`, runDetailSchema, { json }));
export const useTakeReview = (id: string) => useRunMutation<boolean>(id, (take): Promise<RunDetail> => (take ? api.post(`/runs/${e(id)}/review`, runDetailSchema) : api.delete(`/runs/${e(id)}/review`, runDetailSchema)));
export const useCancelRun = (id: string) => useRunMutation<void>(id, () => api.post(`/runs/${e(id)}/cancel`, z.unknown()));
export const useRequeueRun = (id: string) => useRunMutation<void>(id, () => api.post(`/runs/${e(id)}/requeue`, z.unknown()));

export const listCommentsQueryOptions = (id: string) =>
  queryOptions({ queryKey: runKeys.comments(id), queryFn: async ({ signal }) => (await api.get(`/runs/${e(id)}/comments`, commentListSchema, { signal })).items });

export function useCreateComment(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (json: { text: string; anchor: string; question: boolean }) => api.post(`/runs/${e(id)}/comments`, commentSchema, { json }),
    onSuccess: () => client.invalidateQueries({ queryKey: runKeys.detail(id) }),
  });
}

/** The newest recomputation on the server, polled while it works. */
export const useRecomputation = (id: string) =>
  useQuery({
    queryKey: runKeys.recomputation(id),
    queryFn: ({ signal }) => api.get(`/runs/${e(id)}/recomputations`, recomputationSchema.nullable(), { signal }),
    refetchInterval: (query) => (query.state.data?.state === 'queued' || query.state.data?.state === 'running' ? 1000 : false),
  });
export function useRequestRecomputation(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => api.post(`/runs/${e(id)}/recomputations`, recomputationSchema),
    onSuccess: (answer) => client.setQueryData(runKeys.recomputation(id), answer),
  });
}
