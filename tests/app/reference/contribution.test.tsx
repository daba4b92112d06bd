import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen } from '@testing-library/react';
import { MemoryRouter, Route, Routes } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { listAxes, listChecks, listConventions, listMethods, listMetrics, listNoiseModels, listProblems, listRules, listStatistics } from '../../../api/services/catalogue/catalogue';
import { checkConfiguration } from '../../../api/services/solvers/check-configuration';
import { ToastProvider } from '../../../app/components/ui/toast';
import { catalogueQueryOptions } from '../../../app/features/reference/api/catalogue';
import { ParameterFields } from '../../../app/features/solvers/components/parameter-fields';
import { emptySolverForm, findMethod, methodDefaults, parameterPath, readConfiguration } from '../../../app/features/solvers/model/solver-form';
import ReferenceEntry from '../../../app/routes/reference-entry';
import Reference from '../../../app/routes/reference';
import { prepareRun, runLevel } from '../../../solvers/campaign/run';
import type * as methodRegistry from '../../../solvers/methods/registry';
import type * as metricRegistry from '../../../solvers/metrics/registry';
import { syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

// The one line that a contributor adds to each registry.
vi.mock('../../../solvers/methods/registry', async (original) => {
  const actual = await original<typeof methodRegistry>();
  const { scaledAdjointMethod } = await import('../../support/contributed/scaled-adjoint');
  const methods = [...actual.methods, scaledAdjointMethod];
  return { ...actual, methods, getMethod: (key: string) => methods.find((method) => method.key === key) };
});
vi.mock('../../../solvers/metrics/registry', async (original) => {
  const actual = await original<typeof metricRegistry>();
  const { meanError } = await import('../../support/contributed/mean-error');
  const metrics = [...actual.metrics, meanError];
  return {
    ...actual, metrics, getMetric: (key: string) => metrics.find((metric) => metric.key === key),
    evaluateMetrics: (input: Parameters<typeof actual.evaluateMetrics>[0]) => ({ ...actual.evaluateMetrics(input), [meanError.key]: meanError.evaluate(input) }),
  };
});

afterEach(cleanup);

describe('a method and a metric added in one file and one line each', () => {
  it('compute: a run of the method has the metric in every trial', () => {
    const problem = syntheticProblem();
    const prepared = prepareRun({ problem, method: 'scaled-adjoint', parameters: { gain: 1 }, rule: null });
    const [trial] = runLevel(prepared, syntheticTruth(problem).simulated, { benchSeed: 1, phantomHash: 'p', levelIndex: 0, level: 0.01, draws: [0] });
    expect(trial!.metrics['mean-shift-error']!.value).toBeGreaterThanOrEqual(0);
    expect(trial!.metrics['relative-l2-error']!.value).toBeLessThan(1);
  });

  it('stand in the API: the schema of the parameters, and a configuration that is checked by it', () => {
    const listed = listMethods().find((method) => method.key === 'scaled-adjoint')!;
    expect(listed.parameterSchema).toMatchObject({ type: 'object', properties: { gain: { type: 'number', minimum: 0.01, maximum: 10, default: 0.5 } } });
    expect(listMetrics().some((metric) => metric.key === 'mean-shift-error')).toBe(true);
    expect(checkConfiguration({ method: 'scaled-adjoint', parameters: {}, rule: null }).parameters).toEqual({ gain: 0.5 });
    expect(() => checkConfiguration({ method: 'scaled-adjoint', parameters: { gain: 20 }, rule: null })).toThrow();
  });

  it('stand in the form: a labelled field with its help and range, and what is typed becomes a configuration', () => {
    const method = findMethod('scaled-adjoint')!;
    const form = { ...emptySolverForm('g', ''), ...methodDefaults(method) };
    render(<ParameterFields fields={method.fields} pathOf={parameterPath} valueOf={(name) => form.values[name] ?? ''} onChange={() => undefined} issueAt={() => undefined} />);
    const field = screen.getByLabelText(/^Gain of the adjoint/);
    expect(field).toHaveProperty('value', '0.5');
    expect(document.getElementById(field.getAttribute('aria-describedby')!)?.textContent).toMatch(/0\.010* to 10\./);
    expect(readConfiguration(form).configuration).toEqual({ method: 'scaled-adjoint', parameters: { gain: 0.5 }, rule: null });
  });

  it('stand on the reference page, in the list and with a page of their own', async () => {
    const client = new QueryClient();
    client.setQueryData(catalogueQueryOptions().queryKey, {
      metrics: listMetrics(), methods: listMethods(), rules: listRules(), noise: listNoiseModels(), checks: listChecks(), statistics: listStatistics(), problems: listProblems(), axes: listAxes(), conventions: listConventions(),
    });
    const show = (address: string) =>
      render(
        <QueryClientProvider client={client}>
          <ToastProvider>
            <MemoryRouter initialEntries={[address]}>
              <Routes>
                <Route path="/reference" element={<Reference />} />
                <Route path="/reference/:kind/:key" element={<ReferenceEntry />} />
              </Routes>
            </MemoryRouter>
          </ToastProvider>
        </QueryClientProvider>,
      );
    show('/reference');
    expect(await screen.findByRole('link', { name: 'Scaled adjoint' })).toHaveProperty('href', expect.stringContaining('/reference/methods/scaled-adjoint'));
    expect(screen.getByRole('link', { name: 'Shift of the mean' })).toBeTruthy();
    cleanup();
    show('/reference/methods/scaled-adjoint');
    expect(await screen.findByRole('heading', { level: 1, name: 'Scaled adjoint' })).toBeTruthy();
    expect(screen.getByText('How far one step along the adjoint goes.')).toBeTruthy();
  });
});
