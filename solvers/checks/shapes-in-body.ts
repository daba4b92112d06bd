import { judge, notApplicable, type Check } from './check';
import { commonPractice, type ImpedanceCheckContext } from './phantom-check';

export const shapesInBodyCheck: Check<ImpedanceCheckContext> = {
  key: 'shapes-in-body',
  name: 'Shapes clear of the electrodes',
  unit: 'of the radius',
  bound: 0.01,
  comparison: 'at-least',
  formula: '1 - \\max_{p \\in \\text{outlines}} |p| / R',
  summary: 'Smallest distance of an outline to the boundary. A shape that touches the boundary may lie under an electrode and change its contact: a warning, no fault.',
  source: commonPractice,
  evaluate({ definition, truth }) {
    if (truth.interfaces.length === 0) return notApplicable(this, 'The ground truth has no outlines.');
    const radius = definition.geometry.body.radius;
    let farthest = 0;
    for (const curve of truth.interfaces) {
      const points = curve.points(() => 0.01 * radius);
      for (let i = 0; i < points.length; i += 2) farthest = Math.max(farthest, Math.sqrt(points[i] * points[i] + points[i + 1] * points[i + 1]));
    }
    const result = judge(this, Math.max(0, 1 - farthest / radius), 'Smallest distance of an outline to the boundary of the body.');
    return result.state === 'fail' ? { ...result, state: 'warning' } : result;
  },
};
