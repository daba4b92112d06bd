import { cleanup, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { createQueryClient } from '../../../app/lib/query-client';
import { Providers } from '../../../app/providers';
import { routes } from '../../../app/router';
import type { VerificationRequest, VerificationResponse } from '../../../app/workers/verification-messages';
import type { Verification, VerificationItem } from '../../../shared/contracts/verification';

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

const hash = (digit: string): string => digit.repeat(64);
const item = (key: string, over: Partial<VerificationItem>): VerificationItem => ({
  key, group: 'Methods', name: key, line: 'line', published: '1.25', unit: '', bound: 5e-3, reason: 'Half a unit of the last printed digit.', source: { short: 'Author 1990', full: 'Author, A title, 1990.', fromMemory: false }, cost: 'light',
  state: 'pass', measured: 1.2511, gap: 1.1e-3, words: null, digest: hash('a'), seconds: 0.1, at: '2026-12-01T06:00:00.000Z', ...over,
});
const data: Verification = {
  codeVersion: '0.1.0+4f19c2', running: false, at: '2026-12-01T06:00:00.000Z', resultHash: hash('9'),
  items: [
    item('Disc', { group: 'Forward models', seconds: 2.5 }),
    item('Corner', {}),
    item('Wrong', { state: 'fail', gap: 0.19, measured: 1.44, digest: hash('c'), source: { short: 'Author 1991', full: 'Author, 1991.', fromMemory: true } }),
    item('Later', { state: 'not-run', measured: null, gap: null, digest: null, seconds: null, at: null }),
  ],
};

/** A worker that answers each check with the digest given for it. */
function fakeWorker(digests: Readonly<Record<string, string>>): { readonly asked: string[] } {
  const asked: string[] = [];
  vi.stubGlobal('Worker', class {
    onmessage: ((event: { data: VerificationResponse }) => void) | null = null;
    postMessage({ id, key }: VerificationRequest): void {
      asked.push(key);
      const digest = digests[key];
      const send = (data: VerificationResponse): void => void setTimeout(() => this.onmessage?.({ data }));
      send({ id, state: 'begun' });
      send(digest === undefined ? { id, state: 'failed', message: 'Array buffer allocation failed' } : { id, state: 'done', outcome: { measured: 1.2511, gap: 1.1e-3, digest, seconds: 0.3 } });
    }
    terminate(): void {}
  });
  return { asked };
}

function open(address: string, answer: { status?: number; body: unknown }): void {
  const answers: Record<string, { status?: number; body: unknown }> = {
    '/session': { body: { account: null, via: null, signIn: { url: '/auth/github', standIn: null } } },
    '/queue': { body: { queued: 0, running: 0, workers: 1, seeding: false, done: 0, total: 0 } },
    '/verification': answer,
  };
  vi.stubGlobal('fetch', async (url: string) => {
    const found = answers[new URL(url, 'http://localhost').pathname.replace('/api/v1', '')] ?? { status: 404, body: { code: 'not-found', title: 'None', detail: 'None.' } };
    return new Response(JSON.stringify(found.body), { status: found.status ?? 200 });
  });
  const client = createQueryClient();
  client.setDefaultOptions({ queries: { ...client.getDefaultOptions().queries, retry: false } });
  render(<Providers router={createMemoryRouter(routes, { initialEntries: [address] })} queryClient={client} />);
}
const patient = { timeout: 15_000 };
const row = (name: string): HTMLElement => screen.getByText(name, { selector: 'b' }).closest('tr')!;

describe('the verification page', () => {
  it('shows groups, figures, margins and the summary, without a noise rule', async () => {
    open('/verification', { body: data });
    await screen.findByText('Disc', { selector: 'b' }, patient);
    expect(screen.getByRole('heading', { level: 1 }).textContent).toBe('Does this instance compute what it says?');
    const summary = screen.getByRole('group', { name: 'Summary' });
    for (const text of ['2 of 4 pass', '1 failed, 1 not run', '0 of 4', '9999 9999']) expect(summary.textContent).toContain(text);
    // 5e-3 / 0.19 of the failed one.
    expect(summary.textContent).toContain('0.026');
    expect(screen.getAllByRole('rowheader').map((cell) => cell.textContent)).toEqual(['Forward models', 'Methods']);
    expect(within(row('Corner')).getByRole('img', { name: 'gap 0.0011, bound 0.005' }).querySelector('circle')).not.toBeNull();
    expect(within(row('Wrong')).getByRole('img').querySelector('circle')).toBeNull();
    expect(within(row('Wrong')).getByText('Fail')).toBeTruthy();
    expect(within(row('Wrong')).getByText('Author 1991, from memory')).toBeTruthy();
    expect(within(row('Later')).getByText('Not run')).toBeTruthy();
    expect(screen.queryByRole('slider')).toBeNull();
    expect(screen.getByRole('link', { name: 'Download as CSV' }).getAttribute('href')).toBe('/api/v1/verification.csv');
  });

  it('filters by state and keeps the choice in the address', async () => {
    open('/verification?show=failed', { body: data });
    await screen.findByText('Wrong', { selector: 'b' }, patient);
    expect(screen.queryByText('Corner', { selector: 'b' })).toBeNull();
    await userEvent.setup().click(screen.getByRole('button', { name: 'All 4' }));
    expect(row('Corner')).toBeTruthy();
  });

  it('computes one line here and compares its bits', async () => {
    const worker = fakeWorker({ Disc: hash('a'), Corner: hash('b') });
    open('/verification', { body: data });
    await screen.findByText('Disc', { selector: 'b' }, patient);
    const user = userEvent.setup();
    await user.click(screen.getByRole('button', { name: 'Run here: Disc, line' }));
    await within(row('Disc')).findByText('Same bits');
    await user.click(screen.getByRole('button', { name: 'Run here: Corner, line' }));
    await within(row('Corner')).findByText('Differs in last bit');
    expect(worker.asked).toEqual(['Disc', 'Corner']);
    expect(screen.getByRole('group', { name: 'Summary' }).textContent).toContain('1 with the same bits, 1 differs');
  });

  it('computes all that is left, also what the server has not run, and says what broke', async () => {
    const worker = fakeWorker({ Disc: hash('a'), Corner: hash('a'), Later: hash('d') });
    open('/verification', { body: data });
    await screen.findByText('Disc', { selector: 'b' }, patient);
    const user = userEvent.setup();
    await user.click(screen.getByRole('button', { name: 'Run all in this browser' }));
    await within(row('Later')).findByText('Pass, not compared');
    expect(within(row('Wrong')).getByText('Array buffer allocation failed')).toBeTruthy();
    expect(worker.asked).toEqual(['Disc', 'Corner', 'Wrong', 'Later']);
    // What broke can be tried again, and nothing else is.
    await user.click(await screen.findByRole('button', { name: 'Run all in this browser' }));
    expect(worker.asked.slice(4)).toEqual(['Wrong']);
  });

  it('says that the server cannot give it', async () => {
    open('/verification', { status: 500, body: { code: 'internal', title: 'The server failed', detail: 'Try again later.', requestId: 'req-9' } });
    expect((await screen.findByRole('alert', undefined, patient)).textContent).toContain('req-9');
  });
});
