import { solverCreateSchema, solverDetailSchema, solverListQuerySchema, solverListSchema, solverParamsSchema, solverStabilityQuerySchema, solverStabilitySchema, solverVersionCreateSchema, solverVersionParamsSchema, solverWithdrawSchema } from '../../shared/contracts/solvers.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { findGroup } from '../services/groups/find-group.ts';
import { registerSolverVersion, withdrawSolverVersion } from '../services/solvers/change-version-state.ts';
import { createSolver, createSolverVersion } from '../services/solvers/create-solver.ts';
import { findSolver, findVersion, solverSubject } from '../services/solvers/find-solver.ts';
import { listSolvers } from '../services/solvers/list-solvers.ts';
import { solverStability } from '../services/solvers/solver-stability.ts';
import { showSolver } from '../services/solvers/show-solver.ts';

const tag = 'solvers';

const readSolvers = defineRoute({
  method: 'get', path: '/solvers', tag, summary: 'Solver configurations, newest first',
  permission: 'public', query: solverListQuerySchema, response: solverListSchema,
  handle: ({ em, actor, query }) => listSolvers(em, { actor, query }),
});

const addSolver = defineRoute({
  method: 'post', path: '/solvers', tag, summary: 'Register a configuration of a method, or keep it as a draft',
  permission: 'solver.create', body: solverCreateSchema, response: solverDetailSchema, status: 201,
  location: (solver) => `/api/v1/solvers/${solver.slug}`,
  bodySubject: async (body, { em }) => ({ groupId: (await findGroup(em, body.group)).id }),
  handle: async ({ em, actor, deps, requestId, body }) => {
    const slug = await createSolver(em, { actor, now: deps.clock(), requestId, group: await findGroup(em, body.group), solver: body });
    return showSolver(em, await findSolver(em, slug), actor);
  },
});

const readSolver = defineRoute({
  method: 'get', path: '/solvers/:slug', tag, summary: 'A configuration with its versions and its entries',
  permission: 'content.read', params: solverParamsSchema, response: solverDetailSchema,
  load: ({ em, params }) => findSolver(em, params.slug),
  subject: solverSubject,
  handle: ({ em, actor, loaded }) => showSolver(em, loaded, actor),
});

const addVersion = defineRoute({
  method: 'post', path: '/solvers/:slug/versions', tag, summary: 'Add the next version; the versions before stay as they are',
  permission: 'solver.edit', params: solverParamsSchema, body: solverVersionCreateSchema, response: solverDetailSchema, status: 201,
  location: (solver) => `/api/v1/solvers/${solver.slug}`,
  load: ({ em, params }) => findSolver(em, params.slug),
  subject: solverSubject,
  handle: async ({ em, actor, deps, requestId, loaded, body }) => {
    await createSolverVersion(em, { actor, now: deps.clock(), requestId, solver: loaded, version: body });
    em.clear();
    return showSolver(em, await findSolver(em, loaded.slug), actor);
  },
});

const registerVersion = defineRoute({
  method: 'post', path: '/solvers/:slug/versions/:n/register', tag, summary: 'Register a draft; it never changes from then on',
  permission: 'solver.edit', params: solverVersionParamsSchema, response: solverDetailSchema,
  load: ({ em, params }) => findSolver(em, params.slug),
  subject: solverSubject,
  handle: async ({ em, actor, deps, requestId, loaded, params }) => {
    await registerSolverVersion(em, { actor, now: deps.clock(), requestId, solver: loaded, n: params.n });
    return showSolver(em, loaded, actor);
  },
});

const withdrawVersion = defineRoute({
  method: 'post', path: '/solvers/:slug/versions/:n/withdraw', tag, summary: 'Withdraw a version; its page and its runs stay',
  permission: 'solver.edit', params: solverVersionParamsSchema, body: solverWithdrawSchema, response: solverDetailSchema,
  load: ({ em, params }) => findSolver(em, params.slug),
  subject: solverSubject,
  handle: async ({ em, actor, deps, requestId, loaded, params, body }) => {
    await withdrawSolverVersion(em, { actor, now: deps.clock(), requestId, solver: loaded, n: params.n, reason: body.reason });
    return showSolver(em, loaded, actor);
  },
});

const readStability = defineRoute({
  method: 'get', path: '/solvers/:slug/versions/:n/stability', tag, summary: 'How the error of a version grows with the noise, one sheet a finished run',
  permission: 'content.read', params: solverVersionParamsSchema, query: solverStabilityQuerySchema, response: solverStabilitySchema,
  load: ({ em, params }) => findSolver(em, params.slug),
  subject: (solver, { params }) => ({ groupId: solver.group.id, published: findVersion(solver, params.n).registeredAt !== null }),
  handle: ({ em, deps, loaded, params, query }) => solverStability(em, { versionId: findVersion(loaded, params.n).id, metric: query.metric, now: deps.clock() }),
});

export const solverRoutes: readonly Route[] = [readSolvers, addSolver, readSolver, addVersion, registerVersion, withdrawVersion, readStability];
