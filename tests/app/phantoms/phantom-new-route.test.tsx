import { cleanup, fireEvent, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { createQueryClient } from '../../../app/lib/query-client';
import { Providers } from '../../../app/providers';
import PhantomNewRoute from '../../../app/routes/phantom-new';
import { NoiseProvider } from '../../../app/components/noise-rule/use-noise';

const session = {
  account: { id: 'u1', handle: 'curator-demo', siteRoles: ['member'], groups: [{ id: 'g1', slug: 'tarn-soil-physics', name: 'Tarn Soil Physics', roles: ['curator'] }] },
  via: 'session', signIn: { url: '/auth/github', standIn: null },
};
const problem = (status: number, code: string, detail: string, issues: unknown[] = []) => ({ type: 'about:blank', title: 'Some fields need a correction', status, detail, code, instance: '/', requestId: 'req-1', issues });
const json = (body: unknown, status = 200) => Promise.resolve(new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/json' } }));

/** The whole page in jsdom takes its time on a busy machine. */
const slow = { timeout: 15_000 };

let sent: { path: string; method: string; body: unknown }[] = [];
let answers: Record<string, () => Promise<Response>>;
beforeEach(() => {
  sent = [];
  answers = { 'GET /session': () => json(session), 'POST /simulations': () => new Promise(() => undefined) };
  window.scrollTo = () => undefined;
  Element.prototype.scrollIntoView = () => undefined;
  vi.stubGlobal('fetch', (input: string, init: RequestInit = {}) => {
    const path = new URL(input, 'http://site.test').pathname.replace('/api/v1', '');
    const method = init.method ?? 'GET';
    sent.push({ path, method, body: typeof init.body === 'string' ? JSON.parse(init.body) : init.body });
    return (answers[`${method} ${path}`] ?? (() => json(problem(404, 'not-found', 'Nothing here.'), 404)))();
  });
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
  window.sessionStorage.clear();
});

vi.setConfig({ testTimeout: 60_000 });
const open = (path = '/phantoms/new') =>
  render(<Providers queryClient={createQueryClient()} router={createMemoryRouter([{ path: '/phantoms/new', element: <NoiseProvider><PhantomNewRoute /></NoiseProvider> }, { path: '*', element: <p>elsewhere</p> }], { initialEntries: [path] })} />);

describe('/phantoms/new', () => {
  it('asks a visitor to sign in', async () => {
    answers['GET /session'] = () => json({ ...session, account: null });
    open();
    expect(await screen.findByText('Sign in to make a phantom', {}, slow)).toBeTruthy();
  });

  it('keeps submitting disabled and leads from each reason to its field', async () => {
    open();
    const user = userEvent.setup();
    const submit = await screen.findByText<HTMLButtonElement>('Submit for review', {}, slow);
    expect(submit.disabled).toBe(true);
    const [reason] = screen.getAllByText('Choose a licence; without one nobody may use it.');
    await user.click(reason!);
    await vi.waitFor(() => expect(document.activeElement).toBe(screen.getByLabelText('Licence')), { timeout: 10_000 });
  });

  it('shows what the server refuses at its field, and clears it when the field changes', async () => {
    answers['POST /phantoms'] = () => json(problem(422, 'validation-failed', 'One field needs a correction.', [{ path: ['definition', 'geometry', 'contactImpedance'], message: 'Too small for these electrodes: 0.001 works.' }]), 422);
    open();
    const user = userEvent.setup();
    fireEvent.change(await screen.findByLabelText('Name', {}, slow), { target: { value: 'Two bodies' } });
    await user.selectOptions(screen.getByLabelText('Licence'), 'CC-BY-4.0');
    await user.click(screen.getAllByText('Keep as draft')[0]!);
    const contact = screen.getByLabelText<HTMLInputElement>('Contact impedance');
    await vi.waitFor(() => expect(contact.getAttribute('aria-invalid')).toBe('true'), { timeout: 10_000 });
    expect(document.getElementById(contact.getAttribute('aria-describedby')!)?.textContent).toBe('Too small for these electrodes: 0.001 works.');
    expect(sent.find((s) => s.method === 'POST' && s.path === '/phantoms')?.body).toMatchObject({ group: 'tarn-soil-physics', name: 'Two bodies', licence: 'CC-BY-4.0', definition: { family: 'electrical-impedance' } });
    await user.type(contact, '1');
    expect(contact.getAttribute('aria-invalid')).toBeNull();
  });

  it('keeps what was typed over a reload', async () => {
    open();
    fireEvent.change(await screen.findByLabelText('Name', {}, slow), { target: { value: 'Half a name' } });
    cleanup();
    open();
    expect((await screen.findByLabelText<HTMLInputElement>('Name', {}, slow)).value).toBe('Half a name');
    expect(screen.getByText('Unsent input kept in this browser')).toBeTruthy();
  });

  it('locks the upload of frames measured on people until the box is complete', async () => {
    open();
    const user = userEvent.setup();
    await user.click(await screen.findByLabelText(/On people or animals/, {}, slow));
    expect(screen.getByText('Before you upload data measured on people or animals')).toBeTruthy();
    const file = screen.getByLabelText<HTMLInputElement>(/Choose a CSV file/);
    expect(file.disabled).toBe(true);
    for (const name of [/Ethics approval/, /de-identified/, /Current stayed within/]) await user.click(screen.getByLabelText(name));
    expect(file.disabled).toBe(true);
    fireEvent.change(screen.getByLabelText('Ethics reference'), { target: { value: 'Board 12' } });
    expect(file.disabled).toBe(false);
  });

  it('names row and column of a refused file', async () => {
    answers['POST /arrays'] = () => json(problem(422, 'file-rejected', '2 of 16384 values are not finite.', [{ path: ['file'], message: 'not a number', row: 41, column: 17 }, { path: ['file'], message: 'not a number', row: 97, column: 3 }]), 422);
    open();
    const user = userEvent.setup();
    await user.click(await screen.findByText('File', {}, slow));
    await user.upload(screen.getByLabelText(/Choose a file/), new File(['1,NaN'], 'map.csv', { type: 'text/csv' }));
    expect(await screen.findByText('Row 41, column 17: not a number', {}, slow)).toBeTruthy();
    expect(screen.getByText('Row 97, column 3: not a number')).toBeTruthy();
  });
});
