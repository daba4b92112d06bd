import { Strategy as GitHubStrategy, type Profile } from 'passport-github2';
import type { ProviderProfile } from '../services/accounts/sign-in-account.ts';

export interface SignInProvider {
  readonly clientId: string;
  readonly clientSecret: string;
  /** Addresses other than GitHub's own: the local stand-in. */
  readonly endpoints?: {
    readonly authorizationURL: string;
    readonly tokenURL: string;
    readonly userProfileURL: string;
    readonly userEmailURL: string;
  };
}

/** GitHub's authorisation page takes `login` to suggest an account. */
class SignInStrategy extends GitHubStrategy {
  override authorizationParams(options: { login?: string }): object {
    return options.login === undefined ? {} : { login: options.login };
  }
}

/** The strategy of passport-github2, with a single-use state kept in the session against forged callbacks. */
export function makeStrategy(provider: SignInProvider, callbackURL: string): SignInStrategy {
  return new SignInStrategy(
    {
      clientID: provider.clientId,
      clientSecret: provider.clientSecret,
      callbackURL,
      scope: ['user:email'],
      userAgent: 'hadamark',
      allRawEmails: true,
      // Any value turns the single-use state on; its text is not used.
      state: 'session',
      sessionKey: 'oauth2:sign-in',
      ...provider.endpoints,
    },
    // The access token is dropped here: the site needs it for nothing else.
    (_accessToken: string, _refreshToken: string, profile: Profile, done: (error: Error | null, user?: ProviderProfile) => void) => {
      const read = readProfile(profile);
      if (read) done(null, read);
      else done(new Error('the provider sent a profile without an id or a handle'));
    },
  );
}

function readProfile(profile: Profile): ProviderProfile | null {
  const handle = profile.username ?? '';
  if (!profile.id || !/^[A-Za-z0-9_-]{1,60}$/.test(handle)) return null;
  const emails: readonly { value: string; primary?: boolean; verified?: boolean }[] = profile.emails ?? [];
  const confirmed = emails.find((email) => email.primary === true && email.verified === true);
  return { githubId: String(profile.id), handle, email: confirmed?.value ?? null };
}
