import type { GroupRole } from '../../../shared/domain/permissions.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

/** Everybody who may come to a route, seen from one group ('own') whose things are acted on. */
export const walkers = [
  'visitor',
  'stranger',
  'observer',
  'developer',
  'curator',
  'owner',
  'own-reviewer',
  'reviewer',
  'administrator',
] as const;
export type Walker = (typeof walkers)[number];

export interface WalkWorld {
  readonly app: TestApp;
  /** The group whose things are acted on. */
  readonly own: { readonly id: string; readonly slug: string };
  /** A group the stranger owns: its roles must not count in `own`. */
  readonly other: { readonly id: string; readonly slug: string };
  readonly clients: Readonly<Record<Walker, HttpClient>>;
  readonly handleOf: (walker: Exclude<Walker, 'visitor'>) => string;
}

const memberRoles: Partial<Record<Walker, readonly GroupRole[]>> = {
  observer: ['observer'],
  developer: ['developer'],
  curator: ['curator'],
  owner: ['owner'],
  'own-reviewer': ['observer'],
};

export async function startWalkWorld(options?: Parameters<typeof startTestApp>[0]): Promise<WalkWorld> {
  const app = await startTestApp(options);
  const handleOf = (walker: Exclude<Walker, 'visitor'>): string => `walk-${walker}`;
  const clients: Partial<Record<Walker, HttpClient>> = { visitor: app.visitor };
  for (const walker of walkers) {
    if (walker === 'visitor') continue;
    const siteRoles = walker === 'administrator' ? (['administrator'] as const) : walker.endsWith('reviewer') ? (['reviewer'] as const) : [];
    clients[walker] = await app.signInAs(handleOf(walker), siteRoles);
  }
  const members: Record<string, readonly GroupRole[]> = {};
  for (const walker of walkers) {
    const roles = memberRoles[walker];
    if (walker !== 'visitor' && roles) members[handleOf(walker)] = roles;
  }
  const own = await app.group('Walked group', members);
  const other = await app.group('Other group', { [handleOf('stranger')]: ['owner', 'curator', 'developer'] });
  return { app, own, other, clients: clients as Record<Walker, HttpClient>, handleOf };
}
