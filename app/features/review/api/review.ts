import { queryOptions } from '@tanstack/react-query';
import { reviewQueueSchema, type ReviewQueue } from '../../../../shared/contracts/runs';
import { api } from '../../../lib/api-client';

export type WaitingRun = ReviewQueue['runs'][number];
export type WaitingPhantom = ReviewQueue['phantoms'][number];

export const reviewQueueQueryOptions = () => queryOptions({ queryKey: ['review', 'queue'], queryFn: ({ signal }) => api.get('/review', reviewQueueSchema, { signal }) });
