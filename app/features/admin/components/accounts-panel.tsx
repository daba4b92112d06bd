import { useState } from 'react';
import type { UserWire } from '../../../../shared/contracts/account';
import { DataTable } from '../../../components/table/data-table';
import { Button } from '../../../components/ui/button';
import { Field } from '../../../components/ui/field';
import { Tag } from '../../../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { useToast } from '../../../components/ui/toast';
import { formatDate } from '../../../lib/format';
import { useSetSiteRoles, useUsers, type GivableRole } from '../api/admin';

const givable: readonly GivableRole[] = ['reviewer', 'administrator'];

export function AccountsPanel() {
  const [q, setQ] = useState('');
  const users = useUsers(q);
  const setRoles = useSetSiteRoles();
  const toast = useToast();
  const rows = users.data?.pages.flatMap((page) => page.items) ?? [];
  const change = (user: UserWire, role: GivableRole) => {
    const held = user.siteRoles.filter((r): r is GivableRole => r !== 'member');
    const siteRoles = held.includes(role) ? held.filter((r) => r !== role) : [...held, role];
    setRoles.mutate({ handle: user.handle, siteRoles }, { onSuccess: () => toast(`Site roles of ${user.handle}: ${siteRoles.join(', ') || 'member'}.`) });
  };
  return (
    <>
      <div className="filters"><Field label="Part of the handle" type="search" value={q} onChange={(event) => setQ(event.target.value)} /></div>
      {users.isPending ? <Loading label="Reading accounts" /> : null}
      {users.isError ? <ErrorPanel error={users.error} what="Accounts" onRetry={() => void users.refetch()} /> : null}
      {users.data && rows.length === 0 ? <Empty title="No account has this in its handle" /> : null}
      {rows.length ? (
        <div className="sheet">
          <DataTable
            caption="Accounts and their site roles" rows={rows} rowKey={(u) => u.handle} className="tk"
            columns={[
              { key: 'handle', head: 'Handle', sortBy: (u) => u.handle, cell: (u) => <><b>{u.handle}</b> {u.closed ? <Tag>closed</Tag> : null}</> },
              { key: 'roles', head: 'Site roles', cell: (u) => <span className="scopes row">{givable.map((role) => <label key={role}><input type="checkbox" checked={u.siteRoles.includes(role)} disabled={u.closed || setRoles.isPending} aria-label={`${u.handle} is ${role}`} onChange={() => change(u, role)} /> {role}</label>)}</span> },
              { key: 'groups', head: 'Groups', numeric: true, sortBy: (u) => u.groupCount, cell: (u) => u.groupCount },
              { key: 'since', head: 'Since', numeric: true, sortBy: (u) => u.since, cell: (u) => formatDate(u.since) },
            ]}
          />
        </div>
      ) : null}
      {setRoles.isError ? <p className="st bad" role="alert">{setRoles.error.message}</p> : null}
      {users.hasNextPage ? <Button style={{ marginTop: 12 }} onClick={() => void users.fetchNextPage()}>More accounts</Button> : null}
    </>
  );
}
