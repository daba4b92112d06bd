import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { afterEach, describe, expect, it } from 'vitest';
import { ParameterFields } from '../../../app/features/solvers/components/parameter-fields';
import { emptySolverForm, fieldFault, findMethod, formFromConfiguration, methodDefaults, parameterPath, readConfiguration, readSolverForm, ruleFields } from '../../../app/features/solvers/model/solver-form';
import { ruleWords } from '../../../app/features/solvers/model/parameter-facts';
import { configurationSchema } from '../../../shared/contracts/solvers';
import { methods } from '../../../solvers/methods/registry';

afterEach(cleanup);

describe('the form of every registered method', () => {
  it.each(methods.map((m) => [m.key, m] as const))('%s: its defaults make a configuration that it accepts', (_, method) => {
    const { configuration, issues } = readConfiguration({ ...emptySolverForm('g', ''), ...methodDefaults(method) });
    expect(issues).toEqual([]);
    expect(configurationSchema.parse(configuration)).toEqual(configuration);
    expect(method.parameters.safeParse(configuration?.parameters).success).toBe(true);
    expect(configuration?.rule).toEqual(method.defaultRule);
  });

  it.each(methods.flatMap((m) => m.capabilities.rules.map((rule) => [`${m.key} with ${rule}`, m, rule] as const)))('%s: the settings of the rule are read', (_, method, rule) => {
    const { configuration, issues } = readConfiguration({ ...emptySolverForm('g', ''), ...methodDefaults(method), rule });
    expect(issues).toEqual([]);
    expect(Object.keys(configuration!.rule!).sort()).toEqual(['key', ...ruleFields(method, rule).map((f) => f.name)].sort());
  });

  it.each(methods.filter((m) => m.fields.length).map((m) => [m.key, m] as const))('%s: one labelled control for each parameter, with unit and help', (_, method) => {
    render(<ParameterFields fields={method.fields} pathOf={parameterPath} valueOf={(name) => String(method.fields.find((f) => f.name === name)?.default ?? '')} onChange={() => undefined} issueAt={() => undefined} />);
    for (const field of method.fields) {
      const control = screen.getByLabelText(new RegExp(`^${field.label}`));
      expect(control.tagName).toBe(field.kind === 'choice' ? 'SELECT' : 'INPUT');
      expect(document.getElementById(control.getAttribute('aria-describedby')!)?.textContent).toContain(field.help);
    }
    cleanup();
  });
});

describe('faults in the solver form', () => {
  const field = { name: 'x', label: 'X', unit: 'S/m', help: '', kind: 'number', default: 0.5, minimum: 0.1, maximum: 2 } as const;
  it('name the limit and a value that works', () => {
    expect(fieldFault(field, '3')).toBe('At most 2 S/m. 0.5 works.');
    expect(fieldFault(field, '0')).toBe('At least 0.1 S/m. 0.5 works.');
    expect(fieldFault(field, 'much')).toBe('Write a number, for example 0.5.');
    expect(fieldFault({ ...field, kind: 'integer' }, '1.4')).toBe('A whole number. 1 works.');
    expect(fieldFault(field, '1,5')).toBeNull();
  });

  it('are shown at the field, by the path of the request', async () => {
    const method = findMethod('tikhonov')!;
    const number = method.fields.find((f) => f.kind === 'number')!;
    function Harness() {
      const [form, setForm] = useState({ ...emptySolverForm('g', ''), ...methodDefaults(method) });
      const { issues } = readConfiguration(form);
      return <ParameterFields fields={method.fields} pathOf={parameterPath} valueOf={(n) => form.values[n] ?? ''} onChange={(n, v) => setForm({ ...form, values: { ...form.values, [n]: v } })} issueAt={(path) => issues.find((i) => i.path === path)?.message} />;
    }
    render(<Harness />);
    const user = userEvent.setup();
    const input = screen.getByLabelText(new RegExp(`^${number.label}`));
    await user.clear(input);
    await user.type(input, '5e9');
    expect(input.getAttribute('aria-invalid')).toBe('true');
    expect(document.getElementById(input.getAttribute('aria-describedby')!)?.textContent).toMatch(/^At most .* works\.$/);
  });

  it('ask for a name, a group, or what changed', () => {
    const paths = (mode: 'new' | 'next') => readSolverForm(emptySolverForm('', ''), mode).issues.map((i) => i.path);
    expect(paths('new')).toEqual(['group', 'name']);
    expect(paths('next')).toEqual(['whatChanged']);
  });
});

describe('a stored configuration', () => {
  it('comes back as the form it was made with', () => {
    const base = emptySolverForm('g', 'bench');
    const stored = { method: 'tikhonov', parameters: { penalty: 'identity', smallestAlpha: 1e-4 }, rule: { key: 'discrepancy' as const, safetyFactor: 1.2 } };
    const { configuration } = readConfiguration(formFromConfiguration(base, stored));
    expect(configuration).toEqual(stored);
    expect(ruleWords(stored.rule)).toBe('discrepancy principle, factor 1.20');
  });
});
