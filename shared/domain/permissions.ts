/**
 * Who may do what. The API enforces this table on every route; the client hides what it forbids. Conditions that depend
 * on the thing itself (its group, its state, who made it) are the facts of `Subject`.
 */
export const siteRoles = ['member', 'reviewer', 'administrator'] as const;
export type SiteRole = (typeof siteRoles)[number];
export const groupRoles = ['owner', 'curator', 'developer', 'observer'] as const;
export type GroupRole = (typeof groupRoles)[number];

export interface Actor {
  readonly id: string;
  readonly siteRoles: readonly SiteRole[];
  /** Roles by group id. */
  readonly groups: Readonly<Record<string, readonly GroupRole[]>>;
}

/** Facts about the thing acted on. */
export interface Subject {
  /** The group that owns it. */
  readonly groupId?: string;
  /** Groups that have a stake and so may not review it (the run's and the phantom's). */
  readonly interestedGroupIds?: readonly string[];
  /** Readable by everybody (published, registered, open or closed). */
  readonly published?: boolean;
  /** Submitted and waiting for a reviewer: reviewers may read it. */
  readonly submitted?: boolean;
  /** The account it belongs to (tokens, notifications, profile). */
  readonly accountId?: string;
}

type Rule = (actor: Actor | null, subject: Subject) => boolean;

const hasGroupRole = (actor: Actor | null, groupId: string | undefined, roles: readonly GroupRole[]): boolean =>
  !!actor && !!groupId && (actor.groups[groupId] ?? []).some((role) => roles.includes(role));
const isMemberOf = (actor: Actor | null, groupId: string | undefined): boolean => hasGroupRole(actor, groupId, groupRoles);
const hasSiteRole = (actor: Actor | null, role: SiteRole): boolean => !!actor && actor.siteRoles.includes(role);
const signedIn: Rule = (actor) => !!actor;
const administrator: Rule = (actor) => hasSiteRole(actor, 'administrator');
const owner: Rule = (actor, s) => hasGroupRole(actor, s.groupId, ['owner']);
const curatorOrOwner: Rule = (actor, s) => hasGroupRole(actor, s.groupId, ['curator', 'owner']);
const developerOrOwner: Rule = (actor, s) => hasGroupRole(actor, s.groupId, ['developer', 'owner']);
const readContent: Rule = (actor, s) =>
  !!s.published || isMemberOf(actor, s.groupId) || (!!s.submitted && hasSiteRole(actor, 'reviewer'));
const independentReviewer: Rule = (actor, s) =>
  hasSiteRole(actor, 'reviewer') && !(s.interestedGroupIds ?? (s.groupId ? [s.groupId] : [])).some((id) => isMemberOf(actor, id));

export const permissions = {
  'content.read': { who: 'everybody what is published; a group its drafts; reviewers what is submitted', rule: readContent },
  'account.read': { who: 'the account itself', rule: (a, s) => !!a && a.id === s.accountId },
  'account.manage': { who: 'the account itself', rule: (a, s) => !!a && a.id === s.accountId },
  'group.create': { who: 'every member', rule: signedIn },
  'group.read-members': { who: 'members of the group', rule: (a, s) => isMemberOf(a, s.groupId) || administrator(a, s) },
  'group.manage': { who: 'owner of the group', rule: owner },
  'phantom.create': { who: 'curator or owner of the group', rule: curatorOrOwner },
  'phantom.edit': { who: 'curator or owner of its group', rule: curatorOrOwner },
  'phantom.review': { who: 'reviewer not in its group', rule: independentReviewer },
  'phantom.read-sealed': { who: 'curators of its group and reviewers', rule: (a, s) => curatorOrOwner(a, s) || hasSiteRole(a, 'reviewer') },
  'phantom.simulate': { who: 'every signed-in member', rule: signedIn },
  'array.upload': { who: 'every signed-in member', rule: signedIn },
  'solver.create': { who: 'developer or owner of the group', rule: developerOrOwner },
  'solver.edit': { who: 'developer or owner of its group', rule: developerOrOwner },
  'bench.create': { who: 'curator or owner of the group', rule: curatorOrOwner },
  'bench.edit': { who: 'curator or owner of its group', rule: curatorOrOwner },
  'entry.create': { who: 'developer or owner of the solver\'s group', rule: developerOrOwner },
  'run.cancel': { who: 'developer or owner of its group', rule: developerOrOwner },
  'run.recompute': { who: 'reviewer not in the run\'s or the phantom\'s group', rule: independentReviewer },
  'run.review': { who: 'reviewer not in the run\'s or the phantom\'s group', rule: independentReviewer },
  'run.comment': { who: 'every signed-in member who may read it', rule: (a, s) => !!a && readContent(a, s) },
  'review.read-queue': { who: 'reviewers', rule: (a) => hasSiteRole(a, 'reviewer') },
  'site.administer': { who: 'administrators', rule: administrator },
} satisfies Record<string, { who: string; rule: Rule }>;

export type Permission = keyof typeof permissions;

export function can(actor: Actor | null, permission: Permission, subject: Subject = {}): boolean {
  return permissions[permission].rule(actor, subject);
}
