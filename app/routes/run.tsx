import '../styles/pages/run.css';
import { Link, useParams, useSearchParams } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useNoise } from '../components/noise-rule/use-noise';
import { PageHead } from '../components/ui/layout';
import { ErrorPanel, Loading } from '../components/ui/notices';
import { StateMark } from '../components/ui/state-mark';
import { ButtonAnchor } from '../components/ui/button';
import { useRun } from '../features/runs/api/get-run';
import { useRunProgress } from '../features/runs/api/use-run-progress';
import { RunProgress } from '../features/runs/components/run-progress';
import { RunResult } from '../features/runs/components/run-result';
import { isApiError, apiUrl } from '../lib/api-client';
import { axisFact } from '../lib/axis-words';
import { formatDate } from '../lib/format';
import { keepNoise, paths } from '../lib/paths';
import NotFound from './not-found';
import type { RunDetail } from '../../shared/contracts/runs';
import { useSession } from '../features/session/api/session';

export default function Run() {
  const { id = '' } = useParams();
  const run = useRun(id);
  if (run.isError && isApiError(run.error) && run.error.status === 404) return <NotFound what="run" />;
  if (run.isError)
    return <Page title={`Run ${id}`}><PageHead title={`Run ${id}`} /><ErrorPanel error={run.error} what="This run" onRetry={() => void run.refetch()} /></Page>;
  if (!run.data) return <Page title={`Run ${id}`}><PageHead title={`Run ${id}`} /><Loading label="Reading the run" disc /></Page>;
  return <RunPage run={run.data} key={run.data.id} />;
}

function RunPage({ run }: { run: RunDetail }) {
  const progress = useRunProgress(run.id, run.progress);
  const session = useSession();
  const { noise } = useNoise();
  const [params] = useSearchParams();
  const breakdown = run.sheets['relative-l2-error']?.breakdown?.value ?? null;
  const finished = run.state === 'finished';
  return (
    <Page
      title={`${run.id} ${run.solver.name} on ${run.phantom.name}`}
      className="page-run" axis={run.axis}
      rule={{ levels: run.ladder, draws: run.draws, floor: run.modelErrorFloor, focus: !finished ? null : { glyph: run.glyph, breakdown } }}
    >
      <PageHead
        crumbs={
          <>
            <span>Run <span className="mono">{run.id}</span></span>
            <span>Bench <Link to={keepNoise(paths.bench(run.bench.slug), params)}>{run.bench.title}</Link></span>
            {axisFact(run.axis) ? <span>{axisFact(run.axis)}</span> : null}
            <span>Submitted {formatDate(run.createdAt)} by {run.submittedBy.handle}, <Link to={paths.group(run.group.slug)}>{run.group.name}</Link></span>
          </>
        }
        title={<><Link className="plain" to={run.axis.key === 'noise' ? keepNoise(paths.solver(run.solver.slug), params) : paths.solver(run.solver.slug)}>{run.solver.name}</Link> on <Link className="plain" to={run.axis.key === 'noise' ? keepNoise(paths.phantomVersion(run.phantom.slug, run.phantom.version), params) : paths.phantomVersion(run.phantom.slug, run.phantom.version)}><i style={{ fontWeight: 400 }}>{run.phantom.name}</i></Link></>}
      >
        <StateMark state={finished ? run.review : progress.state} word={finished && run.review === 'in-review' && run.reviewer ? `In review by ${run.reviewer.handle}` : undefined} />
        {finished ? (
          <>
            <ButtonAnchor href={apiUrl(`/runs/${encodeURIComponent(run.id)}/table.csv`)} download>Table as CSV</ButtonAnchor>
            <ButtonAnchor href={apiUrl(`/runs/${encodeURIComponent(run.id)}/trials.csv`)} download>All trials</ButtonAnchor>
            <button type="button" className="btn" onClick={() => window.print()}>Print certificate</button>
          </>
        ) : null}
      </PageHead>
      {run.reservation ? <p className="reservation"><StateMark state="signed-off-with-reservation" word="Reservation" /> {run.reservation}</p> : null}
      {finished ? <RunResult run={run} noise={noise} me={session.account?.handle ?? ''} /> : <RunProgress run={run} progress={progress} />}
      <p className="sm caution-line">Results are about methods, not about patients or plant: not for diagnosis, not a safety case.{run.problem.family === 'electrical-impedance' ? ' Current injection into people or animals is bound by the applicable electrical-safety standard (IEC 60601-1 and local rules) and the judgement of licensed practitioners.' : ''}</p>
    </Page>
  );
}
