import { describe, expect, it } from 'vitest';
import { familyKeys, type FamilyKey } from '../../shared/domain/families';
import { phantomDefinitionSchema, type PhantomDefinitionInput } from '../../shared/domain/phantom-definition';
import { prepareRun, runLevel } from '../../solvers/campaign/run';
import { methods } from '../../solvers/methods/registry';
import { createProblem, describeProblem, problemFacts, simulate } from '../../solvers/problems/registry';
import { stabilitySheet } from '../../solvers/statistics/stability-sheet';
import { unitGeometry } from '../support/impedance-case';

/** A small phantom of each family; `shapes` empty makes a truth that is all background. */
const inputs: Record<FamilyKey, (empty: boolean) => unknown> = {
  'electrical-impedance': (empty) => ({
    family: 'electrical-impedance', dataKind: 'difference', noiseReference: 'difference', truth: { kind: 'shapes', background: 1, shapes: empty ? [] : [disc(2)] }, geometry: unitGeometry({ electrodes: 8 }),
  }),
  'x-ray': (empty) => ({
    family: 'x-ray', truth: { kind: 'shapes', background: 0, shapes: empty ? [] : [disc(1)] },
    geometry: { body: { kind: 'disc', radius: 1 }, beam: 'parallel', views: 8, arcDeg: 180, detectors: 12, detectorSpacing: 2 / 12, cells: 8 },
  }),
  'integral-equation': (empty) => ({ family: 'integral-equation', truth: empty ? { kind: 'expression', background: 0, expression: '0' } : { kind: 'standard' }, geometry: { equation: 'shaw', cells: 16, points: 16 } }),
  deblurring: (empty) => ({
    family: 'deblurring', truth: { kind: 'shapes', background: 0, shapes: empty ? [] : [disc(1)] },
    geometry: { body: { kind: 'rectangle', width: 2, height: 2 }, pointSpread: 'gaussian', spread: 0.15, cells: 10, edge: 'zero' },
  }),
};
const disc = (value: number) => ({ kind: 'ellipse', label: 'disc', value, x: 0.2, y: 0.1, semiAxisA: 0.3, semiAxisB: 0.3 });
const define = (family: FamilyKey, empty = false) => phantomDefinitionSchema.parse(inputs[family](empty) as PhantomDefinitionInput);

describe.each(familyKeys)('%s', (family) => {
  const definition = define(family);
  const problem = createProblem(describeProblem(definition));
  const simulated = simulate(definition, undefined, problem);
  const serving = methods.filter((method) => method.capabilities.families.includes(family) && method.capabilities.dataKinds.includes(definition.dataKind) && !method.unfit?.(problem));

  it('refuses a truth that is all background where noise relative to its data means nothing, in words', () => {
    expect(() => simulate(define(family, true), undefined, problem)).toThrow(/not defined|zero|nothing|equal/i);
  });
  it.each(serving.map((method) => [method.key, method] as const))('%s: data with NaN are refused with their place, a zero signal gives finite figures', (_, method) => {
    const prepared = prepareRun({ problem, method: method.key, parameters: {}, rule: null });
    expect(() => prepared.reconstructor.reconstruct(simulated.clean.map((v, i) => (i === 2 ? NaN : v)), { norm: 1e-3, level: 0.01 })).toThrow(/index 2/);
    const still = { ...simulated, clean: problem.evaluate(problem.background()), truthImage: simulated.backgroundImage, noiseScale: simulated.noiseScale };
    const [trial] = runLevel(prepared, still, { benchSeed: 1, phantomHash: 'p', levelIndex: 0, level: 0.01, draws: [0] });
    expect(trial.image.every(Number.isFinite)).toBe(true);
    for (const [key, { value, reason }] of Object.entries(trial.metrics)) {
      if (value === null) expect(reason, key).toMatch(/\.$/);
      else expect(Number.isFinite(value), key).toBe(true);
    }
  });
  it('refuses methods of other families and unfit sizes with the reason', () => {
    for (const method of methods.filter((own) => !own.capabilities.families.includes(family)))
      expect(() => prepareRun({ problem, method: method.key, parameters: {}, rule: null })).toThrow(/does not serve/);
    const large = { ...problemFacts(definition), dataSize: 50_000, unknowns: 50_000 };
    for (const method of methods) {
      const reason = method.unfit?.(large);
      if (reason) expect(reason.length).toBeGreaterThan(20);
    }
  });
});

describe('one of something', () => {
  it('electrode: the message at the field says how many there must be', () => {
    const read = phantomDefinitionSchema.safeParse({ ...(inputs['electrical-impedance'](false) as object), geometry: { ...unitGeometry(), electrodes: 1 } });
    expect(read.error?.issues.map(({ path, message }) => `${path.join('.')}: ${message}`).join(' ')).toMatch(/geometry\.electrodes: At least 8 electrodes/);
  });
  it('level: the sheet says that there is nothing to fit', () => {
    const sheet = stabilitySheet({ ladder: [0.01], draws: [[0.3, 0.4, 0.5]], trivial: 1, seed: 'one' });
    expect(sheet).toMatchObject({ model: 'none', exponent: null, breakdown: null });
    expect(sheet.reason).toMatch(/\.$/);
    expect(JSON.stringify(sheet)).not.toMatch(/NaN|Infinity/);
  });
  it('draw: every figure of the sheet is a number or nothing', () => {
    const sheet = stabilitySheet({ ladder: [0.001, 0.01, 0.1, 0.3], draws: [[0.3], [0.4], [0.7], [1.2]], trivial: 1, seed: 'one' });
    expect(JSON.stringify(sheet)).not.toMatch(/NaN|Infinity/);
  });
});
