import type { CheckResult } from '../core/types';
import { bodyCurve, isDisc, type ImpedanceBody } from '../problems/electrical-impedance/body-curve';
import type { TruthField } from '../truth/truth-field';
import { judge, notApplicable, type Check } from './check';
import { commonPractice, type ImpedanceCheckContext } from './phantom-check';

export const shapesInBodyCheck: Check<ImpedanceCheckContext> = {
  key: 'shapes-in-body',
  name: 'Shapes clear of the electrodes',
  unit: 'of the radius',
  bound: 0.01,
  comparison: 'at-least',
  formula: '\\min_{p \\in \\text{outlines}} \\operatorname{dist}(p, \\partial\\Omega) / R',
  summary: 'Smallest distance of an outline to the boundary. A shape that touches the boundary may lie under an electrode and change its contact: a warning, no fault.',
  source: commonPractice,
  evaluate({ definition, truth }) {
    if (truth.interfaces.length === 0) return notApplicable(this, 'The ground truth has no outlines.');
    const { body } = definition.geometry;
    const { radius } = body;
    if (!isDisc(body)) return warned(judge(this, Math.max(0, smallestDepth(truth, body) / radius), 'Smallest distance of an outline to the boundary of the body.'));
    let farthest = 0;
    for (const curve of truth.interfaces) {
      const points = curve.points(() => 0.01 * radius);
      for (let i = 0; i < points.length; i += 2) farthest = Math.max(farthest, Math.sqrt(points[i] * points[i] + points[i + 1] * points[i + 1]));
    }
    return warned(judge(this, Math.max(0, 1 - farthest / radius), 'Smallest distance of an outline to the boundary of the body.'));
  },
};

const warned = (result: CheckResult): CheckResult => (result.state === 'fail' ? { ...result, state: 'warning' } : result);

function smallestDepth(truth: TruthField, body: ImpedanceBody): number {
  const curve = bodyCurve({ body });
  let smallest = Infinity;
  for (const outline of truth.interfaces) {
    const points = outline.points(() => 0.01 * body.radius);
    for (let i = 0; i < points.length; i += 2) smallest = Math.min(smallest, curve.depth(points[i], points[i + 1]));
  }
  return smallest;
}
