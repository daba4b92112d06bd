import { foundationRouteCases } from './foundation-route-cases.ts';
import { phantomRouteCases } from './phantom-route-cases.ts';
import { registryRouteCases } from './registry-route-cases.ts';
import type { RouteCases } from './route-case.ts';

/** One case at least for every route in `allRoutes`. */
export const routeCases: RouteCases = { ...foundationRouteCases, ...phantomRouteCases, ...registryRouteCases };
