import { queryOptions, useQuery } from '@tanstack/react-query';
import { actorOfAccount, sessionSchema, type SessionAccount } from '../../../../shared/contracts/session';
import { can, type Actor, type Permission, type Subject } from '../../../../shared/domain/permissions';
import { api } from '../../../lib/api-client';

export type Account = SessionAccount;

export const sessionKey = ['session'] as const;

export const sessionQueryOptions = () =>
  queryOptions({
    queryKey: sessionKey,
    queryFn: ({ signal }) => api.get('/session', sessionSchema, { signal }),
    staleTime: 60_000,
  });

export interface Session {
  account: Account | null;
  actor: Actor | null;
  isPending: boolean;
  /** Whether the reader may do this; the server decides again. */
  can: (permission: Permission, subject?: Subject) => boolean;
  /** Whether the reader may do this in at least one group. */
  canSomewhere: (permission: Permission) => boolean;
}

export function useSession(): Session {
  const { data, isPending } = useQuery(sessionQueryOptions());
  const account = data?.account ?? null;
  const actor = actorOfAccount(account);
  return {
    account,
    actor,
    isPending,
    can: (permission, subject) => can(actor, permission, subject),
    canSomewhere: (permission) => (account?.groups ?? []).some((g) => can(actor, permission, { groupId: g.id })),
  };
}
