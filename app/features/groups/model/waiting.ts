import type { PhantomSummary } from '../../../../shared/contracts/phantoms';
import type { RunSummary } from '../../../../shared/contracts/runs';
import type { GroupRole } from '../../../../shared/domain/permissions';
import { paths } from '../../../lib/paths';

export interface WaitingItem {
  key: string;
  title: string;
  line: string;
  since: string;
  to: string;
  action: string;
}
export interface Waiting {
  you: WaitingItem[];
  developer: WaitingItem[];
  reviewers: WaitingItem[];
}

/** What waits for whom in a group, from the states of its phantoms and runs. Items of your own roles come to you. */
export function waitingInGroup(phantoms: readonly PhantomSummary[], runs: readonly RunSummary[], yourRoles: readonly GroupRole[]): Waiting {
  const curates = yourRoles.some((role) => role === 'curator' || role === 'owner');
  const develops = yourRoles.some((role) => role === 'developer' || role === 'owner');
  const waiting: Waiting = { you: [], developer: [], reviewers: [] };
  for (const phantom of phantoms) {
    const { current } = phantom;
    const to = paths.phantomVersion(phantom.slug, current.n);
    const item = { key: phantom.id, title: `${phantom.name}, version ${current.n}`, since: current.createdAt, to };
    if (current.state === 'changes-requested' && curates) waiting.you.push({ ...item, line: 'Changes requested by a reviewer.', action: 'Open draft' });
    if (current.state === 'draft' && curates) waiting.you.push({ ...item, line: 'A draft, not submitted yet.', action: 'Open draft' });
    if (current.state === 'submitted') waiting.reviewers.push({ ...item, line: 'Submitted with its checks.', action: 'Open phantom' });
  }
  for (const run of runs) {
    const item = { key: run.id, title: `${run.solver.name} on ${run.phantom.name}`, since: run.finishedAt ?? run.createdAt, to: paths.run(run.id), action: 'Open run' };
    if (run.review === 'returned' || run.state === 'failed')
      (develops ? waiting.you : waiting.developer).push({ ...item, line: run.state === 'failed' ? `Stopped: ${run.progress.failure ?? 'no reason was kept'}` : 'Returned: to be rerun or explained.' });
    if (run.state === 'finished' && (run.review === 'unreviewed' || run.review === 'in-review'))
      waiting.reviewers.push({ ...item, line: run.review === 'in-review' ? 'A reviewer has taken it.' : 'Finished, no reviewer yet.' });
  }
  return waiting;
}
