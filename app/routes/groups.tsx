import '../styles/pages/group.css';
import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useParam } from '../components/noise-rule/use-noise';
import { DataTable } from '../components/table/data-table';
import { Button, ButtonLink } from '../components/ui/button';
import { Field, Textarea } from '../components/ui/field';
import { PageHead, Section, Tag } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { listGroupsQueryOptions, useCreateGroup } from '../features/groups/api/groups';
import { useSession } from '../features/session/api/session';
import { isApiError } from '../lib/api-client';
import { formatDate } from '../lib/format';
import { paths } from '../lib/paths';

export default function Groups() {
  const [q, setQ] = useParam('q');
  const groups = useQuery(listGroupsQueryOptions(q));
  const session = useSession();
  return (
    <Page title="Groups" className="page-groups">
      <PageHead title="Groups" lead="A group owns phantoms and solver configurations. Its members hold roles in it; nobody reviews the work of a group they belong to." />
      <Field label="Part of the name" type="search" value={q} onChange={(event) => setQ(event.target.value)} className="filter" />
      <Section title="All groups" note={groups.data ? `${groups.data.items.length} listed` : undefined}>
        {groups.isPending ? <Loading label="Reading groups" /> : null}
        {groups.isError ? <ErrorPanel error={groups.error} what="Groups" onRetry={() => void groups.refetch()} /> : null}
        {groups.data && groups.data.items.length === 0 ? <Empty title={q ? `No group has “${q}” in its name` : 'No group yet'}>{session.account ? 'Create one below.' : 'Sign in to create one.'}</Empty> : null}
        {groups.data?.items.length ? (
          <div className="sheet">
            <DataTable
              caption="Groups" rows={groups.data.items} rowKey={(group) => group.id} initialSort={{ key: 'name' }}
              columns={[
                { key: 'name', head: 'Group', sortBy: (g) => g.name, cell: (g) => <Link className="strong" to={paths.group(g.slug)}>{g.name}</Link>, className: 'lead-col' },
                { key: 'about', head: 'About', cell: (g) => <span className="sm">{g.description}</span>, className: 'only-d' },
                { key: 'members', head: 'Members', numeric: true, sortBy: (g) => g.memberCount, cell: (g) => g.memberCount },
                { key: 'since', head: 'Since', numeric: true, sortBy: (g) => g.since, cell: (g) => formatDate(g.since), className: 'only-d' },
                { key: 'you', head: 'Your roles', cell: (g) => g.yourRoles.map((role) => <Tag key={role}>{role}</Tag>) },
              ]}
            />
          </div>
        ) : null}
      </Section>
      <Section title="New group" note="its creator becomes the owner">
        {session.can('group.create') ? <NewGroup /> : <div className="sheet pad flex gap-x3 items-center"><span>Every member can create a group.</span><ButtonLink to={paths.signIn(paths.groups())}>Sign in</ButtonLink></div>}
      </Section>
    </Page>
  );
}

function NewGroup() {
  const create = useCreateGroup();
  const navigate = useNavigate();
  const [name, setName] = useState('');
  const [description, setDescription] = useState('');
  const issue = (path: string) => (isApiError(create.error) ? create.error.issueAt(path) : undefined);
  return (
    <form className="sheet pad new-group" onSubmit={(event) => { event.preventDefault(); create.mutate({ name, description }, { onSuccess: (group) => navigate(paths.group(group.slug)) }); }}>
      <Field label="Name" value={name} onChange={(event) => setName(event.target.value)} minLength={3} maxLength={80} required error={issue('name')} help="3 to 80 characters; the address is made from it." />
      <Textarea label="Description" rows={2} value={description} maxLength={500} onChange={(event) => setDescription(event.target.value)} error={issue('description')} />
      {create.isError && !issue('name') && !issue('description') ? <p className="st bad" role="alert">{create.error.message}</p> : null}
      <div><Button type="submit" look="primary" disabled={create.isPending || name.trim().length < 3}>Create group</Button></div>
    </form>
  );
}
