import { verificationSchema } from '../../shared/contracts/verification.ts';
import { defineRawRoute, defineRoute, type Route } from '../http/define-route.ts';
import { showVerification, verificationCsv } from '../services/verification/show-verification.ts';

const tag = 'site';

const readVerification = defineRoute({
  method: 'get', path: '/verification', tag, summary: 'Published values, computed again by this instance with the code that scores the runs',
  description: 'The first question sets the instance to work where it has not begun by itself; ask again while `running` is true. Digests are equal on two machines exactly when the results have the same bits.',
  permission: 'public', response: verificationSchema,
  handle: ({ deps }) => showVerification(deps.jobs.verification),
});

const downloadVerification = defineRawRoute({
  method: 'get', path: '/verification.csv', tag, summary: 'The same as a table', permission: 'public', produces: ['text/csv'],
  handle: ({ deps }) => ({ kind: 'file', contentType: 'text/csv; charset=utf-8', fileName: 'verification.csv', body: verificationCsv(deps.jobs.verification, deps.clock()) }),
});

export const verificationRoutes: readonly Route[] = [readVerification, downloadVerification];
