import { QueryClient } from '@tanstack/react-query';
import { isApiError } from './api-client';

export function createQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 30_000,
        refetchOnWindowFocus: false,
        // A refusal stays a refusal; only a lost connection or a failing server is worth asking again.
        retry: (count, error) => count < 2 && (!isApiError(error) || error.status === 0 || error.status >= 500),
      },
    },
  });
}
