import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { z } from 'zod';
import { groupPageSchema, groupSchema, invitationListSchema, invitationPreviewSchema, invitationSchema, memberListSchema } from '../../../../shared/contracts/group';
import type { GroupRole } from '../../../../shared/domain/permissions';
import { api } from '../../../lib/api-client';

const e = encodeURIComponent;
export const groupKeys = {
  all: ['groups'] as const,
  list: (q: string) => [...groupKeys.all, 'list', q] as const,
  detail: (slug: string) => [...groupKeys.all, 'detail', slug] as const,
  members: (slug: string) => [...groupKeys.detail(slug), 'members'] as const,
  invitations: (slug: string) => [...groupKeys.detail(slug), 'invitations'] as const,
};

export const listGroupsQueryOptions = (q: string) =>
  queryOptions({ queryKey: groupKeys.list(q), queryFn: ({ signal }) => api.get('/groups', groupPageSchema, { query: { q, limit: 200 }, signal }) });
export const getGroupQueryOptions = (slug: string) =>
  queryOptions({ queryKey: groupKeys.detail(slug), queryFn: ({ signal }) => api.get(`/groups/${e(slug)}`, groupSchema, { signal }) });
export const listMembersQueryOptions = (slug: string) =>
  queryOptions({ queryKey: groupKeys.members(slug), queryFn: async ({ signal }) => (await api.get(`/groups/${e(slug)}/members`, memberListSchema, { signal })).items });
export const listInvitationsQueryOptions = (slug: string) =>
  queryOptions({ queryKey: groupKeys.invitations(slug), queryFn: async ({ signal }) => (await api.get(`/groups/${e(slug)}/invitations`, invitationListSchema, { signal })).items });

function useGroupMutation<V, R>(send: (values: V) => Promise<R>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: send,
    onSuccess: () => Promise.all([client.invalidateQueries({ queryKey: groupKeys.all }), client.invalidateQueries({ queryKey: ['session'] })]),
  });
}

export const useCreateGroup = () => useGroupMutation((json: { name: string; description: string }) => api.post('/groups', groupSchema, { json }));
export const useEditGroup = (slug: string) => useGroupMutation((json: { name?: string; description?: string }) => api.patch(`/groups/${e(slug)}`, groupSchema, { json }));
export const useSetRoles = (slug: string) =>
  useGroupMutation(({ handle, roles }: { handle: string; roles: GroupRole[] }) => api.put(`/groups/${e(slug)}/members/${e(handle)}`, memberListSchema, { json: { roles } }));
export const useRemoveMember = (slug: string) => useGroupMutation((handle: string) => api.delete(`/groups/${e(slug)}/members/${e(handle)}`, z.null()));
export const useLeaveGroup = (slug: string) => useGroupMutation(() => api.delete(`/groups/${e(slug)}/membership`, z.null()));
export const useInvite = (slug: string) => useGroupMutation((json: { email: string; roles: GroupRole[] }) => api.post(`/groups/${e(slug)}/invitations`, invitationSchema, { json }));
export const useSendAgain = (slug: string) => useGroupMutation((id: string) => api.post(`/groups/${e(slug)}/invitations/${e(id)}/sending`, invitationSchema));
export const useRevokeInvitation = (slug: string) => useGroupMutation((id: string) => api.delete(`/groups/${e(slug)}/invitations/${e(id)}`, z.null()));

export const previewInvitationQueryOptions = (token: string) =>
  queryOptions({ queryKey: ['invitation', token], retry: false, queryFn: ({ signal }) => api.post('/invitations/preview', invitationPreviewSchema, { json: { token }, signal }) });
export const useAcceptInvitation = () => useGroupMutation((token: string) => api.post('/invitations/acceptance', groupSchema, { json: { token } }));
