import '../styles/pages/sign-in.css';
import { useQuery } from '@tanstack/react-query';
import { Navigate, useSearchParams } from 'react-router-dom';
import { signInFailures, type SignInFailure } from '../../shared/contracts/session';
import { Page } from '../components/layout/page';
import { Box } from '../components/ui/box';
import { ErrorPanel, Loading } from '../components/ui/notices';
import { sessionQueryOptions } from '../features/session/api/session';
import { SignInPanel } from '../features/session/components/sign-in-panel';
import { paths } from '../lib/paths';

const roles = [
  ['Everybody', 'reads published tables, downloads data, recomputes runs, cites'],
  ['Member', 'comments, creates a group'],
  ['Developer', 'registers configurations, enters benches'],
  ['Curator', 'uploads phantoms, seals a ground truth, opens a bench'],
  ['Reviewer', 'recomputes runs and gives verdicts, never on own work'],
] as const;

const failures: Record<SignInFailure, readonly [title: string, words: string]> = {
  denied: ['The last attempt came back without permission', 'Nothing was stored. Try again, or read on without an account.'],
  expired: ['The last attempt took too long', 'Its one-time mark has expired. Start again from here.'],
  unavailable: ['The sign-in service did not answer', 'Nothing was stored. Try again in a minute.'],
};

/** Only a path of this site is a place to return to. */
const localPath = (text: string | null): string => (text && /^\/(?!\/|\\)/.test(text) ? text : paths.home());

export default function SignIn() {
  const [params] = useSearchParams();
  const session = useQuery(sessionQueryOptions());
  const returnTo = localPath(params.get('return'));
  const failed = signInFailures.find((failure) => failure === params.get('failed'));
  if (session.data?.account) return <Navigate to={returnTo} replace />;
  return (
    <Page title="Sign in" className="page-sign-in">
      <div className="lay">
        <div>
          <p className="hd only-d">Sign in to put your handle to something.</p>
          <p className="lead only-d">Reading needs no account. Neither does recomputing a run in your own browser.</p>
          <dl className="wo">
            {roles.map(([who, what]) => <div key={who}><dt>{who}</dt><dd>{what}</dd></div>)}
          </dl>
          <p className="sm">Stored: your handle, the address you confirm, and what you do here. No name, no photograph, no access to any repository.</p>
        </div>
        <div>
          {session.isPending ? <Loading label="Asking how to sign in here" /> : null}
          {session.isError ? <ErrorPanel error={session.error} what="Sign-in" onRetry={() => void session.refetch()} /> : null}
          {session.data ? (
            <SignInPanel signIn={session.data.signIn} returnTo={returnTo}>
              {failed ? <Box tone="failure" title={failures[failed][0]} alert><p>{failures[failed][1]}</p></Box> : null}
            </SignInPanel>
          ) : null}
        </div>
      </div>
    </Page>
  );
}
