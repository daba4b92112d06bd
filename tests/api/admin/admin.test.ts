import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { auditPageSchema } from '../../../shared/contracts/audit.ts';
import { userPageSchema } from '../../../shared/contracts/account.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let administrator: HttpClient;
beforeAll(async () => {
  app = await startTestApp();
  administrator = await app.signInAs('admin-demo');
});
afterAll(() => app.stop());

describe('site roles', () => {
  it('are given by an administrator, count at once, and leave before and after in the trail', async () => {
    const member = await app.signInAs('member-demo');
    expect((await administrator.put('/api/v1/admin/users/member-demo/site-roles', { siteRoles: ['reviewer'] })).body).toMatchObject({ siteRoles: ['member', 'reviewer'] });
    expect((await member.get('/api/v1/session')).body).toMatchObject({ account: { siteRoles: ['member', 'reviewer'] } });
    const reviewers = userPageSchema.parse((await administrator.get('/api/v1/admin/users?role=reviewer')).body);
    expect(reviewers.items.map((user) => user.handle)).toEqual(['member-demo']);
    const trail = auditPageSchema.parse((await administrator.get('/api/v1/admin/audit?action=account.site-roles-changed')).body);
    expect(trail.items[0]).toMatchObject({ actor: 'admin-demo', before: { siteRoles: [] }, after: { siteRoles: ['reviewer'] }, detail: 'member-demo' });
  });

  it('leave at least one administrator', async () => {
    expect((await administrator.put('/api/v1/admin/users/admin-demo/site-roles', { siteRoles: [] })).status).toBe(409);
    expect((await administrator.delete('/api/v1/account', { handle: 'admin-demo' })).status).toBe(409);
  });

  it('go to a named handle while the site has no administrator, and never after', async () => {
    const fresh = await startTestApp({ env: { ADMINISTRATORS: 'first-test, second-test' } });
    try {
      const rolesOf = async (handle: string) => ((await (await fresh.signInAs(handle)).get('/api/v1/session')).body as { account: { siteRoles: string[] } }).account.siteRoles;
      expect(await rolesOf('unnamed-test')).toEqual(['member']);
      expect(await rolesOf('first-test')).toEqual(['member', 'administrator']);
      expect(await rolesOf('second-test')).toEqual(['member']);
    } finally {
      await fresh.stop();
    }
  });
});

describe('the audit trail', () => {
  it('refuses to be changed or emptied, by whatever statement', async () => {
    const connection = app.orm.em.fork().getConnection();
    const count = async (): Promise<number> => {
      const rows: { n: number }[] = await connection.execute('select count(*) as n from audit_entry');
      return rows[0]?.n ?? 0;
    };
    const before = await count();
    expect(before).toBeGreaterThan(0);
    await expect(connection.execute("update audit_entry set actor_handle = 'nobody'")).rejects.toThrow(/append-only/);
    await expect(connection.execute('delete from audit_entry')).rejects.toThrow(/append-only/);
    await expect(connection.execute('insert or replace into audit_entry select * from audit_entry limit 1')).rejects.toThrow(/append-only/);
    expect(await count()).toBe(before);
  });

  it('is read in pages, newest first, and filtered', async () => {
    for (let i = 0; i < 3; i += 1) await app.group(`Trail ${i}`, { 'owner-demo': ['owner'] });
    const first = auditPageSchema.parse((await administrator.get('/api/v1/admin/audit?limit=2')).body);
    expect(first.items).toHaveLength(2);
    expect(Number(first.items[0]?.id)).toBeGreaterThan(Number(first.items[1]?.id));
    const second = auditPageSchema.parse((await administrator.get(`/api/v1/admin/audit?limit=2&cursor=${first.nextCursor}`)).body);
    expect(Number(second.items[0]?.id)).toBeLessThan(Number(first.items[1]?.id));
    const groups = auditPageSchema.parse((await administrator.get('/api/v1/admin/audit?action=group&actor=owner-demo')).body);
    expect(groups.items.length).toBeGreaterThanOrEqual(3);
    expect(groups.items.every((entry) => entry.action.startsWith('group.') && entry.actor === 'owner-demo')).toBe(true);
    const later = new Date(Date.now() + 60_000).toISOString();
    expect((await administrator.get(`/api/v1/admin/audit?from=${later}`)).body).toMatchObject({ items: [] });
  });
});
