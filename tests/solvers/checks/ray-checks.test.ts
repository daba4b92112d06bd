import { describe, expect, it } from 'vitest';
import type { XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import { phantomDefinitionSchema, type DefinitionOf } from '../../../shared/domain/phantom-definition';
import { checkPhantom } from '../../../solvers/checks/check-phantom';
import type { PhantomCheckContext } from '../../../solvers/checks/phantom-check';
import { createProblem, dataLayout, describeProblem, simulate } from '../../../solvers/problems/registry';

const ellipse = { kind: 'ellipse', label: 'a', value: 1, x: 0.1, y: 0.2, semiAxisA: 0.4, semiAxisB: 0.3, angleDeg: 30 };
const inside = { ...ellipse, label: 'b', value: -0.4, x: 0.2, semiAxisA: 0.1, semiAxisB: 0.15 };

function contextOf(geometry: Partial<XrayGeometry>, truth: unknown = { kind: 'shapes', background: 0, combine: 'add', shapes: [ellipse, inside] }): PhantomCheckContext {
  const definition = phantomDefinitionSchema.parse({
    family: 'x-ray', truth, geometry: { body: { kind: 'disc', radius: 1 }, beam: 'parallel', views: 16, arcDeg: 180, detectors: 40, detectorSpacing: 0.05, cells: 24, ...geometry },
  }) as DefinitionOf<'x-ray'>;
  const problem = createProblem(describeProblem(definition));
  const simulated = simulate(definition, undefined, problem);
  return { definition, truth: simulated.truth, frame: simulated.frame, reference: simulated.reference, layout: dataLayout(definition), simulated, problem };
}
const states = (context: PhantomCheckContext): Record<string, string> => Object.fromEntries(checkPhantom(context).map((result) => [result.key, result.state]));
const fan = { beam: 'fan' as const, arcDeg: 360, sourceDistance: 2.5, detectorDistance: 1.5, detectorSpacing: 0.12 };

describe('Checks of X-ray phantoms', () => {
  it('pass for parallel beams', () => {
    expect(states(contextOf({}))).toEqual({
      'data-shape': 'pass', 'ray-closed-form': 'pass', 'total-mass': 'pass', 'view-moments': 'pass', 'ray-convergence': 'not-applicable', 'projector-convergence': 'pass', 'models-differ': 'pass',
    });
    // With a background, over a third of a turn.
    expect(states(contextOf({ arcDeg: 60 }, { kind: 'shapes', background: 0.5, shapes: [ellipse, inside] }))).toMatchObject({ 'total-mass': 'pass', 'view-moments': 'pass', 'ray-closed-form': 'pass' });
  });

  it('pass for a fan over a full turn, and say what does not apply', () => {
    expect(states(contextOf(fan))).toMatchObject({ 'total-mass': 'pass', 'view-moments': 'not-applicable', 'ray-closed-form': 'pass', 'projector-convergence': 'pass', 'models-differ': 'pass' });
    expect(states(contextOf({ ...fan, arcDeg: 240 }))).toMatchObject({ 'total-mass': 'not-applicable' });
    expect(states(contextOf({ detectors: 30 }))).toMatchObject({ 'total-mass': 'not-applicable', 'view-moments': 'not-applicable' });
  });

  it('look at the quadrature of an expression', () => {
    expect(states(contextOf({}, { kind: 'expression', background: 0, expression: 'exp(-8 * (x^2 + y^2))' }))).toMatchObject({ 'ray-convergence': 'pass', 'total-mass': 'pass', 'view-moments': 'pass' });
  });

  it('find a view that is turned, one that is shifted, and data of the model that inverts', () => {
    const context = contextOf({});
    const turned = Float64Array.from(context.frame);
    turned.set(context.frame.subarray(0, 40).toReversed(), 0);
    expect(states({ ...context, frame: turned })).toMatchObject({ 'total-mass': 'pass', 'view-moments': 'fail' });
    const dim = Float64Array.from(context.frame);
    for (let i = 80; i < 120; i++) dim[i] *= 0.98;
    expect(states({ ...context, frame: dim })).toMatchObject({ 'total-mass': 'fail' });
    expect(states({ ...context, simulated: { ...context.simulated, projectionGap: 0 } })).toMatchObject({ 'models-differ': 'fail', 'projector-convergence': 'not-applicable' });
  });
});
