import { describe, expect, it } from 'vitest';
import { phantomDefinitionSchema, type PhantomDefinition, type PhantomDefinitionInput } from '../../../shared/domain/phantom-definition';
import { norm2 } from '../../../solvers/core/vector';
import { createProblem, describeProblem, simulate } from '../../../solvers/problems/registry';
import { TruthError } from '../../../solvers/truth/truth-error';

type Change = (input: Record<string, unknown>) => void;
const definition = (change: Change = () => undefined): PhantomDefinition => {
  const input: Record<string, unknown> = {
    family: 'electrical-impedance',
    truth: { kind: 'shapes', background: 0.2, shapes: [{ kind: 'ellipse', label: 'rod', value: 0.6, x: 0.05, y: 0.02, semiAxisA: 0.03, semiAxisB: 0.02 }] },
    geometry: { body: { kind: 'disc', radius: 0.14 }, electrodes: 16, electrodeCoverage: 0.5, contactImpedance: 2e-4, pattern: 'adjacent', current: 0.005, measurement: 'adjacent-undriven' },
    dataKind: 'difference',
    noiseReference: 'difference',
  } satisfies PhantomDefinitionInput;
  change(input);
  return phantomDefinitionSchema.parse(input);
};
const outside: Change = (input) => {
  input.truth = { kind: 'shapes', background: 0.2, shapes: [{ kind: 'ellipse', label: 'far', value: 0.6, x: 0.2, y: 0.2, semiAxisA: 0.03, semiAxisB: 0.02 }] };
};

describe('simulated phantom', () => {
  it('fits the problem that inverts it, with a floor under 0.3 % of the difference signal', () => {
    const d = definition();
    const problem = createProblem(describeProblem(d));
    const simulated = simulate(d, undefined, problem);
    expect(simulated.clean.length).toBe(problem.dataSize);
    expect(simulated.truthImage.length).toBe(problem.grid.inside.length);
    expect(simulated.clean.every((v, i) => v === simulated.frame[i] - simulated.reference[i])).toBe(true);
    expect(simulated.noiseScale).toBe(norm2(simulated.clean));
    expect(simulated.targets).toEqual([{ label: 'rod', x: 0.05, y: 0.02, area: Math.PI * 0.03 * 0.02, contrast: 0.6 - 0.2 }]);
    // Design aim: below 0.3 % of what noise levels are relative to; on the voltages below 0.05 %.
    expect(simulated.modelErrorFloor).toBeLessThan(3e-3);
    expect(simulated.backgroundGap).toBeLessThan(5e-4);
    expect(simulated.modelErrorFloor).toBeCloseTo((simulated.backgroundGap * norm2(simulated.reference)) / simulated.noiseScale, 12);
    // The truth on cells of 0.07 R is a model of its data, though not an exact one.
    expect(simulated.projectionGap).toBeGreaterThan(simulated.backgroundGap);
    expect(simulated.projectionGap).toBeLessThan(0.15);
    // Same bits without the problem handed in.
    expect(simulate(d).clean).toEqual(simulated.clean);
  });

  it('absolute data are the voltages, and noise is relative to them', () => {
    const simulated = simulate(definition((input) => Object.assign(input, { dataKind: 'absolute', noiseReference: 'voltages' })));
    expect(simulated.clean).toEqual(simulated.frame);
    expect(simulated.noiseScale).toBe(norm2(simulated.frame));
    expect(simulated.modelErrorFloor).toBeLessThan(5e-4);
  });

  it('32 electrodes with trigonometric patterns: floor under 0.05 % of the voltages', () => {
    const simulated = simulate(
      definition((input) => {
        input.geometry = { ...(input.geometry as object), electrodes: 32, pattern: 'trigonometric', measurement: 'electrode-voltages' };
        input.noiseReference = 'voltages';
      }),
    );
    expect(simulated.clean.length).toBe(31 * 32);
    expect(simulated.modelErrorFloor).toBeLessThan(5e-4);
  });

  it('names the field at fault', () => {
    const fault = (change: Change, array?: Float64Array): TruthError => {
      try {
        simulate(definition(change), array);
      } catch (error) {
        if (error instanceof TruthError) return error;
        throw error;
      }
      throw new Error('nothing was refused');
    };
    expect(fault(outside).path).toEqual(['truth', 'shapes', 0]);
    expect(fault(outside).message).toMatch(/far.*outside the body of radius 0.14 m/);
    const expression = fault((input) => (input.truth = { kind: 'expression', background: 0.2, expression: '0.2 - 5 x' }));
    expect(expression.path).toEqual(['truth', 'expression']);
    expect(expression.message).toMatch(/S\/m at x = /);
    expect(fault((input) => (input.truth = { kind: 'expression', background: 0.2, expression: 'alert(1)' })).message).toMatch(/'alert' at character 1/);
    const bad = new Float64Array(4).fill(0.2);
    bad[3] = NaN;
    expect(fault((input) => (input.truth = { kind: 'array', background: 0.2, sha256: '0'.repeat(64), rows: 2, cols: 2, extent: { xMin: -1, xMax: 1, yMin: -1, yMax: 1 } }), bad).message).toMatch(/Row 2, column 2/);
  });

  it('a phantom without contrast has no difference signal to scale noise by', () => {
    expect(() => simulate(definition((input) => (input.truth = { kind: 'shapes', background: 0.2, shapes: [] })))).toThrow(/noise relative to the voltages/);
  });
});
