import type { EntityManager } from '@mikro-orm/sqlite';
import type { GroupWire, MemberWire } from '../../../shared/contracts/group.ts';
import { defaultPageSize, type PageQuery } from '../../../shared/contracts/pagination.ts';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { GroupEntity, MembershipEntity, type Group } from '../../entities/group.ts';
import { afterPlace, cutPage, newestFirst, readCursor } from '../paging.ts';

export async function showGroup(em: EntityManager, actor: Actor | null, group: Group): Promise<GroupWire> {
  return wire(group, await em.count(MembershipEntity, { group: group.id }), actor);
}

export async function listGroups(
  em: EntityManager,
  actor: Actor | null,
  query: PageQuery & { readonly q?: string | undefined },
): Promise<{ items: GroupWire[]; nextCursor: string | null }> {
  const limit = query.limit ?? defaultPageSize;
  const named = query.q === undefined || query.q === '' ? {} : { name: { $like: `%${query.q.replaceAll(/[%_]/g, '')}%` } };
  const found = await em.find(GroupEntity, { $and: [named, afterPlace(readCursor(query.cursor))] }, { orderBy: newestFirst, limit: limit + 1 });
  const { rows, nextCursor } = cutPage(found, limit);
  const members = await em.find(MembershipEntity, { group: { $in: rows.map((group) => group.id) } }, { fields: ['group'] });
  const counts = new Map<string, number>();
  for (const { group } of members) counts.set(group.id, (counts.get(group.id) ?? 0) + 1);
  return { items: rows.map((group) => wire(group, counts.get(group.id) ?? 0, actor)), nextCursor };
}

export async function listMembers(em: EntityManager, actor: Actor, group: Group): Promise<{ items: MemberWire[] }> {
  const memberships = await em.find(MembershipEntity, { group: group.id }, { populate: ['user'], orderBy: { user: { handle: 'asc' } } });
  return {
    items: memberships.map(({ user, roles, createdAt }) => ({
      handle: user.$.handle,
      roles,
      since: createdAt.toISOString(),
      you: user.id === actor.id,
    })),
  };
}

function wire(group: Group, memberCount: number, actor: Actor | null): GroupWire {
  return {
    id: group.id,
    slug: group.slug,
    name: group.name,
    description: group.description,
    since: group.createdAt.toISOString(),
    memberCount,
    yourRoles: [...(actor?.groups[group.id] ?? [])],
  };
}
