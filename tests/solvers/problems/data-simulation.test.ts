import { describe, expect, it } from 'vitest';
import { ellipse, maxError, shapesTruth, unitGeometry } from '../../support/impedance-case';
import type { Shape } from '../../../shared/domain/truth-definition';
import { phantomDefinitionSchema } from '../../../shared/domain/phantom-definition';
import { simulatorsAgreeCheck } from '../../../solvers/checks/simulators-agree';
import type { ImpedanceCheckContext } from '../../../solvers/checks/phantom-check';
import { simulateImpedanceData, simulatorFor } from '../../../solvers/problems/electrical-impedance/data-simulation';
import { simulate } from '../../../solvers/problems/registry';

const geometry = unitGeometry({ electrodes: 8, measurement: 'adjacent-all' });
const square: Shape = { kind: 'polygon', label: 'square', target: true, value: 2, vertices: [[0, 0], [0.3, 0], [0.3, 0.3], [0, 0.3]] };
const disc = ellipse(0.3, 0.2, 0.25, 0.25, 5);

describe('choice of the simulator', () => {
  it('takes boundary integrals for smooth outlines and finite elements for corners, bumps and crossing outlines', () => {
    const bump: Shape = { kind: 'bump', label: 'bump', target: true, value: 4, x: 0, y: 0, semiAxisA: 0.4, semiAxisB: 0.4, angleDeg: 0 };
    expect(simulatorFor(shapesTruth([disc]), geometry)).toBe('boundary-integrals');
    expect(simulatorFor(shapesTruth([]), geometry)).toBe('boundary-integrals');
    for (const shapes of [[square], [bump], [disc, ellipse(0.1, 0.2, 0.25, 0.25, 2)]]) expect(simulatorFor(shapesTruth(shapes), geometry)).toBe('finite-elements');
  });

  it('says which it was; the two agree on their reference', () => {
    const panels = simulateImpedanceData(shapesTruth([disc]), geometry);
    const elements = simulateImpedanceData(shapesTruth([square]), geometry, { level: 'coarse' });
    expect(panels.kind).toMatch(/boundary integral/);
    expect(elements.kind).toMatch(/quadratic elements/);
    expect(panels.unknowns).toBeLessThan(1000);
    expect(elements.unknowns).toBeGreaterThan(1000);
    // The coarse mesh may be off by more than the normal one.
    expect(maxError(elements.reference, panels.reference)).toBeLessThan(3e-4);
  });

  it('is told of a simulated phantom', () => {
    const definition = phantomDefinitionSchema.parse({ family: 'electrical-impedance', truth: { kind: 'shapes', background: 1, shapes: [disc] }, geometry, dataKind: 'difference', noiseReference: 'voltages' });
    expect(simulate(definition).kind).toMatch(/boundary integral/);
  });

  it('leaves nothing to compare where finite elements alone serve, with the reason', () => {
    const definition = { geometry } as ImpedanceCheckContext['definition'];
    const result = simulatorsAgreeCheck.evaluate({ definition, truth: shapesTruth([square]), frame: new Float64Array(64) } as ImpedanceCheckContext);
    expect(result).toMatchObject({ state: 'not-applicable', figure: null });
    expect(result.meaning).toMatch(/corners/);
  });

  it('sees a frame that finite elements do not confirm', () => {
    const truth = shapesTruth([disc]);
    const { data } = simulateImpedanceData(truth, geometry);
    const judgeOf = (frame: Float64Array) => simulatorsAgreeCheck.evaluate({ definition: { geometry }, truth, frame } as ImpedanceCheckContext).state;
    expect(judgeOf(data)).toBe('pass');
    expect(judgeOf(data.map((v) => 1.01 * v))).toBe('fail');
  });
});
