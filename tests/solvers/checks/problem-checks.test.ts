import { describe, expect, it } from 'vitest';
import { adjointCheck } from '../../../solvers/checks/adjoint';
import { homogeneityCheck } from '../../../solvers/checks/homogeneity';
import { taylorCheck } from '../../../solvers/checks/taylor';
import { denseMatrix, matrixOperator } from '../../../solvers/core/matrix-operator';
import { norm2 } from '../../../solvers/core/vector';
import { readRule } from '../../../solvers/methods/parameters';
import { methods } from '../../../solvers/methods/registry';
import type { Derivative, ForwardProblem, Method, Reconstructor, RuleKey, RuleSetting } from '../../../solvers/core/types';
import { electrodeProblem, electrodeTruth } from '../../support/electrode-problem';
import { syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

/** The same problem with another derivative. */
function withDerivative(problem: ForwardProblem, change: (operator: Derivative) => Derivative): ForwardProblem {
  return { ...problem, linearise: (x) => change(problem.linearise(x)) };
}

describe('adjoint check', () => {
  it('passes for a matrix and fails for an adjoint that is off by one part in a million', () => {
    const problem = syntheticProblem();
    expect(adjointCheck.evaluate(problem).state).toBe('pass');
    const off = withDerivative(problem, (operator) => ({
      ...operator,
      applyAdjoint(y, out) {
        operator.applyAdjoint(y, out);
        for (let i = 0; i < out.length; i++) out[i] *= 1 + 1e-6;
      },
    }));
    const result = adjointCheck.evaluate(off);
    expect(result.state).toBe('fail');
    expect(result.figure).toBeGreaterThan(result.bound as number);
  });
});

describe('derivative check', () => {
  it('finds slope 2 for a curved map, accepts a linear one, and fails for a derivative off by 1 %', () => {
    const curved = syntheticProblem({ curvature: 0.4 });
    const right = taylorCheck.evaluate(curved);
    expect(right.state).toBe('pass');
    // The remainder of a quadratic map is exactly quadratic in the step.
    expect(right.figure).toBeCloseTo(2, 4);
    expect(taylorCheck.evaluate(syntheticProblem()).state).toBe('pass');
    const off = withDerivative(curved, (operator) => matrixOperator(denseMatrix(operator).map((v) => v * 1.01), operator.rows, operator.cols));
    expect(taylorCheck.evaluate(off).state).toBe('fail');
  });
});

function settingOf(key: RuleKey, method: Method): RuleSetting {
  if (key === 'fixed') return { key, value: method.fixedValue?.kind === 'integer' ? 5 : 0.1 };
  return key === 'discrepancy' ? { key, safetyFactor: 1.1 } : { key };
}

describe('homogeneity check', () => {
  const problem = syntheticProblem();
  const electrodes = electrodeProblem();
  const { x } = syntheticTruth(problem, 0.2);
  const data = problem.evaluate(x).map((v, i) => v * (1 + 0.02 * Math.sin(3 * i)));
  const noise = { norm: 0.014 * norm2(data), level: 0.014 };

  it.each(methods.map((method) => [method.key, method] as const))('%s: holds for a linear method, does not apply to others', (_, method) => {
    if (!method.capabilities.dataKinds.includes('difference')) return;
    const defaults = Object.fromEntries(method.fields.map((field) => [field.name, field.default]));
    const rules = method.capabilities.rules.length > 0 ? method.capabilities.rules : [null];
    // Methods that read electrodes do not serve the synthetic problem.
    const served = method.unfit?.(problem) ? { problem: electrodes, data: electrodeTruth(electrodes).simulated.clean } : { problem, data };
    for (const key of rules) {
      const rule = key === null ? null : readRule(method, settingOf(key, method));
      const reconstructor = method.prepare(served.problem, method.parameters.parse(defaults), rule);
      const result = homogeneityCheck.evaluate({ ...served, method, reconstructor, noise });
      expect([key, result.state]).toEqual([key, method.capabilities.linear ? 'pass' : 'not-applicable']);
    }
  });

  it('fails for a method that clips', () => {
    const method = methods.find((m) => m.capabilities.linear) ?? methods[0];
    const clip: Reconstructor = { reconstruct: (d) => ({ x: problem.background().map((b, i) => b + Math.min(0.1, d[i % d.length])), parameter: null, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: 0 }), reconstructMany: () => [] };
    expect(homogeneityCheck.evaluate({ problem, method, reconstructor: clip, data: data.map(() => 0.09), noise }).state).toBe('fail');
  });
});
