import { keepPreviousData, useInfiniteQuery, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { userPageSchema, userSchema } from '../../../../shared/contracts/account';
import { auditPageSchema } from '../../../../shared/contracts/audit';
import { outboxPageSchema } from '../../../../shared/contracts/outbox';
import { queueSchema } from '../../../../shared/contracts/site';
import type { SiteRole } from '../../../../shared/domain/permissions';
import { api } from '../../../lib/api-client';

export type GivableRole = Exclude<SiteRole, 'member'>;
export const adminKeys = { all: ['admin'] as const };
/** The first page has no cursor. */
const first = undefined as string | undefined;

export const useUsers = (q: string) =>
  useInfiniteQuery({
    queryKey: [...adminKeys.all, 'users', q], initialPageParam: first, placeholderData: keepPreviousData,
    queryFn: ({ signal, pageParam }) => api.get('/admin/users', userPageSchema, { query: { q, cursor: pageParam }, signal }),
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
export function useSetSiteRoles() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ handle, siteRoles }: { handle: string; siteRoles: GivableRole[] }) => api.put(`/admin/users/${encodeURIComponent(handle)}/site-roles`, userSchema, { json: { siteRoles } }),
    onSuccess: () => client.invalidateQueries({ queryKey: adminKeys.all }),
  });
}
export interface AuditFilters {
  actor: string;
  action: string;
}
export const useAudit = (filters: AuditFilters) =>
  useInfiniteQuery({
    queryKey: [...adminKeys.all, 'audit', filters], initialPageParam: first, placeholderData: keepPreviousData,
    queryFn: ({ signal, pageParam }) => api.get('/admin/audit', auditPageSchema, { query: { ...filters, cursor: pageParam }, signal }),
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
export const useOutbox = () =>
  useInfiniteQuery({
    queryKey: [...adminKeys.all, 'outbox'], initialPageParam: first,
    queryFn: ({ signal, pageParam }) => api.get('/admin/outbox', outboxPageSchema, { query: { cursor: pageParam }, signal }),
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });
export const useQueue = () => useQuery({ queryKey: [...adminKeys.all, 'queue'], refetchInterval: 3000, queryFn: ({ signal }) => api.get('/queue', queueSchema, { signal }) });
