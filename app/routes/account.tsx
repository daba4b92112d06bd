import '../styles/pages/account.css';
import { useQuery } from '@tanstack/react-query';
import { useEffect, useState, type ReactNode } from 'react';
import { Navigate, useLocation, useNavigate } from 'react-router-dom';
import type { AccountWire } from '../../shared/contracts/account';
import { notificationKinds, notificationNames } from '../../shared/domain/notifications';
import { Page } from '../components/layout/page';
import { Button } from '../components/ui/button';
import { Confirm } from '../components/ui/dialog';
import { Field } from '../components/ui/field';
import { PageHead } from '../components/ui/layout';
import { ErrorPanel, Loading } from '../components/ui/notices';
import { useToast } from '../components/ui/toast';
import { getAccountQueryOptions, useCloseAccount, useConfirmEmail, useEditAccount, useSignOut } from '../features/account/api/account';
import { Profile } from '../features/account/components/profile';
import { Tokens } from '../features/account/components/tokens';
import { useSession } from '../features/session/api/session';
import { formatDate } from '../lib/format';
import { paths } from '../lib/paths';

export default function Account() {
  const session = useSession();
  const account = useQuery({ ...getAccountQueryOptions(), enabled: session.account !== null });
  const signOut = useSignOut();
  const navigate = useNavigate();
  if (!session.isPending && !session.account) return <Navigate to={paths.signIn(paths.account())} replace />;
  return (
    <Page title="Account" className="page-account">
      <PageHead crumbs={account.data ? <><span>Signed in through GitHub or its local stand-in</span><span>since {formatDate(account.data.since)}</span></> : undefined} title="Account">
        <Button disabled={signOut.isPending} onClick={() => signOut.mutate(undefined, { onSuccess: () => navigate(paths.home()) })}>Sign out</Button>
      </PageHead>
      {account.isError ? <ErrorPanel error={account.error} what="Your account" onRetry={() => void account.refetch()} /> : null}
      {account.isPending ? <Loading label="Reading your account" /> : null}
      {account.data ? <AccountParts account={account.data} /> : null}
    </Page>
  );
}

function Part({ title, note, children }: { title: string; note: string; children: ReactNode }) {
  return <section className="ac"><div><h2>{title}</h2><p>{note}</p></div><div className="ac-in">{children}</div></section>;
}

function AccountParts({ account }: { account: AccountWire }) {
  return (
    <>
      <EmailConfirmation />
      <Part title="Profile" note="Your handle stands beside verdicts and submissions."><Profile account={account} key={account.email ?? ''} /></Part>
      <Part title="Tokens" note="For scripts. Stored hashed, so each is shown once."><Tokens /></Part>
      <Part title="Notifications" note="By e-mail, to your confirmed address."><Notifications account={account} /></Part>
      <Part title="Leave" note="Nothing that was ranked is deleted."><CloseAccount handle={account.handle} /></Part>
    </>
  );
}

/** The link in the confirmation mail ends here; its token stays in the fragment, which no log sees. */
function EmailConfirmation() {
  const location = useLocation();
  const navigate = useNavigate();
  const toast = useToast();
  const token = new URLSearchParams(location.hash.slice(1)).get('confirm');
  const confirm = useConfirmEmail();
  const { mutate } = confirm;
  useEffect(() => {
    if (token) mutate(token, { onSuccess: () => { toast('Address confirmed.'); void navigate(paths.account(), { replace: true }); } });
  }, [token, mutate, navigate, toast]);
  return confirm.isError ? <ErrorPanel error={confirm.error} what="The confirmation" /> : null;
}

function Notifications({ account }: { account: AccountWire }) {
  const edit = useEditAccount();
  return (
    <div className="sheet">
      <table className="nt">
        <caption className="vh">What is written to you about</caption>
        <thead><tr><th scope="col">When</th><th scope="col" className="c">By e-mail</th></tr></thead>
        <tbody>
          {notificationKinds.map((kind) => (
            <tr key={kind}>
              <td>{notificationNames[kind].name}{notificationNames[kind].line ? <em>{notificationNames[kind].line}</em> : null}</td>
              <td className="c"><input type="checkbox" aria-label={`${notificationNames[kind].name}: by e-mail`} checked={account.notifications[kind]} disabled={edit.isPending} onChange={(event) => edit.mutate({ notifications: { [kind]: event.target.checked } })} /></td>
            </tr>
          ))}
        </tbody>
      </table>
      {edit.isError ? <p className="st bad pad" role="alert">{edit.error.message}</p> : null}
    </div>
  );
}

function CloseAccount({ handle }: { handle: string }) {
  const close = useCloseAccount();
  const navigate = useNavigate();
  const [open, setOpen] = useState(false);
  const [typed, setTyped] = useState('');
  return (
    <div className="leave">
      <Button look="danger" onClick={() => setOpen(true)}>Close account</Button>
      <span className="sm">Your e-mail, tokens and memberships go at once. Verdicts and submissions stay, under a handle that says the account is closed.</span>
      <Confirm open={open} danger title={`Close the account ${handle}?`} confirmLabel="Close account" pending={close.isPending} disabled={typed !== handle} onClose={() => setOpen(false)} onConfirm={() => close.mutate(typed, { onSuccess: () => navigate(paths.home()) })}>
        <p>This cannot be undone.</p>
        <Field label={`Write ${handle} to go on`} value={typed} onChange={(event) => setTyped(event.target.value)} autoComplete="off" error={close.isError ? close.error.message : undefined} />
      </Confirm>
    </div>
  );
}
