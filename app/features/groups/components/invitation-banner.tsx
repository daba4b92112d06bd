import { useQuery } from '@tanstack/react-query';
import { Box } from '../../../components/ui/box';
import { Button, ButtonLink } from '../../../components/ui/button';
import { useToast } from '../../../components/ui/toast';
import { formatDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { previewInvitationQueryOptions, useAcceptInvitation } from '../api/groups';

/** The holder of an invitation's link decides here. */
export function InvitationBanner({ token, signedIn, onDone }: { token: string; signedIn: boolean; onDone: () => void }) {
  const preview = useQuery(previewInvitationQueryOptions(token));
  const accept = useAcceptInvitation();
  const toast = useToast();
  if (preview.isPending) return null;
  if (preview.isError) return <Box tone="failure" title="This invitation cannot be used" alert><p>{preview.error.message}</p></Box>;
  const invitation = preview.data;
  if (invitation.state !== 'open') return <Box tone="caution" title={`This invitation is ${invitation.state}`}><p>Ask {invitation.invitedBy.handle} for a new one.</p></Box>;
  return (
    <Box tone="proof" title={`${invitation.invitedBy.handle} invites you to ${invitation.group.name}`}>
      <p>As {invitation.roles.join(' and ')}. The link works until {formatDate(invitation.expiresAt)}.</p>
      <div className="flex gap-x3" style={{ marginTop: 10 }}>
        {signedIn ? <Button look="primary" disabled={accept.isPending} onClick={() => accept.mutate(token, { onSuccess: () => { toast(`You are a member of ${invitation.group.name}.`); onDone(); } })}>Accept invitation</Button> : <ButtonLink look="primary" to={paths.signIn(`${window.location.pathname}${window.location.hash}`)}>Sign in to accept</ButtonLink>}
      </div>
      {accept.isError ? <p className="st bad" role="alert">{accept.error.message}</p> : null}
    </Box>
  );
}
