import type { Permission } from './permissions.ts';

/** What a bearer token may do. A token never does more than its holder may. */
export const tokenScopes = ['read', 'write:phantoms', 'write:solvers', 'write:runs', 'review'] as const;
export type TokenScope = (typeof tokenScopes)[number];

export const tokenScopeNames: Record<TokenScope, string> = {
  read: 'read what you may read, drafts included',
  'write:phantoms': 'upload phantoms and manage benches',
  'write:solvers': 'register solver configurations',
  'write:runs': 'enter benches, cancel runs, comment',
  review: 'read the review queue, recompute, give verdicts',
};

/** The scope a permission needs when the request carries a token; `null` means only a signed-in browser may. */
export const scopeOfPermission: Record<Permission, TokenScope | null> = {
  'content.read': 'read',
  'account.read': 'read',
  'account.manage': null,
  'group.create': null,
  'group.read-members': 'read',
  'group.manage': null,
  'phantom.create': 'write:phantoms',
  'phantom.edit': 'write:phantoms',
  'phantom.review': 'review',
  'phantom.read-sealed': 'read',
  'phantom.simulate': 'write:phantoms',
  'array.upload': 'write:phantoms',
  'solver.create': 'write:solvers',
  'solver.edit': 'write:solvers',
  'bench.create': 'write:phantoms',
  'bench.edit': 'write:phantoms',
  'entry.create': 'write:runs',
  'run.cancel': 'write:runs',
  'run.recompute': 'review',
  'run.review': 'review',
  'run.comment': 'write:runs',
  'review.read-queue': 'review',
  'site.administer': null,
};
