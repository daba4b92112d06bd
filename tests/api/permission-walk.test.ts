import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Route, RoutePermission } from '../../api/http/define-route.ts';
import { allRoutes } from '../../api/routes/all-routes.ts';
import { scopeOfPermission, tokenScopes } from '../../shared/domain/token-scopes.ts';
import type { Answer, HttpClient } from '../support/http-client.ts';
import type { RouteCase } from './support/route-case.ts';
import { routeCases } from './support/route-cases.ts';
import { startWalkWorld, walkers, type Walker, type WalkWorld } from './support/walk-world.ts';

const everybody: readonly Walker[] = walkers;
const signedIn = walkers.filter((walker) => walker !== 'visitor');
const members: readonly Walker[] = ['observer', 'developer', 'curator', 'owner', 'own-reviewer'];
const curators: readonly Walker[] = ['curator', 'owner'];
const developers: readonly Walker[] = ['developer', 'owner'];

/** The table of roles and actions of the product description, written out by hand and not taken from the code. */
const expected: Record<RoutePermission, readonly Walker[] | Record<'published' | 'submitted' | 'draft', readonly Walker[]>> = {
  public: everybody,
  'content.read': { published: everybody, submitted: [...members, 'reviewer'], draft: members },
  'account.read': signedIn,
  'account.manage': signedIn,
  'group.create': signedIn,
  'group.read-members': [...members, 'administrator'],
  'group.manage': ['owner'],
  'phantom.create': curators,
  'phantom.edit': curators,
  'phantom.review': ['reviewer'],
  'phantom.read-sealed': [...curators, 'own-reviewer', 'reviewer'],
  'phantom.simulate': signedIn,
  'array.upload': signedIn,
  'solver.create': developers,
  'solver.edit': developers,
  'bench.create': curators,
  'bench.edit': curators,
  'entry.create': developers,
  'run.cancel': developers,
  'run.recompute': ['reviewer'],
  'run.review': ['reviewer'],
  'run.comment': { published: signedIn, submitted: [...members, 'reviewer'], draft: members },
  'review.read-queue': ['own-reviewer', 'reviewer'],
  'site.administer': ['administrator'],
};

const keyOf = (route: Route): string => `${route.method.toUpperCase()} ${route.path}`;
const casesOf = (route: Route): [string, RouteCase][] => Object.entries(routeCases).filter(([key]) => key.split(' #')[0] === keyOf(route));
const allowedFor = (route: Route, routeCase: RouteCase): readonly Walker[] => {
  const rule = expected[route.permission];
  return 'published' in rule ? rule[routeCase.state ?? 'published'] : rule;
};

let world: WalkWorld;
beforeAll(async () => {
  world = await startWalkWorld();
});
afterAll(() => world.app.stop());

async function send(route: Route, routeCase: RouteCase, client: HttpClient, walker: Walker): Promise<Answer> {
  const path = `/api/v1${await routeCase.path(world, walker)}`;
  const body = routeCase.body?.(world, walker);
  if (route.file) {
    const form = new FormData();
    return client.request(route.method.toUpperCase(), path, { form });
  }
  if (route.produces?.includes('text/event-stream')) return readHead(client, path);
  return client.request(route.method.toUpperCase(), path, { body });
}

/** An event stream does not end, so only its head is awaited. */
async function readHead(client: HttpClient, path: string): Promise<Answer> {
  const stop = new AbortController();
  const cookie = [...client.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
  const response = await fetch(`${client.url}${path}`, {
    signal: stop.signal,
    headers: { ...(cookie ? { cookie } : {}), ...(client.bearer ? { authorization: `Bearer ${client.bearer}` } : {}) },
  });
  stop.abort();
  return { status: response.status, headers: response.headers, body: undefined, text: '' };
}

describe('every route with every role', () => {
  it('has a case for each route, and no case without a route', () => {
    const missing = allRoutes.filter((route) => casesOf(route).length === 0).map(keyOf);
    expect(missing, 'add a case in tests/api/support').toEqual([]);
    const known = new Set(allRoutes.map(keyOf));
    expect(Object.keys(routeCases).filter((key) => !known.has(key.split(' #')[0] ?? ''))).toEqual([]);
  });

  it('defines no address twice', () => {
    const keys = allRoutes.map((route) => `${route.method} ${route.path.replace(/:\w+/g, ':')}`);
    expect(keys.filter((key, place) => keys.indexOf(key) !== place)).toEqual([]);
  });

  for (const route of allRoutes) {
    for (const [key, routeCase] of casesOf(route)) {
      it(`${key} (${route.permission})`, async () => {
        const allowed = allowedFor(route, routeCase);
        for (const walker of walkers) {
          const client =
            routeCase.endsSession && walker !== 'visitor' ? await world.app.signInAs(world.handleOf(walker)) : world.clients[walker];
          const { status, text } = await send(route, routeCase, client, walker);
          const where = `${walker}: ${status} ${text.slice(0, 300)}`;
          expect(status, where).toBeLessThan(500);
          if (allowed.includes(walker)) {
            // 404 is what an unknown thing and a hidden one have in common, so a case must name a thing that exists.
            expect([401, 403, 404], where).not.toContain(status);
          } else if (walker === 'visitor') {
            expect(route.permission === 'content.read' ? [404] : [401, 404], where).toContain(status);
          } else {
            expect([403, 404], where).toContain(status);
          }
        }
      });
    }
  }
});

describe('every route with a token that lacks its scope', () => {
  for (const route of allRoutes) {
    const [first] = casesOf(route);
    if (route.permission === 'public' || !first) continue;
    const scope = scopeOfPermission[route.permission];
    const [key, routeCase] = first;
    it(`${key} refuses`, async () => {
      const walker = allowedFor(route, routeCase).find((candidate): candidate is Exclude<Walker, 'visitor'> => candidate !== 'visitor');
      if (walker === undefined) throw new Error('nobody may use this route');
      const client = await world.app.tokenFor(world.handleOf(walker), tokenScopes.filter((candidate) => candidate !== scope));
      const { status, text } = await send(route, routeCase, client, walker);
      expect(status, text).toBe(403);
    });
  }
});
