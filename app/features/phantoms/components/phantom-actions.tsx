import { useState } from 'react';
import { Box } from '../../../components/ui/box';
import { Button, ButtonLink } from '../../../components/ui/button';
import { CheckRow } from '../../../components/ui/checks';
import { Confirm } from '../../../components/ui/dialog';
import { Option, Textarea } from '../../../components/ui/field';
import { ErrorPanel } from '../../../components/ui/notices';
import { useToast } from '../../../components/ui/toast';
import { isApiError } from '../../../lib/api-client';
import { formatDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import { usePhantomVerdict, useSubmitPhantom, useWithdrawPhantom } from '../api/change-phantom';
import { checkLine, checkReading } from '../model/check-rows';

const least = 10;

/** What the version's state means for the reader, and what they may do about it. */
export function PhantomNotices({ detail }: { detail: PhantomDetail }) {
  const { version, may, slug } = detail;
  const submit = useSubmitPhantom(slug, version.n);
  const toast = useToast();
  const edit = `${paths.phantomNew()}?draft=${slug}&v=${version.n}`;
  const last = version.verdicts[0];
  return (
    <>
      {version.state === 'withdrawn' ? (
        <Box tone="plain" state="withdrawn" title="This version is withdrawn" className="notice"><p>{version.withdrawnReason ?? 'No reason is kept.'} What was ranked on it stays ranked.</p></Box>
      ) : null}
      {version.n !== detail.current.n ? (
        <Box tone="plain" title={`This is version ${version.n}`} className="notice"><p>Version {detail.current.n} is the current one. <ButtonLink to={paths.phantom(slug)} style={{ marginLeft: 8 }}>Open version {detail.current.n}</ButtonLink></p></Box>
      ) : null}
      {version.state === 'changes-requested' && last ? (
        <Box tone="caution" title="The reviewer asks for changes" className="notice"><p className="quote">{last.reason}</p><p className="sm">{last.by.handle}, {formatDate(last.at)}</p></Box>
      ) : null}
      {may.edit || may.submit ? (
        <Box tone="plain" state="draft" title={version.state === 'draft' ? 'This is a draft; only the group sees it' : 'Open for changes'} className="notice">
          <div className="acts">
            {may.edit ? <ButtonLink to={edit}>Edit the draft</ButtonLink> : null}
            {may.submit ? <Button look="primary" disabled={submit.isPending} onClick={() => void submit.mutateAsync().then(() => toast(`Version ${version.n} submitted for review.`), () => undefined)}>{submit.isPending ? 'Checks run' : 'Submit for review'}</Button> : null}
          </div>
          {submit.isError ? <div style={{ marginTop: 10 }}><ErrorPanel error={submit.error} what="Not submitted" /></div> : null}
        </Box>
      ) : null}
    </>
  );
}

/** Publish or ask for changes, with a written reason. */
export function PhantomReview({ detail }: { detail: PhantomDetail }) {
  const { version, slug } = detail;
  const [choice, setChoice] = useState<'publish' | 'request-changes' | null>(null);
  const [reason, setReason] = useState('');
  const verdict = usePhantomVerdict(slug, version.n);
  const toast = useToast();
  if (!detail.may.review) return null;
  const failing = version.checks.some((c) => c.state === 'fail');
  const blocked = !choice ? 'Choose what to say.' : choice === 'publish' && failing ? 'A check fails: publishing needs all to pass.' : reason.trim().length < least ? `Write at least ${least} characters.` : null;
  const send = () => {
    // The form is gone once the version is read again, and callbacks of `mutate` go with it; the promise stays.
    if (choice) verdict.mutateAsync({ verdict: choice, reason: reason.trim() }).then(() => toast(choice === 'publish' ? 'Published.' : 'Changes requested.'), () => undefined);
  };
  const refused = isApiError(verdict.error) ? verdict.error.issueAt('reason') : undefined;
  return (
    <section className="sec" id="review">
      <header><h2>Review</h2><p>version {version.n}, submitted by {version.createdBy.handle}</p></header>
      <div className="sheet">
        <fieldset className="bare">
          <legend className="vh">Verdict on this version</legend>
          <Option name="phantom-verdict" title="Publish" checked={choice === 'publish'} onChange={() => setChoice('publish')}>It appears for everybody and benches may use it. Its content never changes.</Option>
          <Option name="phantom-verdict" title="Request changes" checked={choice === 'request-changes'} onChange={() => setChoice('request-changes')}>It goes back to the group as a draft, with your words.</Option>
        </fieldset>
        <div className="pad" style={{ borderTop: '1px solid var(--hair)' }}>
          <Textarea label="Reason, kept with the version" rows={3} maxLength={5000} value={reason} error={refused} onChange={(e) => setReason(e.target.value)} />
          {verdict.isError && !refused ? <div style={{ marginTop: 10 }}><ErrorPanel error={verdict.error} what="Not recorded" /></div> : null}
          <div className="acts" style={{ marginTop: 12 }}><Button look="primary" disabled={blocked !== null || verdict.isPending} onClick={send}>{choice === 'request-changes' ? 'Request changes' : 'Publish'}</Button>{blocked ? <span className="sm">{blocked}</span> : null}</div>
        </div>
      </div>
    </section>
  );
}

export function PhantomChecks({ detail }: { detail: PhantomDetail }) {
  const { checks } = detail.version;
  if (checks.length === 0) return null;
  return (
    <>
      <div className="sh gap-top"><h2>Checks</h2><p>run when it was submitted</p></div>
      <div className="sheet">{checks.map((c) => <CheckRow key={c.key} name={c.name} how={checkLine(c)} reading={checkReading(c)} state={c.state} />)}</div>
    </>
  );
}

export function WithdrawPhantom({ detail }: { detail: PhantomDetail }) {
  const [open, setOpen] = useState(false);
  const [reason, setReason] = useState('');
  const withdraw = useWithdrawPhantom(detail.slug, detail.version.n);
  const toast = useToast();
  if (!detail.may.withdraw || detail.version.state === 'withdrawn') return null;
  const { n, runs } = detail.version;
  return (
    <>
      <Button look="danger" onClick={() => setOpen(true)}>Withdraw</Button>
      <Confirm
        open={open} danger title={`Withdraw ${detail.name}, version ${n}?`} confirmLabel={`Withdraw version ${n}`} pending={withdraw.isPending} disabled={reason.trim().length < least}
        onClose={() => setOpen(false)} onConfirm={() => withdraw.mutate({ reason: reason.trim() }, { onSuccess: () => { setOpen(false); toast(`Version ${n} withdrawn.`); } })}
      >
        <p>{runs ? `${runs} runs keep their pages and say so.` : 'No run has used it.'} No new run can use it. This cannot be undone; a new version can follow.</p>
        <div style={{ marginTop: 12 }}><Textarea label="Reason, shown on the page" rows={2} value={reason} help={`At least ${least} characters.`} onChange={(e) => setReason(e.target.value)} /></div>
        {withdraw.isError ? <ErrorPanel error={withdraw.error} what="Not withdrawn" /> : null}
      </Confirm>
    </>
  );
}
