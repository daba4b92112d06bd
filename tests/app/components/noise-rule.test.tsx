import { act, cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, describe, expect, it } from 'vitest';
import { NoiseRule, type NoiseRuleProps } from '../../../app/components/noise-rule/noise-rule';
import { fromShare, nearestLevel, ruleScale, snap, stepLevel, toShare } from '../../../app/components/noise-rule/scale';
import { NoiseProvider, parseNoise, useNoise, useParam } from '../../../app/components/noise-rule/use-noise';

afterEach(cleanup);

function Reader() {
  return <output data-testid="noise">{useNoise().noise}</output>;
}
function Two() {
  const [, setFocus] = useParam('focus');
  const [, setMetric] = useParam('metric');
  return <button type="button" onClick={() => { setFocus('tv'); setMetric('sup-error'); }}>both</button>;
}
function show(address: string, props: NoiseRuleProps = {}) {
  const router = createMemoryRouter([{ path: '/', element: <NoiseProvider><NoiseRule {...props} /><Reader /></NoiseProvider> }], { initialEntries: [address] });
  render(<RouterProvider router={router} />);
  return router;
}
const noise = (): number => Number(screen.getByTestId('noise').textContent);
/** Longer than the rule waits before it writes the address. */
const rest = () => act(() => new Promise((done) => setTimeout(done, 220)));

describe('noise rule', () => {
  it('is a slider that says level, decibel and whether the level was measured', () => {
    show('/?noise=0.01');
    const slider = screen.getByRole('slider', { name: 'Relative noise level' });
    expect(slider.getAttribute('aria-valuetext')).toMatch(/^1\s%.* relative noise, 40\.0\sdB, measured ladder level$/);
  });

  it('steps along the ladder with the arrow keys, and to its ends with Home and End', async () => {
    const router = show('/?noise=0.01');
    const user = userEvent.setup();
    screen.getByRole('slider').focus();
    await user.keyboard('{ArrowRight}');
    expect(noise()).toBe(0.02);
    await user.keyboard('{ArrowUp}');
    expect(noise()).toBe(0.05);
    await user.keyboard('{ArrowLeft}{ArrowDown}{ArrowLeft}');
    expect(noise()).toBe(0.005);
    await user.keyboard('{End}{ArrowRight}');
    expect(noise()).toBe(0.3);
    await user.keyboard('{Home}{ArrowLeft}');
    expect(noise()).toBe(1e-4);
    await rest();
    expect(new URLSearchParams(router.state.location.search).get('noise')).toBe('0.0001');
  });

  it('keeps the other parameters of the address', async () => {
    const router = show('/?metric=sup-error&noise=0.01&focus=tv');
    await userEvent.setup().click(screen.getByRole('button', { name: 'Next ladder level' }));
    await rest();
    expect(router.state.location.search).toBe('?metric=sup-error&noise=0.02&focus=tv');
  });

  it('says interpolated between levels, and steps to the neighbours from there', async () => {
    show('/?noise=0.015');
    expect(screen.getByText(/between levels, interpolated/)).toBeTruthy();
    await userEvent.setup().click(screen.getByRole('button', { name: 'Previous ladder level' }));
    expect(noise()).toBe(0.01);
  });

  it('names the ground below the model-error floor', () => {
    show('/?noise=0.0002', { floor: 5e-4 });
    expect(screen.getByRole('slider').getAttribute('aria-valuetext')).toMatch(/below the model-error floor$/);
  });

  it('loses no parameter when two change at once', async () => {
    const router = createMemoryRouter([{ path: '/', element: <NoiseProvider><Two /></NoiseProvider> }], { initialEntries: ['/?noise=0.02'] });
    render(<RouterProvider router={router} />);
    await userEvent.setup().click(screen.getByRole('button'));
    expect(router.state.location.search).toBe('?noise=0.02&focus=tv&metric=sup-error');
  });

  it('follows the address when it changes from outside', async () => {
    const router = show('/?noise=0.01');
    await act(() => router.navigate('/?noise=0.1'));
    expect(noise()).toBe(0.1);
  });
});

describe('scale of the rule', () => {
  const scale = ruleScale();
  it('maps ends to 0 and 1 and back', () => {
    expect(toShare(scale, 1e-4)).toBe(0);
    expect(toShare(scale, 0.3)).toBeCloseTo(1, 12); // rounding of two logarithms
    expect(fromShare(scale, toShare(scale, 0.007))).toBeCloseTo(0.007, 12);
  });
  it('snaps within 0.03 decades only', () => {
    expect(snap(scale, 0.01 * 10 ** 0.029)).toBe(0.01);
    expect(snap(scale, 0.01 * 10 ** 0.031)).toBe(0.01 * 10 ** 0.031);
  });
  it('holds at the ends', () => {
    expect(stepLevel(scale, 0.3, 1)).toBe(0.3);
    expect(stepLevel(scale, 1e-4, -1)).toBe(1e-4);
    expect(nearestLevel(scale, 0.0141)).toMatchObject({ index: 5, on: false });
  });
  it('works for a ladder of one level', () => {
    expect(ruleScale([0.01])).toMatchObject({ min: 0.001, max: 0.1 });
  });
  it.each([['0.01', 0.01], ['', 0.01], [null, 0.01], ['abc', 0.01], ['-1', 0.01], ['20', 0.01], ['2', 2], ['0.3', 0.3]])('reads %s from an address as %f', (text, value) => {
    expect(parseNoise(text)).toBe(value);
  });
});
