import type { Actor } from '../../shared/domain/permissions.ts';

/** Who does it, when, and in which request: what every change leaves in the audit trail. */
export interface Acting {
  readonly actor: Actor & { readonly handle: string };
  readonly now: Date;
  readonly requestId?: string;
}
