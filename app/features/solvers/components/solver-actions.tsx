import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button, ButtonLink } from '../../../components/ui/button';
import { Confirm } from '../../../components/ui/dialog';
import { Select, Textarea } from '../../../components/ui/field';
import { ErrorPanel } from '../../../components/ui/notices';
import { useToast } from '../../../components/ui/toast';
import { paths } from '../../../lib/paths';
import type { SolverDetail } from '../../../../shared/contracts/solvers';
import { useOpenBenches } from '../api/bench-data';
import { useEnterBench, useRegisterSolver, useWithdrawSolver } from '../api/change-solver';

type Version = SolverDetail['versions'][number];
const least = 10;

/** The head's buttons: what the reader may do with this version. */
export function SolverActions({ solver, version, runs, onTry }: { solver: SolverDetail; version: Version; runs: readonly string[]; onTry: () => void }) {
  const { may } = solver;
  const toast = useToast();
  const register = useRegisterSolver(solver.slug, version.n);
  const cite = () => {
    const text = `${solver.group.name} (${new Date(version.registeredAt ?? version.createdAt).getFullYear()}). ${solver.name}, version ${version.n}. Hadamark solver configuration ${solver.id}. SHA-256 ${version.contentHash}.`;
    navigator.clipboard.writeText(text).then(() => toast('Citation copied.'), () => toast(text));
  };
  return (
    <>
      <Button onClick={cite}>Cite</Button>
      {runs.length ? <ButtonLink to={paths.compare(runs.slice(0, 1))}>Compare</ButtonLink> : null}
      <Button onClick={onTry}>Try it here</Button>
      {may.newVersion ? <ButtonLink to={`${paths.solverNew()}?from=${solver.slug}`}>New version</ButtonLink> : null}
      {may.withdraw && version.state !== 'withdrawn' ? <Withdraw solver={solver} version={version} /> : null}
      {version.state === 'draft' && may.edit ? <Button look="primary" disabled={register.isPending} onClick={() => register.mutate(undefined, { onSuccess: () => toast(`Version ${version.n} registered.`), onError: (error) => toast(error.message) })}>Register</Button> : null}
      {may.enter && version.state === 'registered' ? <EnterBench solver={solver} version={version} /> : null}
    </>
  );
}

function EnterBench({ solver, version }: { solver: SolverDetail; version: Version }) {
  const [open, setOpen] = useState(false);
  const [bench, setBench] = useState('');
  const benches = useOpenBenches();
  const enter = useEnterBench(solver.slug, version.n);
  const navigate = useNavigate();
  const toast = useToast();
  const entered = new Set(solver.entries.filter((e) => e.version === version.n).map((e) => e.bench.slug));
  const offered = (benches.data?.items ?? []).filter((b) => !entered.has(b.slug));
  return (
    <>
      <Button look="primary" onClick={() => setOpen(true)}>Enter in a bench</Button>
      <Confirm
        open={open} title={`Enter ${solver.name}, version ${version.n}, in a bench`} confirmLabel="Enter in the bench" keepLabel="Not now" pending={enter.isPending} disabled={!bench} onClose={() => setOpen(false)}
        onConfirm={() => enter.mutate(bench, { onSuccess: () => { setOpen(false); toast('Entered; its runs are queued.'); void navigate(paths.bench(bench)); } })}
      >
        <p>It runs unchanged on every phantom of the bench. An entry cannot be taken back.</p>
        <div style={{ marginTop: 12 }}>
          <Select label="Bench" value={bench} help={benches.isSuccess && offered.length === 0 ? 'It is entered in every open bench already.' : undefined} onChange={(e) => setBench(e.target.value)}>
            <option value="">Choose one</option>
            {offered.map((b) => <option key={b.slug} value={b.slug}>{b.id} {b.title}</option>)}
          </Select>
        </div>
        {enter.isError ? <ErrorPanel error={enter.error} what="Not entered" /> : null}
      </Confirm>
    </>
  );
}

function Withdraw({ solver, version }: { solver: SolverDetail; version: Version }) {
  const [open, setOpen] = useState(false);
  const [reason, setReason] = useState('');
  const withdraw = useWithdrawSolver(solver.slug, version.n);
  const toast = useToast();
  return (
    <>
      <Button look="danger" onClick={() => setOpen(true)}>Withdraw</Button>
      <Confirm
        open={open} danger title={`Withdraw ${solver.name}, version ${version.n}?`} confirmLabel={`Withdraw version ${version.n}`} pending={withdraw.isPending} disabled={reason.trim().length < least} onClose={() => setOpen(false)}
        onConfirm={() => void withdraw.mutateAsync({ reason: reason.trim() }).then(() => toast(`Version ${version.n} withdrawn.`), () => undefined)}
      >
        <p>{version.runs ? `${version.runs} runs keep their pages and say so.` : 'It has no runs.'} It cannot be entered again. This cannot be undone; a new version can follow.</p>
        <div style={{ marginTop: 12 }}><Textarea label="Reason, shown on the page" rows={2} value={reason} help={`At least ${least} characters.`} onChange={(e) => setReason(e.target.value)} /></div>
        {withdraw.isError ? <ErrorPanel error={withdraw.error} what="Not withdrawn" /> : null}
      </Confirm>
    </>
  );
}
