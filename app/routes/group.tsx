import '../styles/pages/group.css';
import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useLocation, useNavigate, useParams } from 'react-router-dom';
import type { GroupWire } from '../../shared/contracts/group';
import { can } from '../../shared/domain/permissions';
import { Page } from '../components/layout/page';
import { DataTable } from '../components/table/data-table';
import { Button, ButtonLink } from '../components/ui/button';
import { Confirm, Dialog } from '../components/ui/dialog';
import { Field, Textarea } from '../components/ui/field';
import { PageHead, Section } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { StateMark } from '../components/ui/state-mark';
import { getGroupQueryOptions, listMembersQueryOptions, useEditGroup, useLeaveGroup } from '../features/groups/api/groups';
import { Invitations } from '../features/groups/components/invitations';
import { InvitationBanner } from '../features/groups/components/invitation-banner';
import { RoleMatrix } from '../features/groups/components/role-matrix';
import { WaitingPanel } from '../features/groups/components/waiting-panel';
import { waitingInGroup } from '../features/groups/model/waiting';
import { listPhantomsQueryOptions } from '../features/phantoms/api/list-phantoms';
import { listRunsQueryOptions } from '../features/runs/api/get-run';
import { RunsInFlight } from '../features/runs/components/runs-in-flight';
import { useSession } from '../features/session/api/session';
import { listSolversQueryOptions } from '../features/solvers/api/get-solver';
import { isApiError } from '../lib/api-client';
import { formatDate, plural } from '../lib/format';
import { paths } from '../lib/paths';
import NotFound from './not-found';

export default function Group() {
  const { slug = '' } = useParams();
  const group = useQuery(getGroupQueryOptions(slug));
  if (group.isError && isApiError(group.error) && group.error.status === 404) return <NotFound what="group" />;
  if (group.isError) return <Page title="Group"><PageHead title="Group" /><ErrorPanel error={group.error} what="This group" onRetry={() => void group.refetch()} /></Page>;
  if (!group.data) return <Page title="Group"><PageHead title="Group" /><Loading label="Reading the group" /></Page>;
  return <GroupPage group={group.data} />;
}

