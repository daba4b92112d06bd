import { describe, expect, it } from 'vitest';
import { phantomDefinitionSchema, type PhantomDefinition, type PhantomDefinitionInput } from '../../../shared/domain/phantom-definition';
import { checkPhantom } from '../../../solvers/checks/check-phantom';
import { squaredKernelNorm } from '../../../solvers/checks/kernel-size';
import type { PhantomCheckContext } from '../../../solvers/checks/phantom-check';
import type { CheckResult } from '../../../solvers/core/types';
import { equationOf } from '../../../solvers/problems/integral-equation/equations';
import { createProblem, dataLayout, describeProblem, simulate } from '../../../solvers/problems/registry';

function contextOf(input: PhantomDefinitionInput): PhantomCheckContext {
  const definition: PhantomDefinition = phantomDefinitionSchema.parse(input);
  const problem = createProblem(describeProblem(definition));
  const simulated = simulate(definition, undefined, problem);
  return { definition, problem, simulated, layout: dataLayout(definition), truth: simulated.truth, frame: simulated.frame, reference: simulated.reference };
}
const states = (results: readonly CheckResult[]): Record<string, string> => Object.fromEntries(results.map(({ key, state }) => [key, state]));
const resultOf = (context: PhantomCheckContext, key: string): CheckResult => checkPhantom(context).find((result) => result.key === key)!;

describe('checks of an equation', () => {
  const curve = contextOf({ family: 'integral-equation', truth: { kind: 'standard' }, geometry: { equation: 'second-derivative' } });
  it('all pass where everything has a closed form', () => {
    const results = checkPhantom(curve);
    expect(states(results)).toEqual({
      'data-shape': 'pass', 'equation-closed-form': 'pass', 'quadrature-convergence': 'pass', 'discretisations-differ': 'pass', 'kernel-size': 'pass', 'singular-value-decay': 'pass',
    });
    for (const { figure, meaning } of results) {
      expect(figure).not.toBeNull();
      expect(meaning).toMatch(/\.$/);
    }
  });
  it('do not apply where there is none, and hold for a truth with jumps', () => {
    const shaw = contextOf({ family: 'integral-equation', truth: { kind: 'expression', background: 0, expression: 'x > 0.1 and x < 0.8 ? 1 : 0.2' }, geometry: { equation: 'shaw', cells: 64, points: 64 } });
    expect(states(checkPhantom(shaw))).toEqual({
      'data-shape': 'pass', 'equation-closed-form': 'not-applicable', 'quadrature-convergence': 'pass', 'discretisations-differ': 'pass', 'kernel-size': 'pass', 'singular-value-decay': 'not-applicable',
    });
  });
  it('see frames that do not belong to the geometry', () => {
    expect(resultOf({ ...curve, frame: curve.frame.slice(1) }, 'data-shape').state).toBe('fail');
  });
  it('warn of cells too wide for the kernel', () => {
    const coarse = contextOf({ family: 'integral-equation', truth: { kind: 'standard' }, geometry: { equation: 'inverse-heat', diffusivity: 5, cells: 16, points: 64 } });
    expect(resultOf(coarse, 'kernel-size')).toMatchObject({ state: 'warning' });
  });
  it('measure kernels by their double integrals', () => {
    // By hand: 1/90 for the second derivative (also the sum of 1 / (k pi)^4), 2/3 for Fox and Goodwin.
    expect(squaredKernelNorm(equationOf({ equation: 'second-derivative' }))).toBeCloseTo(1 / 90, 14);
    expect(squaredKernelNorm(equationOf({ equation: 'fox-goodwin' }))).toBeCloseTo(2 / 3, 13);
  });
});

describe('checks of a picture', () => {
  const picture = (edge: 'zero' | 'periodic'): PhantomCheckContext => contextOf({
    family: 'deblurring',
    truth: { kind: 'shapes', background: 0, shapes: [{ kind: 'ellipse', label: 'spot', value: 1, x: 0.05, y: 0, semiAxisA: 0.2, semiAxisB: 0.1 }] },
    geometry: { body: { kind: 'rectangle', width: 1, height: 0.8 }, pointSpread: 'disc', spread: 0.09, edge, cells: 16 },
  });
  it.each(['zero', 'periodic'] as const)('pass with a %s edge', (edge) => {
    expect(states(checkPhantom(picture(edge)))).toEqual({ 'data-shape': 'pass', 'constant-kept': 'pass', 'blurred-edge': 'pass', 'sampling-convergence': 'pass', 'discretisations-differ': 'pass' });
  });
  it('see an operator that loses light', () => {
    const context = picture('periodic');
    const { problem } = context;
    const dim = { ...problem, evaluate: (x: Float64Array) => problem.evaluate(x).map((v) => 0.999 * v) };
    expect(resultOf({ ...context, problem: dim }, 'constant-kept').figure).toBeCloseTo(1e-3, 10);
  });
});
