import { describe, expect, it } from 'vitest';
import { phantomDefinitionSchema, type DefinitionOf } from '../../../shared/domain/phantom-definition';
import { checkPhantom } from '../../../solvers/checks/check-phantom';
import type { ImpedanceCheckContext } from '../../../solvers/checks/phantom-check';
import { phantomChecks } from '../../../solvers/checks/registry';
import { createProblem, dataLayout, describeProblem, simulate } from '../../../solvers/problems/registry';
import { createTruthField } from '../../../solvers/truth/truth-field';
import { ellipse, unitGeometry } from '../../support/impedance-case';

function context(shapes = [ellipse(0.3, 0.2, 0.25, 0.25, 5)]): ImpedanceCheckContext {
  const definition = phantomDefinitionSchema.parse({
    family: 'electrical-impedance',
    truth: { kind: 'shapes', background: 1, shapes },
    geometry: unitGeometry({ electrodes: 8 }),
    dataKind: 'difference',
    noiseReference: 'voltages',
  }) as DefinitionOf<'electrical-impedance'>;
  const problem = createProblem(describeProblem(definition));
  const simulated = simulate(definition, undefined, problem);
  const { truth, frame, reference } = simulated;
  return { definition, truth, frame, reference, layout: dataLayout(definition), simulated, problem };
}

describe('checks of a phantom', () => {
  const good = context();

  it('passes a sound phantom with a figure for every check', () => {
    const results = checkPhantom(good);
    expect(results.map((r) => r.key)).toEqual(phantomChecks['electrical-impedance'].map((c) => c.key));
    for (const result of results) {
      expect(result, JSON.stringify(result)).toMatchObject({ state: 'pass' });
      expect(result.figure).not.toBeNull();
    }
  });

  it('sees a frame that is too short or not finite, and one that is not reciprocal', () => {
    const state = (key: string, frame: Float64Array): string => phantomChecks['electrical-impedance'].find((c) => c.key === key)!.evaluate({ ...good, frame }).state;
    expect(state('data-shape', good.frame.slice(1))).toBe('fail');
    expect(state('data-shape', good.frame.map((v, i) => (i === 3 ? NaN : v)))).toBe('fail');
    expect(state('reciprocity', good.frame.map((v, i) => (i === 3 ? v * 1.01 : v)))).toBe('fail');
    expect(state('mesh-convergence', good.frame.map((v) => v * 1.01))).toBe('fail');
  });

  it('warns of a shape at the boundary and says when a check does not apply', () => {
    const touching = context([ellipse(0.8, 0, 0.195, 0.195, 5)]);
    const clear = phantomChecks['electrical-impedance'].find((c) => c.key === 'shapes-in-body')!;
    expect(clear.evaluate(touching)).toMatchObject({ state: 'warning' });
    expect(clear.evaluate({ ...touching, truth: createTruthField({ kind: 'expression', background: 1, expression: '1 + x^2' }) }).state).toBe('not-applicable');
  });
});
