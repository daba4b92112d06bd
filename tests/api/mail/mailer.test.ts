import { createServer, type AddressInfo, type Server } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { OutboxMessageEntity } from '../../../api/entities/outbox-message.ts';
import { queueMail } from '../../../api/services/mail/queue-mail.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

/** As much of SMTP (RFC 5321) as a client needs to hand over a message. */
function smtpServer(): Promise<{ server: Server; port: number; received: string[]; refuse: (on: boolean) => void }> {
  const received: string[] = [];
  let refusing = false;
  const server = createServer((socket) => {
    let data: string | null = null;
    socket.on('error', () => undefined);
    socket.write('220 test\r\n');
    socket.on('data', (chunk) => {
      for (const line of chunk.toString().split(/(?<=\r\n)/)) {
        if (data !== null) {
          if (line === '.\r\n') {
            received.push(data);
            data = null;
            socket.write('250 taken\r\n');
          } else data += line;
        } else if (/^DATA/i.test(line)) {
          data = '';
          socket.write('354 go on\r\n');
        } else if (/^QUIT/i.test(line)) socket.end('221 bye\r\n');
        else if (/^RCPT/i.test(line) && refusing) socket.write('451 later\r\n');
        else socket.write('250 ok\r\n');
      }
    });
  });
  return new Promise((resolve) => {
    server.listen(0, '127.0.0.1', () => {
      resolve({ server, port: (server.address() as AddressInfo).port, received, refuse: (on) => void (refusing = on) });
    });
  });
}

let app: TestApp;
let smtp: Awaited<ReturnType<typeof smtpServer>>;
beforeAll(async () => {
  smtp = await smtpServer();
  app = await startTestApp({ env: { SMTP_URL: `smtp://127.0.0.1:${smtp.port}`, MAIL_FROM: 'site@hadamark.example' } });
});
afterAll(async () => {
  await app.stop();
  await new Promise((resolve) => smtp.server.close(resolve));
});

const put = async (to: string): Promise<string> => {
  const em = app.orm.em.fork();
  queueMail(em, { kind: 'test', to, subject: 'A verdict on RN-001', text: 'Signed off with a link.' }, app.deps.clock());
  await em.flush();
  return (await em.findOneOrFail(OutboxMessageEntity, { recipient: to })).id;
};
const read = (id: string) => app.orm.em.fork().findOneOrFail(OutboxMessageEntity, { id });

describe('with an SMTP server', () => {
  it('a message is handed over once, and its text is forgotten', async () => {
    const id = await put('one@group.example');
    await app.deps.mailer.deliver();
    await app.deps.mailer.deliver();
    expect(smtp.received).toHaveLength(1);
    expect(smtp.received[0]).toContain('Subject: A verdict on RN-001');
    expect(smtp.received[0]).toContain('From: site@hadamark.example');
    expect(smtp.received[0]).toContain('Signed off with a link.');
    expect(await read(id)).toMatchObject({ state: 'sent', text: '', attempts: 1 });
  });

  it('a refused message waits longer each time and is given up after six attempts', async () => {
    smtp.refuse(true);
    const id = await put('two@group.example');
    await app.deps.mailer.deliver();
    const first = await read(id);
    expect(first).toMatchObject({ state: 'waiting', attempts: 1 });
    expect(first.failure).toContain('451');
    // Not due yet.
    await app.deps.mailer.deliver();
    expect((await read(id)).attempts).toBe(1);
    for (let attempt = 2; attempt <= 6; attempt += 1) {
      app.advance(60_000 * 2 ** attempt);
      await app.deps.mailer.deliver();
    }
    expect(await read(id)).toMatchObject({ state: 'failed', attempts: 6 });
    expect(app.log()).toContain('mail not delivered');
  });

  it('a message that waited through an outage goes out afterwards', async () => {
    smtp.refuse(true);
    const id = await put('three@group.example');
    await app.deps.mailer.deliver();
    smtp.refuse(false);
    app.advance(120_000);
    await app.deps.mailer.deliver();
    expect(await read(id)).toMatchObject({ state: 'sent', attempts: 2, failure: null });
  });
});
