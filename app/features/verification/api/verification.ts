import { queryOptions } from '@tanstack/react-query';
import { verificationSchema } from '../../../../shared/contracts/verification';
import { api, apiUrl } from '../../../lib/api-client';

export const verificationKeys = { all: ['verification'] as const };

/** The instance's checks; asked again while it works on them. */
export const verificationQueryOptions = () =>
  queryOptions({
    queryKey: verificationKeys.all,
    queryFn: ({ signal }) => api.get('/verification', verificationSchema, { signal }),
    refetchInterval: ({ state: { data } }) => (data && (data.running || data.items.some((item) => item.state === 'not-run')) ? 2000 : false),
  });

export const verificationCsvUrl = (): string => apiUrl('/verification.csv');
