import { keepPreviousData, useQuery, useQueryClient } from '@tanstack/react-query';
import type { Configuration } from '../../../../shared/contracts/solvers';
import { reconstructionClient } from '../../../workers/reconstruction-client';
import type { NoiseAnswer } from '../../../workers/reconstruction-messages';
import { findMethod } from '../model/solver-form';
import { nearestIndex, type PreviewPhantom } from '../model/preview-data';

interface PreviewInput {
  readonly phantom: PreviewPhantom | null;
  readonly configuration: Configuration | null;
  readonly noise: number;
  readonly levels: readonly number[];
  readonly seed: number;
}

/** Draws behind each point of the noise curve: enough to see it, few enough to follow a slider. */
export const curveDraws = { linear: 3, other: 1 } as const;

/** The three answers of the worker; a change cancels what it makes old. */
export function usePreview({ phantom, configuration, noise, levels, seed }: PreviewInput) {
  const client = useQueryClient();
  const enabled = phantom !== null && configuration !== null;
  const capabilities = configuration ? findMethod(configuration.method)?.capabilities : undefined;
  const draws = capabilities?.linear ? curveDraws.linear : curveDraws.other;
  const what = [phantom?.data.contentHash, configuration] as const;
  const draw = { seed, level: noise, levelIndex: nearestIndex(levels, noise), drawIndex: 0 };
  const common = { staleTime: Infinity, gcTime: 120_000, retry: false, structuralSharing: false } as const;
  const job = () => {
    if (!phantom || !configuration) throw new Error('The preview was asked for without a phantom or a configuration.');
    return { problem: phantom.problem, configuration, phantom: phantom.data };
  };
  const image = useQuery({
    queryKey: ['preview', 'image', ...what, seed, noise], queryFn: ({ signal }) => reconstructionClient().reconstruct({ ...job(), draw }, { signal }),
    enabled, placeholderData: keepPreviousData, ...common,
  });
  const ready = enabled && image.isSuccess;
  const curveKey = ['preview', 'noise', ...what, seed, levels, draws] as const;
  const curve = useQuery({
    queryKey: curveKey, enabled: ready, ...common,
    queryFn: ({ signal }) =>
      reconstructionClient().errorAgainstNoise({ ...job(), seed, levels, draws }, { signal, onProgress: ({ points }) => client.setQueryData([...curveKey, 'partial'], points) }),
  });
  // Filled by the progress of the query above, never fetched.
  const partial = useQuery<NoiseAnswer['points']>({ queryKey: [...curveKey, 'partial'], queryFn: () => [], enabled: false, structuralSharing: false });
  const hasParameter = !!capabilities?.linear && capabilities.rules.length > 0;
  const parameter = useQuery({
    queryKey: ['preview', 'parameter', ...what, seed, noise], queryFn: ({ signal }) => reconstructionClient().errorAgainstParameter({ ...job(), draw }, { signal }),
    enabled: ready && curve.isSuccess && hasParameter, placeholderData: keepPreviousData, ...common,
  });
  return { image, points: curve.data?.points ?? partial.data ?? [], draws, curveError: curve.error, parameter, hasParameter };
}
