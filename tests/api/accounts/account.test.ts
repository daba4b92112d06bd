import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { OutboxMessageEntity } from '../../../api/entities/outbox-message.ts';
import { UserEntity } from '../../../api/entities/user.ts';
import { queueNotification } from '../../../api/services/mail/queue-mail.ts';
import { accountSchema } from '../../../shared/contracts/account.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.stop());

const newest = async (recipient: string) =>
  app.orm.em.fork().findOne(OutboxMessageEntity, { recipient }, { orderBy: { createdAt: 'desc', id: 'desc' } });

describe('an account', () => {
  it('shows its own address to nobody else', async () => {
    const own = await app.signInAs('curator-demo');
    expect(accountSchema.parse((await own.get('/api/v1/account')).body)).toMatchObject({ handle: 'curator-demo', email: 'curator-demo@hadamark.example' });
    const administrator = await app.signInAs('admin-demo');
    expect((await administrator.get('/api/v1/admin/users')).text).not.toContain('@');
  });

  it('takes a new address only after its link was followed, by the same account', async () => {
    const own = await app.signInAs('member-demo');
    const changed = await own.patch('/api/v1/account', { email: 'elsewhere@group.example', about: 'Reviews electrode benches' });
    expect(changed.body).toMatchObject({ email: 'member-demo@hadamark.example', pendingEmail: 'elsewhere@group.example', about: 'Reviews electrode benches' });
    const token = /#confirm=([\w-]+)/.exec((await newest('elsewhere@group.example'))?.text ?? '')?.[1] ?? '';
    const other = await app.signInAs('developer-demo');
    expect((await other.post('/api/v1/account/email-confirmation', { token })).status).toBe(404);
    expect((await own.post('/api/v1/account/email-confirmation', { token })).body).toMatchObject({ email: 'elsewhere@group.example', pendingEmail: null });
    expect((await own.post('/api/v1/account/email-confirmation', { token })).status).toBe(404);
  });

  it('is written to about what it wants to hear, once a message', async () => {
    const own = await app.signInAs('observer-demo');
    await own.patch('/api/v1/account', { notifications: { verdict: false } });
    const em = app.orm.em.fork();
    const user = await em.findOneOrFail(UserEntity, { handle: 'observer-demo' });
    queueNotification(em, [user], { kind: 'verdict', subject: 'A', text: 'a' }, new Date());
    queueNotification(em, [user, user], { kind: 'run-ended', subject: 'Line\r\nBcc: x@y.example', text: 'b' }, new Date());
    await em.flush();
    const messages = await app.orm.em.fork().find(OutboxMessageEntity, { recipient: user.email ?? '' });
    expect(messages.map(({ kind, subject }) => [kind, subject])).toEqual([['run-ended', 'Line Bcc: x@y.example']]);
  });

  it('closes: address, tokens, sessions and roles go, and the handle says so', async () => {
    const leaving = await app.signInAs('leaver-test');
    const script = await app.tokenFor('leaver-test', ['read']);
    expect((await leaving.delete('/api/v1/account', { handle: 'wrong' })).status).toBe(422);
    expect((await leaving.delete('/api/v1/account', { handle: 'leaver-test' })).status).toBe(204);
    expect((await leaving.get('/api/v1/session')).body).toMatchObject({ account: null });
    expect((await script.get('/api/v1/account')).status).toBe(401);
    const row = await app.orm.em.fork().findOneOrFail(UserEntity, { handle: { $like: 'closed-account-%' } });
    expect(row).toMatchObject({ email: null, githubId: null, siteRoles: [] });
    // The person may come back, as somebody new.
    const back = await app.signInAs('leaver-test');
    expect((await back.get('/api/v1/account')).body).not.toMatchObject({ id: row.id });
  });
});
