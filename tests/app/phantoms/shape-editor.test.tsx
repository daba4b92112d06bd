import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { cleanup, fireEvent, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { ToastProvider } from '../../../app/components/ui/toast';
import type { FormPatch } from '../../../app/features/phantoms/components/form-part';
import { TruthSection } from '../../../app/features/phantoms/components/truth-section';
import { useTruthPicture } from '../../../app/features/phantoms/components/use-truth-picture';
import { emptyForm } from '../../../app/features/phantoms/model/phantom-form';

afterEach(cleanup);
vi.setConfig({ testTimeout: 60_000 });

function Harness() {
  const [form, setForm] = useState(() => emptyForm('g'));
  const change = (patch: FormPatch) => setForm((old) => ({ ...old, ...(typeof patch === 'function' ? patch(old) : patch) }));
  return <TruthSection form={form} change={change} issueAt={() => undefined} truth={useTruthPicture(form)} />;
}
const show = () => render(<QueryClientProvider client={new QueryClient()}><ToastProvider><Harness /></ToastProvider></QueryClientProvider>);
const table = () => within(screen.getByRole('table', { name: 'Shapes of the ground truth' }));
const field = (name: string) => table().getByRole<HTMLInputElement>('textbox', { name });

describe('the shape editor by keyboard', () => {
  it('moves the chosen shape by 1 mm with the arrow keys, by 10 mm with Shift', () => {
    show();
    const editor = screen.getByRole('group', { name: /^Ground truth on the disc, Lobe chosen/ });
    editor.focus();
    fireEvent.keyDown(editor, { key: 'ArrowRight' });
    fireEvent.keyDown(editor, { key: 'ArrowUp' });
    fireEvent.keyDown(editor, { key: 'ArrowUp', shiftKey: true });
    expect(field('Lobe, Centre x, mm').value).toBe('-53');
    expect(field('Lobe, Centre y, mm').value).toBe('50');
  });

  it('chooses the next shape with space and removes it with Delete, which can be taken back', async () => {
    show();
    const user = userEvent.setup();
    const editor = screen.getByRole('group', { name: /^Ground truth on the disc/ });
    fireEvent.keyDown(editor, { key: ' ' });
    expect(screen.getByRole('group', { name: /Rod chosen/ })).toBeTruthy();
    fireEvent.keyDown(editor, { key: 'Delete' });
    expect(table().queryByRole('textbox', { name: 'Rod, Centre x, mm' })).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Undo' }));
    expect(field('Rod, Centre x, mm').value).toBe('60');
  });

  it('adds each kind of shape, with the fields that it has', async () => {
    show();
    const user = userEvent.setup();
    await user.click(screen.getByRole('button', { name: 'Annulus' }));
    expect(field('Annulus, Inner radius, mm').value).toBe('18');
    expect(table().queryByRole('textbox', { name: 'Annulus, Angle, °' })).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Polygon' }));
    expect(screen.getByText('4 corners')).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Add a corner' }));
    expect(screen.getByText('5 corners')).toBeTruthy();
  });

  it('steps a number in the table with the arrow keys', () => {
    show();
    const value = field('Lobe, Value, S/m');
    fireEvent.keyDown(value, { key: 'ArrowUp' });
    expect(field('Lobe, Value, S/m').value).toBe('2.05');
  });

  it('names what an expression does not know, with its place, while it is typed', async () => {
    show();
    const user = userEvent.setup();
    await user.click(screen.getByRole('button', { name: 'Expression' }));
    const text = screen.getByRole('textbox', { name: /Conductivity as a function/ });
    await user.clear(text);
    await user.type(text, '1 + r2');
    // mathjs is fetched when it is first needed.
    expect(await screen.findByText(/'r2' at character 5 is not known/, {}, { timeout: 15_000 })).toBeTruthy();
    expect(text.getAttribute('aria-invalid')).toBe('true');
  });
});
