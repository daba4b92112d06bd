import { hasReciprocalPairs, reciprocityGap } from '../problems/electrical-impedance/reciprocity';
import { judge, notApplicable, type Check } from './check';
import type { ImpedanceCheckContext } from './phantom-check';

export const reciprocityCheck: Check<ImpedanceCheckContext> = {
  key: 'reciprocity',
  name: 'Reciprocity',
  unit: '',
  bound: 1e-8,
  comparison: 'at-most',
  formula: '\\max_{a,b} |I_a \\cdot U_b - I_b \\cdot U_a| \\,/\\, \\max_{a,b} |I_a \\cdot U_b|',
  summary: 'Drive and measurement may change places without changing the voltage.',
  source: {
    short: 'Somersalo, Cheney, Isaacson 1992',
    full: 'E. Somersalo, M. Cheney, D. Isaacson, Existence and uniqueness for electrode models for electric current computed tomography, SIAM J. Appl. Math. 52 (1992) 1023-1040: the bilinear form is symmetric.',
    fromMemory: true,
  },
  evaluate({ definition, frame, reference }) {
    if (!hasReciprocalPairs(definition.geometry)) return notApplicable(this, 'These patterns, measured without the driven electrodes, have no two voltages that must be equal.');
    const gap = Math.max(reciprocityGap(definition.geometry, frame), reciprocityGap(definition.geometry, reference));
    return judge(this, gap, 'Largest difference of two voltages that must be equal when drive and measurement change places, over the largest of them.');
  },
};
