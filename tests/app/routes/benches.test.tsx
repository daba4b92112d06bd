import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { createQueryClient } from '../../../app/lib/query-client';
import { Providers } from '../../../app/providers';
import { routes } from '../../../app/router';

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

type Answers = Record<string, { status?: number; body: unknown }>;
const visitor: Answers = {
  '/session': { body: { account: null, via: null, signIn: { url: '/auth/github', standIn: null } } },
  '/queue': { body: { queued: 0, running: 0, workers: 1, seeding: false, done: 0, total: 0 } },
  '/recent-verdicts': { body: { items: [] } },
};

/** The site at an address, with the server's answers by path. */
function open(address: string, answers: Answers) {
  const all = { ...visitor, ...answers };
  const asked: string[] = [];
  vi.stubGlobal('fetch', async (url: string) => {
    const path = new URL(url, 'http://localhost').pathname.replace('/api/v1', '');
    asked.push(path);
    const answer = all[path] ?? { status: 404, body: { code: 'not-found', title: 'Nothing is registered here', detail: 'No such address.' } };
    return new Response(JSON.stringify(answer.body), { status: answer.status ?? 200 });
  });
  const client = createQueryClient();
  client.setDefaultOptions({ queries: { ...client.getDefaultOptions().queries, retry: false } });
  render(<Providers router={createMemoryRouter(routes, { initialEntries: [address] })} queryClient={client} />);
  return asked;
}

const patient = { timeout: 15_000 };

describe('states of the bench pages', () => {
  it('front page without a bench says what would bring one', async () => {
    open('/', { '/benches': { body: { items: [], nextCursor: null } } });
    expect(await screen.findByText('No bench is open yet', undefined, patient)).toBeTruthy();
    expect(screen.getByRole('heading', { level: 1 }).textContent).toBe('Find the inverse method that holds at your noise.');
    expect(screen.getByText('No table is signed yet')).toBeTruthy();
    expect(screen.getByRole('link', { name: 'Sign in' })).toBeTruthy();
  });

  it('list of benches shows a failing server with its request and asks again on demand', async () => {
    const asked = open('/benches', { '/benches': { status: 500, body: { code: 'internal', title: 'The server failed', detail: 'Try again later.', requestId: 'req-7' } } });
    const alert = await screen.findByRole('alert', undefined, patient);
    expect(alert.textContent).toContain('The benches: the server failed');
    expect(alert.textContent).toContain('req-7');
    const before = asked.filter((p) => p === '/benches').length;
    await userEvent.setup().click(screen.getByRole('button', { name: 'Try again' }));
    await expect.poll(() => asked.filter((p) => p === '/benches').length).toBe(before + 1);
  });

  it('a bench that does not exist says so', async () => {
    open('/benches/no-such-bench', {});
    expect(await screen.findByRole('heading', { level: 1, name: 'No bench is registered here' }, patient)).toBeTruthy();
  });

  it('an address outside the site says so', async () => {
    open('/no/such/page', {});
    expect(await screen.findByRole('heading', { level: 1, name: 'No page is registered here' }, patient)).toBeTruthy();
  });

  it('comparison without runs leads to the benches', async () => {
    open('/compare', {});
    expect(await screen.findByText('No runs chosen', undefined, patient)).toBeTruthy();
  });

  it('a visitor is asked to sign in before making a bench', async () => {
    open('/benches/new', {});
    expect(await screen.findByText('Sign in first', undefined, patient)).toBeTruthy();
  });
});
