import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { invitationCreateSchema } from '../../../../shared/contracts/group';
import { groupRoles, type GroupRole } from '../../../../shared/domain/permissions';
import { Button } from '../../../components/ui/button';
import { Checkbox, Field } from '../../../components/ui/field';
import { Tag } from '../../../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { useToast } from '../../../components/ui/toast';
import { isApiError } from '../../../lib/api-client';
import { formatShortDate, plural } from '../../../lib/format';
import { listInvitationsQueryOptions, useInvite, useRevokeInvitation, useSendAgain } from '../api/groups';

const day = 86_400_000;

/** Open and expired invitations, and the form that sends one. */
export function Invitations({ slug }: { slug: string }) {
  const list = useQuery(listInvitationsQueryOptions(slug));
  const again = useSendAgain(slug);
  const revoke = useRevokeInvitation(slug);
  const toast = useToast();
  const [now] = useState(() => Date.now());
  if (list.isPending) return <Loading label="Reading invitations" />;
  if (list.isError) return <ErrorPanel error={list.error} what="Invitations" onRetry={() => void list.refetch()} />;
  return (
    <>
      {list.data.length === 0 ? <Empty title="No invitation is open">Invite somebody by e-mail below.</Empty> : (
        <div className="sheet">
          {list.data.map((invitation) => (
            <div className="inv" key={invitation.id}>
              <span style={{ overflowWrap: 'anywhere' }}>{invitation.email}</span>
              <span className="inv-roles">{invitation.roles.map((role) => <Tag key={role}>{role}</Tag>)}</span>
              <em>{invitation.state === 'expired' ? `expired ${formatShortDate(invitation.expiresAt)}, never opened` : `sent ${formatShortDate(invitation.sentAt)} by ${invitation.invitedBy.handle}, ${plural(Math.max(0, Math.ceil((Date.parse(invitation.expiresAt) - now) / day)), 'day')} left`}</em>
              <span className="a">
                <button type="button" className="lk" disabled={again.isPending} onClick={() => again.mutate(invitation.id, { onSuccess: () => toast(`Sent again to ${invitation.email}.`) })} aria-label={`${invitation.state === 'expired' ? 'Invite again' : 'Send again'}: ${invitation.email}`}>{invitation.state === 'expired' ? 'Invite again' : 'Send again'}</button>
                <button type="button" className="lk d" disabled={revoke.isPending} onClick={() => revoke.mutate(invitation.id)} aria-label={`Revoke the invitation to ${invitation.email}`}>Revoke</button>
              </span>
            </div>
          ))}
        </div>
      )}
      {again.isError || revoke.isError ? <p className="st bad" role="alert">{(again.error ?? revoke.error)?.message}</p> : null}
      <InviteForm slug={slug} />
    </>
  );
}

function InviteForm({ slug }: { slug: string }) {
  const invite = useInvite(slug);
  const toast = useToast();
  const [email, setEmail] = useState('');
  const [roles, setRoles] = useState<GroupRole[]>(['observer']);
  const [left, setLeft] = useState(false);
  const parsed = invitationCreateSchema.safeParse({ email, roles });
  const fault = (path: string): string | undefined => (parsed.success ? undefined : parsed.error.issues.find((issue) => issue.path[0] === path)?.message);
  const emailError = (left && email ? fault('email') : undefined) ?? (isApiError(invite.error) ? (invite.error.issueAt('email') ?? invite.error.message) : undefined);
  return (
    <form
      className="sheet pad" id="invite" style={{ marginTop: 14 }}
      onSubmit={(event) => {
        event.preventDefault();
        setLeft(true);
        if (parsed.success) invite.mutate(parsed.data, { onSuccess: () => { toast(`Invitation sent to ${parsed.data.email}.`); setEmail(''); setLeft(false); } });
      }}
    >
      <Field label="Invite by e-mail" type="email" value={email} onChange={(event) => { setEmail(event.target.value); invite.reset(); }} onBlur={() => setLeft(true)} error={emailError} placeholder="name@group.example" />
      <fieldset className="bare" style={{ margin: '12px 0' }}>
        <legend className="lab" style={{ marginBottom: 5 }}>Roles</legend>
        <div className="inline-checks">
          {groupRoles.map((role) => (
            <Checkbox key={role} checked={roles.includes(role)} onChange={(event) => setRoles(event.target.checked ? [...roles, role] : roles.filter((r) => r !== role))}>{role.charAt(0).toUpperCase() + role.slice(1)}</Checkbox>
          ))}
        </div>
        {fault('roles') ? <p className="st bad">{fault('roles')}</p> : null}
      </fieldset>
      <div className="flex gap-x3 items-center">
        <Button type="submit" look="primary" disabled={!parsed.success || invite.isPending}>Send invitation</Button>
        <span className="sm">{parsed.success ? 'Valid for 14 days.' : email ? 'Correct the address or the roles first.' : 'Write an address first.'}</span>
      </div>
    </form>
  );
}
