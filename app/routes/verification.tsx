import '../styles/pages/verification.css';
import { useQuery } from '@tanstack/react-query';
import { Link, useSearchParams } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { Button, ButtonAnchor } from '../components/ui/button';
import { PageHead } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { Segmented } from '../components/ui/segmented';
import { useBrowserVerification } from '../features/verification/api/use-browser-verification';
import { verificationCsvUrl, verificationQueryOptions } from '../features/verification/api/verification';
import { VerificationSummary } from '../features/verification/components/verification-summary';
import { VerificationTable } from '../features/verification/components/verification-table';
import { readShow, shown, type Show } from '../features/verification/model/verdicts';
import { paths } from '../lib/paths';

export default function VerificationPage() {
  const verification = useQuery(verificationQueryOptions());
  const browser = useBrowserVerification();
  const [search, setSearch] = useSearchParams();
  const show = readShow(search.get('show'));
  const { data } = verification;
  const items = data?.items ?? [];
  const visible = shown(items, show);
  const setShow = (next: Show): void => setSearch((old) => {
    const changed = new URLSearchParams(old);
    if (next === 'all') changed.delete('show');
    else changed.set('show', next);
    return changed;
  }, { replace: true });
  const undone = items.filter((item) => browser.results.get(item.key)?.state !== 'done').map((item) => item.key);
  const choices = [
    { value: 'all', label: `All ${items.length}` },
    { value: 'not-run', label: `Not run ${shown(items, 'not-run').length}` },
    { value: 'failed', label: `Failed ${shown(items, 'failed').length}` },
  ] as const;
  return (
    <Page title="Verification of this instance" className="page-verification">
      <PageHead
        crumbs={<><Link to={paths.reference()}>Reference</Link><span>Verification</span></>}
        title="Does this instance compute what it says?"
        lead="Each line takes a value published elsewhere and computes it again here, with the code that scores the runs. The server does it after each start; your browser can do it now."
      >
        <ButtonAnchor href={verificationCsvUrl()} download>Download as CSV</ButtonAnchor>
        {browser.open ? (
          <Button look="primary" onClick={browser.stop}>Stop, {browser.open} to go</Button>
        ) : (
          <Button look="primary" disabled={items.length === 0} onClick={() => browser.run(undone.length ? undone : items.map((item) => item.key))}>Run all in this browser</Button>
        )}
      </PageHead>
      {verification.isPending ? <Loading label="Reading the published values and what the server made of them" /> : null}
      {verification.isError ? <ErrorPanel error={verification.error} what="The verification" onRetry={() => void verification.refetch()} /> : null}
      {data ? (
        <>
          <VerificationSummary data={data} results={browser.results} />
          <section className="sec vf-section">
            <header>
              <h2>Checks</h2>
              <Segmented label="Show" value={show} choices={choices} onChange={setShow} />
            </header>
            {visible.length ? (
              <VerificationTable items={visible} running={data.running} results={browser.results} onRun={(key) => browser.run([key])} />
            ) : (
              <Empty title={show === 'failed' ? 'No check has failed' : 'Every check has run'}>Choose All for the whole table.</Empty>
            )}
            <p className="sm vf-note">{visible.length} of {items.length} checks shown. Filled mark: gap; bar end: bound. A check opens to say why its bound is what it is. A value typed from memory says so in its source.</p>
          </section>
        </>
      ) : null}
    </Page>
  );
}
