import type { Acting } from '../services/acting.ts';
import type { Dependencies } from '../dependencies.ts';
import type { RequestActor } from './actor.ts';

/** Who does it, when, and in which request: the part of a request that a changing service needs. */
export function actingOf(context: { readonly actor: RequestActor; readonly deps: Dependencies; readonly requestId: string }): Acting {
  return { actor: context.actor, now: context.deps.clock(), requestId: context.requestId };
}
