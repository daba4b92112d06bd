import type { RunDetail } from '../../../../shared/contracts/runs';
import { Button } from '../../../components/ui/button';
import { Seal } from '../../../components/ui/seal';
import { StateMark } from '../../../components/ui/state-mark';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { formatHash } from '../../../lib/format';
import { useRecomputation, useRequestRecomputation } from '../api/run-actions';
import { useBrowserRecomputation } from '../api/use-browser-recomputation';

/** Replays the run: in the reader's own browser with the same code, and on the server for reviewers. Hashes decide. */
export function RecomputePanel({ run }: { run: RunDetail }) {
  const here = useBrowserRecomputation(run.id);
  const newest = useRecomputation(run.id);
  const request = useRequestRecomputation(run.id);
  const server = newest.data;
  const busy = server?.state === 'queued' || server?.state === 'running';
  return (
    <div className="sheet recompute" style={{ marginTop: 14 }}>
      <div className="pad">
        <h3>Recompute</h3>
        <p className="sm">The same code, seed and data give the same bits on every machine. No account is needed here.</p>
        <div className="run-tools">
          <Button onClick={here.start} disabled={here.state === 'running'}>Recompute here</Button>
          {here.state === 'running' ? <Button onClick={here.stop}>Stop</Button> : null}
          {run.may.recompute ? <Button onClick={() => request.mutate()} disabled={busy || request.isPending}>Recompute on the server</Button> : null}
          <span className="sm" role="status">
            {here.state === 'running' ? `${here.done} of ${here.total} draws here` : ''}
            {busy ? ` ${server.done} of ${server.total} draws on the server` : ''}
          </span>
        </div>
        {here.error ? <p className="st bad" role="alert">{here.error}</p> : null}
        {request.isError ? <p className="st bad" role="alert">{request.error.message}</p> : null}
        {server?.failure ? <p className="st bad" role="alert">{server.failure}</p> : null}
      </div>
      {here.state === 'finished' && here.hash && run.resultHash ? <Outcome where="in this browser" stored={run.resultHash} computed={here.hash} equal={here.equal} ladder={run.ladder} first={here.firstDifference} /> : null}
      {server?.state === 'finished' && server.resultHash && run.resultHash ? <Outcome where={`on the server for ${server.requestedBy.handle}`} stored={run.resultHash} computed={server.resultHash} equal={server.equal === true} ladder={run.ladder} first={server.firstDifference} /> : null}
    </div>
  );
}

function Outcome({ where, stored, computed, equal, ladder, first }: { where: string; stored: string; computed: string; equal: boolean; ladder: readonly number[]; first: { level: number; draw: number } | null }) {
  const axis = useAxis();
  return (
    <div className="two-seals" role="status">
      <Seal hash={stored} size={64} />
      <span className="eq" aria-hidden="true">{equal ? '=' : '≠'}</span>
      <Seal hash={computed} size={64} />
      <div>
        <StateMark state={equal ? 'pass' : 'fail'} word={equal ? `Same bits ${where}` : `Differs ${where}`} />
        <p className="mono" style={{ fontSize: 12 }}>{formatHash(stored, 4)}<br />{formatHash(computed, 4)}</p>
        {first ? <p className="sm">First difference at {axis.format(ladder[first.level] ?? 0)}, draw {first.draw + 1}.</p> : null}
      </div>
    </div>
  );
}
