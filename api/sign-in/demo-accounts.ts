import type { SiteRole } from '../../shared/domain/permissions.ts';

/** An account the local stand-in for GitHub vouches for. */
export interface StandInAccount {
  readonly githubId: string;
  readonly handle: string;
  readonly email: string;
  /** Given when the account is made, away from production only. */
  readonly siteRoles: readonly SiteRole[];
}

const account = (number: number, handle: string, siteRoles: readonly SiteRole[] = []): StandInAccount => ({
  githubId: String(number),
  handle,
  email: `${handle}@hadamark.example`,
  siteRoles,
});

/** One per role. Their groups come with the demonstration data. */
export const demoAccounts: readonly StandInAccount[] = [
  account(9001, 'member-demo'),
  account(9002, 'developer-demo'),
  account(9003, 'curator-demo'),
  account(9004, 'reviewer-demo', ['reviewer']),
  account(9005, 'owner-demo'),
  account(9006, 'observer-demo'),
  account(9007, 'admin-demo', ['administrator']),
  account(9008, 'second-reviewer-demo', ['reviewer']),
];
