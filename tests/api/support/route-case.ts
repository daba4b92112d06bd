import type { Walker, WalkWorld } from './walk-world.ts';

/** How the walk reaches one route, for the test that sends everybody through every route. */
export interface RouteCase {
  /**
   * The address under /api/v1 with its parameters filled in, of a thing that belongs to `world.own`. Called before every
   * request, so a case that destroys its thing makes a new one here.
   */
  readonly path: (world: WalkWorld, walker: Walker) => Promise<string> | string;
  /** A body that passes the permission check and preferably changes nothing (an invalid one is fine: 422 is 'let in'). */
  readonly body?: (world: WalkWorld, walker: Walker) => unknown;
  /** State of the thing for 'content.read' and 'run.comment'. */
  readonly state?: 'published' | 'submitted' | 'draft';
  /** The route ends the session or the account: the walker signs in anew for it. */
  readonly endsSession?: boolean;
}

/** Keys are 'METHOD /path' as in the definition, optionally followed by ' #note' for a second case of the same route. */
export type RouteCases = Readonly<Record<string, RouteCase>>;
