import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { z } from 'zod';
import { accountSchema } from '../../../../shared/contracts/account';
import { tokenCreatedSchema, tokenListSchema } from '../../../../shared/contracts/token';
import type { NotificationSettings } from '../../../../shared/domain/notifications';
import type { TokenScope } from '../../../../shared/domain/token-scopes';
import { api } from '../../../lib/api-client';

export const accountKeys = { all: ['account'] as const, tokens: ['account', 'tokens'] as const };

export const getAccountQueryOptions = () => queryOptions({ queryKey: accountKeys.all, queryFn: ({ signal }) => api.get('/account', accountSchema, { signal }) });
export const listTokensQueryOptions = () => queryOptions({ queryKey: accountKeys.tokens, queryFn: async ({ signal }) => (await api.get('/account/tokens', tokenListSchema, { signal })).items });

export function useEditAccount() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (json: { about?: string; email?: string; notifications?: Partial<NotificationSettings> }) => api.patch('/account', accountSchema, { json }),
    onSuccess: (account) => client.setQueryData(accountKeys.all, account),
  });
}
export function useConfirmEmail() {
  const client = useQueryClient();
  return useMutation({ mutationFn: (token: string) => api.post('/account/email-confirmation', accountSchema, { json: { token } }), onSuccess: (account) => client.setQueryData(accountKeys.all, account) });
}
export function useCreateToken() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (json: { name: string; scopes: TokenScope[]; expiresInDays: number }) => api.post('/account/tokens', tokenCreatedSchema, { json }),
    onSuccess: () => client.invalidateQueries({ queryKey: accountKeys.tokens }),
  });
}
export function useRevokeToken() {
  const client = useQueryClient();
  return useMutation({ mutationFn: (id: string) => api.delete(`/account/tokens/${encodeURIComponent(id)}`, z.null()), onSuccess: () => client.invalidateQueries({ queryKey: accountKeys.tokens }) });
}

/** Everything read as this account is forgotten with the session. */
export function useSignOut() {
  const client = useQueryClient();
  return useMutation({ mutationFn: () => api.delete('/session', z.null()), onSuccess: () => client.resetQueries() });
}
export function useCloseAccount() {
  const client = useQueryClient();
  return useMutation({ mutationFn: (handle: string) => api.delete('/account', z.null(), { json: { handle } }), onSuccess: () => client.resetQueries() });
}
