import type { ReactNode } from 'react';
import type { Session } from '../../../../shared/contracts/session';
import { ButtonAnchor } from '../../../components/ui/button';
import { StateShape } from '../../../components/ui/state-mark';

const address = (url: string, values: Record<string, string>): string => `${url}${url.includes('?') ? '&' : '?'}${new URLSearchParams(values).toString()}`;

/** The way in: GitHub's page, or on a machine without a client id the stand-in's demo roles, which never look like it. */
export function SignInPanel({ signIn, returnTo, children }: { signIn: Session['signIn']; returnTo: string; children?: ReactNode }) {
  return (
    <>
      <div className="sheet way-in">
        <h1>Sign in</h1>
        <p className="sm">{signIn.standIn ? 'No GitHub client is set up on this machine.' : 'You confirm on GitHub\'s own page and come back here with a handle.'}</p>
        {signIn.standIn ? null : <ButtonAnchor look="primary" big className="gh" href={address(signIn.url, { returnTo })}>Continue with GitHub</ButtonAnchor>}
        {children}
      </div>
      {signIn.standIn ? (
        <section className="loc" aria-labelledby="stand-in">
          <header><StateShape state="caution" size={16} /><h2 id="stand-in">Local stand-in, this machine only</h2></header>
          <p className="sm">Take a demo role; it goes through the same steps as the real sign-in. In production this box does not exist and its address refuses.</p>
          {signIn.standIn.accounts.map((account) => (
            <div className="rl" key={account.handle}>
              <b>{account.handle}</b>
              <em>{account.line}</em>
              <ButtonAnchor href={address(signIn.url, { returnTo, login: account.handle })} aria-label={`Take role: sign in as ${account.handle}`}>Take role</ButtonAnchor>
            </div>
          ))}
        </section>
      ) : null}
    </>
  );
}
