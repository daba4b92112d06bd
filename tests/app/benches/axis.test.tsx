import { cleanup, render, screen } from '@testing-library/react';
import { MemoryRouter } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { AxisContext } from '../../../app/components/noise-rule/axis-context';
import { NoiseRule } from '../../../app/components/noise-rule/noise-rule';
import { NoiseProvider } from '../../../app/components/noise-rule/use-noise';
import { axesFor, emptyBenchForm, offeredLevels, parseLadder, toBenchRequest, noiseModelsFor } from '../../../app/features/benches/model/bench-form';
import { ErrorLevels, ErrorTable, type TableRun } from '../../../app/features/runs/components/error-table';
import { axisFact, axisView } from '../../../app/lib/axis-words';
import { SmallStability, StabilityChart } from '../../../app/components/charts/stability-chart';

afterEach(cleanup);
const contrast = { key: 'contrast', noise: 0.005 } as const;
const missing = { key: 'missing-channels', noise: 0.01 } as const;

describe('words of an axis', () => {
  it('print a level in its unit, and the fixed noise', () => {
    expect(axisView().at(0.01)).toBe('1\u202f% noise');
    expect(axisView().fixed).toBeNull();
    const view = axisView(contrast);
    expect([view.head, view.format(1.5), view.at(0.25), view.fixed]).toEqual(['Contrast', '1.5', 'contrast 0.25', '0.5\u202f% noise throughout']);
    expect([view.noiseAt(3), axisView().noiseAt(0.1)]).toEqual([0.005, 0.1]);
    expect(axisView(missing).at(0.2)).toBe('20\u202f% missing channels');
    expect(axisFact(missing)).toBe('Missing channels, at 1\u202f% noise');
  });
});

describe('bench form', () => {
  const form = { ...emptyBenchForm('tarn', 7), title: 'How strong', question: 'Up to which contrast is one step enough?', phantoms: ['lobes@1'] };
  it('offers the axes that serve every family chosen, with their levels as they are typed', () => {
    expect(axesFor([])).toContain('missing-angles');
    expect(axesFor(['x-ray'])).toEqual(['noise', 'contrast', 'missing-angles', 'missing-channels']);
    expect(axesFor(['electrical-impedance'])).toContain('electrode-displacement');
    expect(offeredLevels('contrast')).toBe('0.1, 0.25, 0.5, 1, 1.5, 2, 3');
    expect(offeredLevels('electrode-displacement')).toBe('0.2, 0.5, 1, 2, 5, 10');
    expect(parseLadder('5, 10', 'missing-channels')).toEqual([0.05, 0.1]);
  });
  it('sends the axis with its fixed noise, factors plain and shares as fractions', () => {
    expect(toBenchRequest({ ...form, axis: 'contrast', ladder: '0.5, 1, 2', axisNoise: '0.5' }).request).toMatchObject({ axis: { key: 'contrast', noise: 0.005 }, ladder: [0.5, 1, 2] });
    expect(toBenchRequest(form).request?.axis).toEqual({ key: 'noise' });
  });
  it('names the fault at its field', () => {
    const wrong = toBenchRequest({ ...form, axis: 'contrast', ladder: '0.5, 20', axisNoise: '' }).errors;
    expect([...(wrong?.keys() ?? [])].sort()).toEqual(['axisNoise', 'ladder']);
    expect(wrong?.get('ladder')).toContain('from 0.01 to 10');
    expect(toBenchRequest({ ...form, axis: 'missing-channels', ladder: '95' }).errors?.get('ladder')).toContain('in per cent');
  });
});

describe('figures over another axis', () => {
  const row = (level: number) => ({ level, count: 2, median: 0.2, mean: 0.2, sd: 0.01, p05: 0.19, p95: 0.21, worst: 0.21, medianDraw: 0, worstDraw: 1, draws: [0.19, 0.21], reason: null });
  const run: TableRun = { glyph: 0, ladder: [0.5, 2], modelErrorFloor: 1, table: { 'relative-l2-error': [row(0.5), row(2)] }, trivial: { 'relative-l2-error': 1 }, moments: [null, null] };
  const props = { run, shown: new Set<string>(), current: 0, onLevel: vi.fn() };
  it('the error table names the axis, prints its levels and marks no floor', () => {
    const { container } = render(<AxisContext value={axisView(contrast)}><ErrorTable {...props} /><ErrorLevels {...props} /></AxisContext>);
    expect(screen.getByRole('columnheader', { name: 'Contrast' })).toBeTruthy();
    expect(screen.getByRole('button', { name: '0.5' })).toBeTruthy();
    expect(container.querySelector('.bf')).toBeNull();
    expect(container.textContent).not.toContain('%\u202f');
  });
  it('charts name the axis under their levels', () => {
    const curves = [{ id: 'a', glyph: 0, name: 'A', points: run.table['relative-l2-error']!.map((r) => ({ level: r.level, median: r.median, low: r.p05, high: r.p95 })) }];
    const chart = { label: 'Error', curves, levels: run.ladder, noise: 1, floor: 1 };
    const { container } = render(<AxisContext value={axisView(contrast)}><StabilityChart {...chart} /><SmallStability {...chart} /></AxisContext>);
    const words = [...container.querySelectorAll('svg text')].map((text) => text.textContent);
    expect(words).toEqual(expect.arrayContaining(['contrast', '0.5', '2']));
    expect(words.join(' ')).not.toContain('floor');
    expect(words.join(' ')).not.toContain('%');
  });
  it('the rule reads the axis and says the noise once', () => {
    render(<MemoryRouter initialEntries={['/?noise=2']}><NoiseProvider><AxisContext value={axisView(contrast)}><NoiseRule levels={[0.25, 0.5, 1, 2]} draws={6} floor={0.5} /></AxisContext></NoiseProvider></MemoryRouter>);
    const rule = screen.getByRole('slider', { name: 'Contrast' });
    expect(rule.getAttribute('aria-valuetext')).toBe('contrast 2, measured ladder level');
    expect(rule.getAttribute('aria-valuemax')).toBe('2');
    expect(screen.getAllByText(/0.5.% noise throughout/)).toHaveLength(1);
    expect(document.body.textContent).not.toContain('dB');
  });
});

describe('the kinds of noise that a bench offers', () => {
  it('are those that occur in the family of every chosen phantom: photon counts in X-ray tomography only', () => {
    expect(noiseModelsFor(['x-ray']).map((model) => model.key)).toContain('poisson');
    expect(noiseModelsFor(['electrical-impedance']).map((model) => model.key)).toEqual(['gaussian', 'gaussian-expected', 'gain', 'outliers']);
    expect(noiseModelsFor(['electrical-impedance', 'x-ray']).map((model) => model.key)).not.toContain('poisson');
    expect(toBenchRequest({ ...emptyBenchForm('group', 1), noiseModel: 'gain', title: 'Gain noise', question: 'Which one stands it?', phantoms: ['two-lobes@1'] }).request).toMatchObject({ noiseModel: 'gain' });
  });
});
