import { describe, expect, it } from 'vitest';
import { recomputeDraw, prepareRun, runLevel } from '../../solvers/campaign/run';
import { runHash } from '../../solvers/campaign/trial';
import type { SimulatedPhantom } from '../../solvers/campaign/trial';
import type { ForwardProblem, Method, RuleSetting } from '../../solvers/core/types';
import type { EitInversion } from '../../solvers/problems/electrical-impedance/inversion-problem';
import { methods } from '../../solvers/methods/registry';
import { getParameterRule, parameterRules } from '../../solvers/parameter-choice/registry';
import { electrodeProblem, electrodeTruth } from '../support/electrode-problem';
import { rayProblem, rayTruth } from '../support/ray-problem';
import { syntheticProblem, syntheticTruth } from '../support/synthetic-problem';

const linear = syntheticProblem({ side: 10, data: 20 });
const bent = syntheticProblem({ side: 10, data: 20, curvature: 0.3 });
const absolute = syntheticProblem({ side: 10, data: 20, curvature: 0.3, dataKind: 'absolute' });
/** More data than unknowns. */
const tall = syntheticProblem({ side: 4, data: 30 });
const single = syntheticProblem({ side: 1, data: 1 });
/** Methods that read the electrodes of a frame do not serve the synthetic problems. */
const electrodes = electrodeProblem();
const absoluteElectrodes = electrodeProblem('absolute');
const readsElectrodes = (method: Method): boolean => method.unfit?.(linear) != null;
/** Nor do those that read the views of X-ray data. */
const parallelRays = rayProblem('parallel');
const fanRays = rayProblem('fan');
const readsRays = (method: Method): boolean => !method.capabilities.families.includes('electrical-impedance');
function problemsOf(method: Method): Record<string, ForwardProblem> {
  return readsRays(method) ? { parallelRays, fanRays } : readsElectrodes(method) ? { electrodes, absoluteElectrodes } : { linear, bent, absolute, tall };
}
function truthOf(problem: ForwardProblem, contrast?: number): SimulatedPhantom {
  if (problem === parallelRays || problem === fanRays) return rayTruth(problem, contrast).simulated;
  return problem === electrodes || problem === absoluteElectrodes ? electrodeTruth(problem as EitInversion, contrast).simulated : syntheticTruth(problem, contrast).simulated;
}

function rulesOf(method: Method): (RuleSetting | null)[] {
  if (method.capabilities.rules.length === 0) return [null];
  return method.capabilities.rules.map((key) => (key === 'fixed' ? { key, value: Number(method.fixedValue!.default) } : getParameterRule(key).defaultSetting));
}
const cases = methods.flatMap((method) => rulesOf(method).map((rule) => [`${method.key}, ${rule?.key ?? 'no rule'}`, method, rule] as const));

