import { z } from 'zod';
import { defineRoute, type Route } from '../http/define-route.ts';

const readHealth = defineRoute({
  method: 'get',
  path: '/health',
  tag: 'site',
  summary: 'Whether the server and its database answer',
  permission: 'public',
  response: z.object({ status: z.literal('ok'), database: z.literal('ok') }),
  handle: async ({ em }) => {
    await em.getConnection().execute('select 1');
    return { status: 'ok' as const, database: 'ok' as const };
  },
});

export const siteRoutes: readonly Route[] = [readHealth];
