import type { Route } from '../http/define-route.ts';
import { sessionRoutes } from './session-routes.ts';
import { siteRoutes } from './site-routes.ts';

/** Every route of the API. One that is not listed here does not exist. */
export const allRoutes: readonly Route[] = [...siteRoutes, ...sessionRoutes];
