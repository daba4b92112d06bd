import { useMutation, useQueryClient } from '@tanstack/react-query';
import { benchDetailSchema, type BenchCreate } from '../../../../shared/contracts/benches';
import { api } from '../../../lib/api-client';
import { benchKeys } from './keys';

export function useCreateBench() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (json: BenchCreate) => api.post('/benches', benchDetailSchema, { json }),
    onSuccess: async (bench) => {
      client.setQueryData(benchKeys.detail(bench.slug), bench);
      await client.invalidateQueries({ queryKey: [...benchKeys.all, 'list'] });
    },
  });
}