function GroupPage({ group }: { group: GroupWire }) {
  const session = useSession();
  const location = useLocation();
  const navigate = useNavigate();
  const token = new URLSearchParams(location.hash.slice(1)).get('invitation');
  const subject = { groupId: group.id };
  const may = (permission: Parameters<typeof can>[1]) => can(session.actor, permission, subject);
  const member = group.yourRoles.length > 0;
  const phantoms = useQuery(listPhantomsQueryOptions({ group: group.slug }));
  const solvers = useQuery(listSolversQueryOptions({ group: group.slug }));
  const runs = useQuery({ ...listRunsQueryOptions({ group: group.slug, limit: '100' }), refetchInterval: (query) => (query.state.data?.items.some((run) => run.state === 'queued' || run.state === 'running') ? 4000 : false) });
  const members = useQuery({ ...listMembersQueryOptions(group.slug), enabled: may('group.read-members') });
  const inFlight = (runs.data?.items ?? []).filter((run) => run.state !== 'finished' && run.state !== 'cancelled');
  const [editing, setEditing] = useState(false);
  return (
    <Page title={group.name} className="page-group">
      <PageHead
        crumbs={<><Link to={paths.groups()}>Groups</Link><span>since {formatDate(group.since)}</span>{member ? <span>You are {group.yourRoles.join(' and ')} here</span> : null}</>}
        title={group.name}
        lead={`${group.description ? `${group.description} ` : ''}${plural(group.memberCount, 'member')}, ${plural(phantoms.data?.items.length ?? 0, 'phantom')}, ${plural(solvers.data?.items.length ?? 0, 'solver configuration')}.`}
      >
        {may('phantom.create') ? <ButtonLink to={`${paths.phantomNew()}?group=${group.slug}`}>New phantom</ButtonLink> : null}
        {may('bench.create') ? <ButtonLink to={`${paths.benchNew()}?group=${group.slug}`}>New bench</ButtonLink> : null}
        {may('solver.create') ? <ButtonLink to={`${paths.solverNew()}?group=${group.slug}`}>New configuration</ButtonLink> : null}
        {may('group.manage') ? <><Button onClick={() => setEditing(true)}>Edit</Button><a className="btn pri" href="#invite">Invite</a></> : null}
      </PageHead>
      {token ? <InvitationBanner token={token} signedIn={!!session.account} onDone={() => navigate(location.pathname, { replace: true })} /> : null}
      {member ? <WaitingPanel waiting={waitingInGroup(phantoms.data?.items ?? [], runs.data?.items ?? [], group.yourRoles)} /> : null}
      <div className={member ? 'group-cols sec' : 'sec'}>
        <div>
          {runs.isError ? <ErrorPanel error={runs.error} what="Runs" onRetry={() => void runs.refetch()} /> : null}
          {inFlight.length ? <Section title="Runs in flight" note="a box is one noise level, lowest first" id="flight"><RunsInFlight runs={inFlight} /></Section> : null}
          <Section title="Phantoms" id="phantoms" note={may('phantom.create') ? <Link to={`${paths.phantomNew()}?group=${group.slug}`}>New phantom</Link> : undefined}>
            {phantoms.isError ? <ErrorPanel error={phantoms.error} what="Phantoms" onRetry={() => void phantoms.refetch()} /> : null}
            {phantoms.isPending ? <Loading label="Reading phantoms" /> : null}
            {phantoms.data?.items.length === 0 ? <Empty title="No phantom yet">A curator of this group uploads one.</Empty> : null}
            {phantoms.data?.items.length ? (
              <div className="sheet">
                <DataTable
                  caption="Phantoms of the group" className="pt" rows={phantoms.data.items} rowKey={(p) => p.id}
                  columns={[
                    { key: 'name', head: 'Phantom', sortBy: (p) => p.name, className: 'lead-col', cell: (p) => <Link className="strong" to={paths.phantomVersion(p.slug, p.current.n)}>{p.name}</Link> },
                    { key: 'version', head: 'Version', cell: (p) => <span className="mono">{p.id} v{p.current.n}</span> },
                    { key: 'state', head: 'State', sortBy: (p) => p.current.state, cell: (p) => (p.current.sealed && p.current.sealedUntil ? <StateMark state="sealed" word={`Sealed until ${formatDate(p.current.sealedUntil)}`} /> : <StateMark state={p.current.state} />) },
                    { key: 'runs', head: 'Runs', numeric: true, sortBy: (p) => p.current.runs, cell: (p) => plural(p.current.runs, 'run') },
                    { key: 'by', head: 'Curated by', cell: (p) => p.current.createdBy.handle },
                  ]}
                />
              </div>
            ) : null}
          </Section>
          <Section title="Solver configurations" id="solvers">
            {solvers.isError ? <ErrorPanel error={solvers.error} what="Solver configurations" onRetry={() => void solvers.refetch()} /> : null}
            {solvers.isPending ? <Loading label="Reading solver configurations" /> : null}
            {solvers.data?.items.length === 0 ? <Empty title="No configuration yet">A developer of this group registers one.</Empty> : null}
            {solvers.data?.items.length ? (
              <div className="sheet">
                <DataTable
                  caption="Solver configurations of the group" className="pt" rows={solvers.data.items} rowKey={(s) => s.id}
                  columns={[
                    { key: 'name', head: 'Configuration', sortBy: (s) => s.name, className: 'lead-col', cell: (s) => <Link className="strong" to={paths.solver(s.slug)}>{s.name}</Link> },
                    { key: 'version', head: 'Version', cell: (s) => <span className="mono">{s.id} v{s.current.n}</span> },
                    { key: 'state', head: 'State', sortBy: (s) => s.current.state, cell: (s) => <StateMark state={s.current.state} /> },
                    { key: 'runs', head: 'Runs', numeric: true, sortBy: (s) => s.current.runs, cell: (s) => `${s.current.runs}, ${s.current.signedOff} signed off` },
                    { key: 'by', head: 'By', cell: (s) => s.current.createdBy.handle },
                  ]}
                />
              </div>
            ) : null}
          </Section>
        </div>
        {member ? (
          <div>
            <Section title="Members and roles" note="one person can hold several" id="members">
              {members.isError ? <ErrorPanel error={members.error} what="Members" onRetry={() => void members.refetch()} /> : null}
              {members.isPending ? <Loading label="Reading members" /> : null}
              {members.data ? <RoleMatrix slug={group.slug} members={members.data} mayManage={may('group.manage')} /> : null}
            </Section>
            {may('group.manage') ? <Section title="Invitations" note="valid for 14 days" id="invitations"><Invitations slug={group.slug} /></Section> : null}
            <Leave slug={group.slug} name={group.name} />
          </div>
        ) : null}
      </div>
      {editing ? <EditGroup group={group} onClose={() => setEditing(false)} /> : null}
    </Page>
  );
}

function Leave({ slug, name }: { slug: string; name: string }) {
  const leave = useLeaveGroup(slug);
  const navigate = useNavigate();
  const [open, setOpen] = useState(false);
  return (
    <Section title="Leave">
      <Button look="danger" onClick={() => setOpen(true)}>Leave this group</Button>
      {leave.isError ? <p className="st bad" role="alert">{leave.error.message}</p> : null}
      <Confirm open={open} danger title={`Leave ${name}?`} confirmLabel="Leave this group" keepLabel="Stay" pending={leave.isPending} onClose={() => setOpen(false)} onConfirm={() => leave.mutate(undefined, { onSuccess: () => navigate(paths.groups()), onSettled: () => setOpen(false) })}>
        <p>You lose your roles here at once. An owner can invite you again.</p>
      </Confirm>
    </Section>
  );
}

function EditGroup({ group, onClose }: { group: GroupWire; onClose: () => void }) {
  const edit = useEditGroup(group.slug);
  const [name, setName] = useState(group.name);
  const [description, setDescription] = useState(group.description);
  const issue = (path: string) => (isApiError(edit.error) ? edit.error.issueAt(path) : undefined);
  return (
    <Dialog open onClose={onClose} title={`Edit ${group.name}`} actions={<><Button look="primary" disabled={edit.isPending} onClick={() => edit.mutate({ name, description }, { onSuccess: onClose })}>Save</Button><Button onClick={onClose}>Keep as it is</Button></>}>
      <div className="new-group">
        <Field label="Name" value={name} maxLength={80} onChange={(event) => setName(event.target.value)} error={issue('name')} />
        <Textarea label="Description" rows={3} maxLength={500} value={description} onChange={(event) => setDescription(event.target.value)} error={issue('description')} />
        {edit.isError && !issue('name') && !issue('description') ? <p className="st bad" role="alert">{edit.error.message}</p> : null}
      </div>
    </Dialog>
  );
}
