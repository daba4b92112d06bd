import type { Progress, RunDetail } from '../../../../shared/contracts/runs';
import { Box } from '../../../components/ui/box';
import { Button } from '../../../components/ui/button';
import { LoadingLadder } from '../../../components/ui/ladder';
import { StateMark } from '../../../components/ui/state-mark';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { formatError, formatSeconds } from '../../../lib/format';
import { useCancelRun, useRequeueRun } from '../api/run-actions';

/** A run that has no result yet, or will have none: ladder, trials done, time left, errors so far, and what can be done. */
export function RunProgress({ run, progress }: { run: RunDetail; progress: Progress }) {
  const cancel = useCancelRun(run.id);
  const requeue = useRequeueRun(run.id);
  const axis = useAxis();
  const stopped = progress.state === 'failed' || progress.state === 'cancelled';
  const perLevel = run.draws;
  const partial = progress.total ? (progress.done - progress.levelsDone * perLevel) / perLevel : 0;
  return (
    <section className="sheet pad" aria-label="Progress" aria-live="polite">
      <div className="sh">
        <h2>{progress.state === 'queued' ? 'Waiting for a worker' : stopped ? 'Stopped' : 'At work'}</h2>
        <StateMark state={progress.state} />
      </div>
      <LoadingLadder levels={run.ladder} done={progress.levelsDone} partial={partial} stopped={stopped} waiting={progress.state === 'queued'} />
      <p style={{ marginTop: 10 }}>
        <b className="tn">{progress.done} of {progress.total}</b> trials done
        {progress.currentLevel !== null && !stopped ? `, at ${axis.format(run.ladder[progress.currentLevel] ?? 0)}` : ''}
        {progress.secondsLeft !== null && !stopped ? `, about ${formatSeconds(progress.secondsLeft)} left` : ''}.
      </p>
      {progress.medians.some((m) => m !== null) ? (
        <p className="sm">Medians so far: {progress.medians.map((m, i) => (m === null ? null : `${axis.format(run.ladder[i] ?? 0)} ${formatError(m)}`)).filter(Boolean).join(', ')}</p>
      ) : null}
      {progress.failure ? <Box tone="failure" title="Why it stopped" alert className="mt-x3"><p>{progress.failure}</p></Box> : null}
      <div className="run-tools">
        {run.may.cancel && !stopped ? <Button look="danger" disabled={cancel.isPending} onClick={() => cancel.mutate()}>Cancel this run</Button> : null}
        {run.may.requeue && stopped ? <Button disabled={requeue.isPending} onClick={() => requeue.mutate()}>Queue it again</Button> : null}
        {cancel.isError || requeue.isError ? <span className="st bad">{(cancel.error ?? requeue.error)?.message}</span> : null}
      </div>
    </section>
  );
}