describe.each(cases)('%s', (_, method, rule) => {
  it.each(Object.entries(problemsOf(method)))('on the %s problem: shapes, determinism, input untouched, batch equals single, replay from JSON', (__, problem) => {
    const simulated = truthOf(problem, 0.5);
    const configuration = JSON.parse(JSON.stringify({ method: method.key, parameters: {}, rule }));
    const seed = { benchSeed: 11, phantomHash: 'phantom', levelIndex: 2, level: 0.01 };
    const prepared = prepareRun({ problem, ...configuration });
    const cleanBefore = Float64Array.from(simulated.clean);
    const trials = runLevel(prepared, simulated, { ...seed, draws: [0, 1, 2] });
    expect(simulated.clean).toEqual(cleanBefore);
    expect(trials).toHaveLength(3);
    for (const trial of trials) {
      expect(trial.image).toHaveLength(problem.grid.inside.length);
      expect(trial.image.every(Number.isFinite)).toBe(true);
      expect(trial.metrics['relative-l2-error'].value).toBeGreaterThanOrEqual(0);
      expect(trial.iterations).toBeGreaterThanOrEqual(0);
      // Another order, alone, and from a fresh preparation: the same bits.
      expect(recomputeDraw(prepared, simulated, { ...seed, drawIndex: trial.drawIndex }).imageHash).toBe(trial.imageHash);
    }
    const again = prepareRun({ problem: problem === linear ? syntheticProblem({ side: 10, data: 20 }) : problem, ...configuration });
    expect(runHash(runLevel(again, simulated, { ...seed, draws: [2, 0, 1] }).map((trial) => trial.imageHash))).toBe(runHash([2, 0, 1].map((draw) => trials[draw].imageHash)));
  });

  it('reads its data without changing or keeping them, and gives fresh arrays', () => {
    const [problem] = Object.values(problemsOf(method));
    const reconstructor = method.prepare(problem, {}, rule);
    const simulated = truthOf(problem);
    const data = Float64Array.from(simulated.clean);
    const noise = { norm: 0.01 * simulated.noiseScale, level: 0.01 };
    const first = reconstructor.reconstruct(data, noise);
    expect(data).toEqual(simulated.clean);
    const kept = Float64Array.from(first.x);
    data.fill(0);
    reconstructor.reconstruct(data, noise).x.fill(7);
    expect(first.x).toEqual(kept);
    expect(reconstructor.reconstruct(simulated.clean, noise).x).toEqual(kept);
  });

  it('gives the background for data that equal the background\'s', () => {
    for (const problem of Object.values(problemsOf(method)).filter((one) => one !== bent && one !== tall)) {
      const data = problem.evaluate(problem.background());
      const { x, residualNorm } = method.prepare(problem, {}, rule).reconstruct(data, { norm: 0, level: 0 });
      expect(x).toEqual(problem.background());
      expect(residualNorm).toBe(0);
    }
  });

  it('refuses data of the wrong length, data that are not finite, and a noise that is no norm', () => {
    const [problem] = Object.values(problemsOf(method));
    const m = problem.dataSize;
    const reconstructor = method.prepare(problem, {}, rule);
    const noise = { norm: 0.1, level: 0.1 };
    expect(() => reconstructor.reconstruct(new Float64Array(m - 1), noise)).toThrow(new RegExp(`${m - 1} values, expected ${m}`));
    for (const bad of [NaN, Infinity]) expect(() => reconstructor.reconstruct(new Float64Array(m).fill(1).fill(bad, 4, 5), noise)).toThrow(/not finite at index 4/);
    expect(() => reconstructor.reconstruct(new Float64Array(m), { norm: NaN, level: 0.1 })).toThrow(RangeError);
    expect(() => reconstructor.reconstructMany([new Float64Array(m)], [])).toThrow(RangeError);
  });

  it('works for one datum and one unknown, or says what it needs', () => {
    if (readsElectrodes(method) || readsRays(method)) {
      expect(() => method.prepare(single, {}, rule)).toThrow(/needs|have/);
      return;
    }
    const { x } = method.prepare(single, {}, rule).reconstruct(Float64Array.of(0.5), { norm: 0.05, level: 0.1 });
    expect(x).toHaveLength(1);
    expect(Number.isFinite(x[0])).toBe(true);
  });

  it('reports the residual of the model it uses', () => {
    const problem = readsRays(method) ? fanRays : readsElectrodes(method) ? electrodes : bent;
    const simulated = truthOf(problem, 0.5);
    const data = simulated.clean;
    const { x, residualNorm } = method.prepare(problem, {}, rule).reconstruct(data, { norm: 0.02 * simulated.noiseScale, level: 0.02 });
    let model: Float64Array;
    if (method.capabilities.nonlinear || problem.linear) model = problem.evaluate(x);
    else {
      model = new Float64Array(problem.dataSize);
      problem.linearise(problem.background()).apply(x.map((value, j) => value - problem.background()[j]), model);
    }
    const expected = Math.sqrt(data.reduce((sum, value, i) => sum + (value - model[i]) ** 2, 0));
    // Computed in coefficients: rounding of the data's norm.
    expect(Math.abs(residualNorm - expected)).toBeLessThan(1e-10 * simulated.noiseScale);
  });

  it('stops when asked to', () => {
    const [problem] = Object.values(problemsOf(method));
    const reconstructor = method.prepare(problem, {}, rule);
    const simulated = truthOf(problem);
    const noise = { norm: 1e-6, level: 1e-6 };
    let asked = 0;
    const done = reconstructor.reconstructMany([simulated.clean, simulated.clean, simulated.clean], [noise, noise, noise], { aborted: () => ++asked > 1 });
    expect(done.length).toBeLessThan(3);
  });
});

describe.each(methods.map((method) => [method.key, method] as const))('%s', (_, method) => {
  it('describes itself', () => {
    expect(method.key).toMatch(/^[a-z0-9-]+$/);
    for (const text of [method.name, method.summary, method.formula]) expect(text.length).toBeGreaterThan(5);
    expect(method.sources.length).toBeGreaterThan(0);
    expect(method.capabilities.rules.length === 0).toBe(method.fixedValue === null);
    expect(method.capabilities.rules.length === 0).toBe(method.defaultRule === null);
  });
  it('has fields that agree with its schema: defaults, ends and what lies beyond', () => {
    const defaults = method.parameters.parse({});
    expect(defaults).toEqual(Object.fromEntries(method.fields.map((field) => [field.name, field.default])));
    for (const field of method.fields) {
      expect(field.help.length).toBeGreaterThan(5);
      const accepts = (value: unknown): boolean => method.parameters.safeParse({ ...defaults, [field.name]: value }).success;
      if (field.kind === 'choice') {
        for (const choice of field.choices!) expect(accepts(choice.value)).toBe(true);
        expect(accepts('none of these')).toBe(false);
      } else if (field.kind === 'text') {
        expect(['', '   ', 'system(1)', 'x'.repeat(61), 3, null].map(accepts)).toEqual(new Array(6).fill(false));
      } else {
        expect([field.minimum, field.maximum].map(accepts)).toEqual([true, true]);
        expect([field.minimum! - 1, field.maximum! + 1, NaN, Infinity, 'text', null].map(accepts)).toEqual(new Array(6).fill(false));
        if (field.kind === 'integer') expect(accepts(field.minimum! + 0.5)).toBe(false);
      }
    }
  });
  it('refuses unknown parameters, values out of range and rules that it does not accept', () => {
    const rule = rulesOf(method)[0];
    expect(() => method.prepare(linear, { nonsense: 1 }, rule)).toThrow(RangeError);
    for (const field of method.fields) expect(() => method.prepare(linear, { [field.name]: (field.minimum ?? 0) - 5 }, rule)).toThrow(new RegExp(field.name));
    for (const { key, defaultSetting } of parameterRules) if (!method.capabilities.rules.includes(key)) expect(() => method.prepare(linear, {}, defaultSetting)).toThrow(RangeError);
    if (method.capabilities.rules.includes('discrepancy')) expect(() => method.prepare(linear, {}, { key: 'discrepancy', safetyFactor: 0.5 })).toThrow(/safety factor/);
    if (method.fixedValue) for (const value of [-1, 0, NaN, 1e9]) expect(() => method.prepare(linear, {}, { key: 'fixed', value })).toThrow(RangeError);
  });
});
