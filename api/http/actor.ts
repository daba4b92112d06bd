import type { Actor } from '../../shared/domain/permissions.ts';
import type { TokenScope } from '../../shared/domain/token-scopes.ts';

/** Who makes the request, and through what. */
export interface RequestActor extends Actor {
  readonly handle: string;
  readonly via: 'session' | 'token';
  /** Null for a session: no limit beyond the roles. */
  readonly scopes: readonly TokenScope[] | null;
}
