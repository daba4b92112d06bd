import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { AccountWire } from '../../../../shared/contracts/account';
import { Button } from '../../../components/ui/button';
import { Field } from '../../../components/ui/field';
import { Tag } from '../../../components/ui/layout';
import { StateMark } from '../../../components/ui/state-mark';
import { useToast } from '../../../components/ui/toast';
import { isApiError } from '../../../lib/api-client';
import { formatDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { useEditAccount } from '../api/account';

export function Profile({ account }: { account: AccountWire }) {
  const edit = useEditAccount();
  const toast = useToast();
  const [about, setAbout] = useState(account.about);
  const [email, setEmail] = useState(account.email ?? '');
  const changed = about !== account.about || email !== (account.email ?? '');
  const issue = (path: string) => (isApiError(edit.error) ? edit.error.issueAt(path) : undefined);
  const save = () =>
    edit.mutate({ ...(about !== account.about ? { about } : {}), ...(email && email !== account.email ? { email } : {}) }, { onSuccess: (next) => { toast(next.pendingEmail ? 'Profile saved. Follow the link sent to the new address.' : 'Profile saved.'); setEmail(next.email ?? ''); } });
  return (
    <form className="g2" onSubmit={(event) => { event.preventDefault(); save(); }}>
      <Field label="Handle" value={account.handle} readOnly help="Comes from GitHub. Old verdicts keep the handle of their day." className="readonly" />
      <Field
        label="E-mail" type="email" value={email} onChange={(event) => { setEmail(event.target.value); edit.reset(); }} error={issue('email')}
        help={account.pendingEmail ? `${account.pendingEmail} waits for its confirmation link.` : account.email ? 'Confirmed. Never shown.' : 'None yet: nothing is sent to you. Never shown.'}
      />
      <Field label="One line about you" value={about} maxLength={120} onChange={(event) => { setAbout(event.target.value); edit.reset(); }} error={issue('about')} />
      <div className="fld">
        <span className="lab">Site role</span>
        <div className="roles">{account.siteRoles.map((role) => <StateMark key={role} state="signed-off" word={role.charAt(0).toUpperCase() + role.slice(1)} />)}</div>
        <span className="help">{account.siteRolesSince ? `Given by an administrator, ${formatDate(account.siteRolesSince)}.` : 'Reviewers and administrators are named by an administrator.'}</span>
      </div>
      <div className="wide">
        <div className="lab">Groups</div>
        <div className="sheet">
          {account.groups.map((group) => <div className="grp" key={group.id}><Link to={paths.group(group.slug)}>{group.name}</Link><span>{group.roles.map((role) => <Tag key={role}>{role}</Tag>)}</span></div>)}
          {account.groups.length === 0 ? <div className="grp"><span className="sm">No group yet.</span><Link to={paths.groups()}>Groups</Link></div> : null}
        </div>
      </div>
      <div className="wide flex gap-x3 items-center">
        <Button type="submit" look="primary" disabled={!changed || edit.isPending}>Save profile</Button>
        <span className="sm">{edit.isError && !issue('email') && !issue('about') ? <span className="st bad" role="alert">{edit.error.message}</span> : changed ? 'Unsaved changes' : 'No unsaved changes'}</span>
      </div>
    </form>
  );
}
