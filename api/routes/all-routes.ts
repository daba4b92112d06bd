import type { Route } from '../http/define-route.ts';
import { accountRoutes } from './account-routes.ts';
import { adminRoutes } from './admin-routes.ts';
import { groupRoutes } from './group-routes.ts';
import { overviewRoutes } from './overview-routes.ts';
import { sessionRoutes } from './session-routes.ts';
import { siteRoutes } from './site-routes.ts';
import { solverRoutes } from './solver-routes.ts';
import { phantomRoutes } from './phantom-routes.ts';
import { simulationRoutes } from './simulation-routes.ts';
import { uploadRoutes } from './upload-routes.ts';
import { benchRoutes } from './bench-routes.ts';
import { catalogueRoutes } from './catalogue-routes.ts';
import { reviewRoutes } from './review-routes.ts';
import { runRoutes } from './run-routes.ts';
import { queueRoutes } from './queue-routes.ts';
import { verificationRoutes } from './verification-routes.ts';

/** Every route of the API. One that is not listed here does not exist. */
export const allRoutes: readonly Route[] = [...siteRoutes, ...sessionRoutes, ...accountRoutes, ...groupRoutes, ...adminRoutes, ...solverRoutes, ...overviewRoutes, ...uploadRoutes, ...simulationRoutes, ...phantomRoutes, ...benchRoutes, ...catalogueRoutes, ...reviewRoutes, ...runRoutes, ...queueRoutes, ...verificationRoutes];
