import { useState } from 'react';
import type { MemberWire } from '../../../../shared/contracts/group';
import { groupRoles, type GroupRole } from '../../../../shared/domain/permissions';
import { Button } from '../../../components/ui/button';
import { Confirm, Dialog } from '../../../components/ui/dialog';
import { Checkbox } from '../../../components/ui/field';
import { Tag } from '../../../components/ui/layout';
import { useToast } from '../../../components/ui/toast';
import { useRemoveMember, useSetRoles } from '../api/groups';

const roleNames: Record<GroupRole, string> = { owner: 'Owner', curator: 'Curator', developer: 'Developer', observer: 'Observer' };

/** Members by roles; an owner sees checkboxes, the others what is so. The last owner and a member's last role stay. */
export function RoleMatrix({ slug, members, mayManage }: { slug: string; members: readonly MemberWire[]; mayManage: boolean }) {
  const setRoles = useSetRoles(slug);
  const remove = useRemoveMember(slug);
  const toast = useToast();
  const [editing, setEditing] = useState<string | null>(null);
  const [leaving, setLeaving] = useState<string | null>(null);
  const owners = members.filter((member) => member.roles.includes('owner')).length;
  const fixed = (member: MemberWire, role: GroupRole): string | null => {
    if (!member.roles.includes(role)) return null;
    if (role === 'owner' && owners === 1) return 'A group keeps at least one owner.';
    return member.roles.length === 1 ? 'A member keeps at least one role.' : null;
  };
  const change = (member: MemberWire, role: GroupRole) => {
    const roles = member.roles.includes(role) ? member.roles.filter((r) => r !== role) : [...member.roles, role];
    setRoles.mutate({ handle: member.handle, roles }, { onSuccess: () => toast(`Roles of ${member.handle}: ${roles.join(', ')}.`, { undo: () => setRoles.mutate({ handle: member.handle, roles: member.roles }) }) });
  };
  const editedMember = members.find((member) => member.handle === editing);
  return (
    <>
      <div className="sheet">
        <table className="mt only-d">
          <thead>
            <tr><th scope="col">Handle</th>{groupRoles.map((role) => <th scope="col" key={role}>{roleNames[role]}</th>)}{mayManage ? <th scope="col"><span className="vh">Remove</span></th> : null}</tr>
          </thead>
          <tbody>
            {members.map((member) => (
              <tr key={member.handle}>
                <th scope="row" className={member.you ? 'you' : undefined}>{member.handle} {member.you ? <Tag>you</Tag> : null}</th>
                {groupRoles.map((role) => (
                  <td key={role}>
                    <button
                      type="button" className="dot" role="checkbox" aria-checked={member.roles.includes(role)} aria-label={`${member.handle} is ${role}`}
                      disabled={!mayManage || fixed(member, role) !== null || setRoles.isPending} title={mayManage ? (fixed(member, role) ?? undefined) : undefined} onClick={() => change(member, role)}
                    ><i /></button>
                  </td>
                ))}
                {mayManage ? <td><button type="button" className="lk d" disabled={member.roles.includes('owner') && owners === 1} aria-label={`Remove ${member.handle}`} onClick={() => setLeaving(member.handle)}>Remove</button></td> : null}
              </tr>
            ))}
          </tbody>
        </table>
        <div className="only-m">
          {members.map((member) => (
            <div className="mm" key={member.handle}>
              <span>{member.handle} {member.you ? <Tag>you</Tag> : null}<br /><em>{member.roles.join(', ')}</em></span>
              {mayManage ? <Button onClick={() => setEditing(member.handle)}>Change</Button> : null}
            </div>
          ))}
        </div>
      </div>
      {setRoles.isError || remove.isError ? <p className="st bad" role="alert">{(setRoles.error ?? remove.error)?.message}</p> : null}
      <p className="sm" style={{ marginTop: 7 }}>A group keeps at least one owner. Reviewers never review their own group&apos;s work.</p>
      <Dialog open={!!editedMember} onClose={() => setEditing(null)} title={`Roles of ${editedMember?.handle ?? ''}`} actions={<><Button onClick={() => setEditing(null)}>Close</Button><Button look="danger" onClick={() => { setLeaving(editing); setEditing(null); }}>Remove</Button></>}>
        {editedMember ? <div className="box-plain">{groupRoles.map((role) => <Checkbox key={role} checked={editedMember.roles.includes(role)} disabled={fixed(editedMember, role) !== null} onChange={() => change(editedMember, role)}>{roleNames[role]}</Checkbox>)}</div> : null}
      </Dialog>
      <Confirm open={leaving !== null} danger title={`Remove ${leaving ?? ''} from the group?`} confirmLabel="Remove" pending={remove.isPending} onClose={() => setLeaving(null)} onConfirm={() => leaving && remove.mutate(leaving, { onSettled: () => setLeaving(null) })}>
        <p>They lose their roles here at once. What they submitted stays with the group, under their handle.</p>
      </Confirm>
    </>
  );
}
