import { progressSchema, runDetailSchema, runParamsSchema } from '../../shared/contracts/runs';
import { queueSchema } from '../../shared/contracts/site';
import { actingOf } from '../http/acting-of.ts';
import { defineRawRoute, defineRoute, type Route } from '../http/define-route.ts';
import { findRun, runSubject } from '../services/runs/find-run.ts';
import { cancelRun, requeueRun } from '../services/runs/queue-run.ts';
import { progressOf } from '../services/runs/run-summary.ts';
import { showRun } from '../services/runs/show-run.ts';
import { readQueue } from '../services/site/read-queue.ts';

/** At most one event in this time: a quick run finishes many batches a second. */
const eventPauseMs = 150;

const queue = defineRoute({
  method: 'get', path: '/queue', tag: 'site', summary: 'What the workers are doing',
  permission: 'public', response: queueSchema,
  handle: ({ em, deps }) => readQueue(em, { workers: deps.jobs.workers, seeding: deps.seeding?.() ?? false }),
});

const events = defineRawRoute({
  method: 'get', path: '/runs/:id/events', tag: 'runs', summary: 'Progress of a run as server-sent events',
  description: "Events named 'progress'. The state as it is comes first, so a page that was reloaded misses nothing.",
  permission: 'content.read', params: runParamsSchema, produces: ['text/event-stream'],
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: ({ deps, loaded }) => ({
    kind: 'events',
    start: (stream) => {
      const { id } = loaded;
      let closed = false;
      let sending = false;
      let again = false;
      let sent = 0;
      const send = async (): Promise<void> => {
        if (sending) {
          again = true;
          return;
        }
        sending = true;
        try {
          do {
            again = false;
            const run = await findRun(deps.orm.em.fork(), id);
            if (closed) return;
            stream.send('progress', progressSchema.parse(progressOf(run, deps.clock(), deps.jobs.secondsLeft(id))), String(++sent));
            await new Promise((resolve) => setTimeout(resolve, eventPauseMs));
          } while (again && !closed);
        } catch (error) {
          deps.logger.error({ err: error, run: id }, 'progress cannot be sent');
          stream.close();
        } finally {
          sending = false;
        }
      };
      // Listening begins before the first reading, so that nothing falls between the two.
      const stop = deps.jobs.events.listen(id, () => void send());
      void send();
      return () => {
        closed = true;
        stop();
      };
    },
  }),
});

const cancel = defineRoute({
  method: 'post', path: '/runs/:id/cancel', tag: 'runs', summary: 'Stop a run that waits or computes',
  permission: 'run.cancel', params: runParamsSchema, response: runDetailSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async (context) => {
    const { em, deps, actor, loaded } = context;
    await cancelRun(em, deps.jobs, { ...actingOf(context), run: loaded });
    const fork = em.fork();
    return showRun(fork, { run: await findRun(fork, loaded.id), actor, now: deps.clock() });
  },
});

const requeue = defineRoute({
  method: 'post', path: '/runs/:id/requeue', tag: 'runs', summary: 'Queue a failed or cancelled run again; it goes on with the draws it has',
  permission: 'run.cancel', params: runParamsSchema, response: runDetailSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async (context) => {
    const { em, deps, actor, loaded } = context;
    await requeueRun(em, deps.jobs, { ...actingOf(context), run: loaded });
    const fork = em.fork();
    return showRun(fork, { run: await findRun(fork, loaded.id), actor, now: deps.clock() });
  },
});

export const queueRoutes: readonly Route[] = [queue, events, cancel, requeue];
