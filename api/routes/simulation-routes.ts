import { simulationRequestSchema, simulationSchema } from '../../shared/contracts/simulations';
import { defineRoute, type Route } from '../http/define-route.ts';
import { checkUploads } from '../services/phantoms/check-content.ts';
import { toSimulationWire } from '../services/simulations/show-simulation.ts';
import { simulate } from '../services/simulations/simulate.ts';

const simulatePhantom = defineRoute({
  method: 'post', path: '/simulations', tag: 'phantoms', summary: 'Clean data of an unsaved phantom, and its checks if asked for',
  description: 'The same content is simulated once. A fault of the ground truth names the field; a simulation that takes too long is refused.',
  permission: 'phantom.simulate', limit: 'simulate', body: simulationRequestSchema, response: simulationSchema,
  handle: async ({ em, deps, actor, body }) => {
    await checkUploads(em, { actor, now: deps.clock(), content: { definition: body.definition, frames: null } });
    // Who sends a definition knows its ground truth.
    return toSimulationWire(await simulate(em, deps.jobs, body), true);
  },
});

export const simulationRoutes: readonly Route[] = [simulatePhantom];
