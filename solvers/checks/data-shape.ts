import { layoutSize } from '../problems/problem-family';
import { judge, type Check } from './check';
import { commonPractice, type PhantomCheckContext } from './phantom-check';

export const dataShapeCheck: Check<PhantomCheckContext> = {
  key: 'data-shape',
  name: 'Data finite and of the right shape',
  unit: 'values',
  bound: 0,
  comparison: 'equal',
  formula: '|m - m_{\\mathrm{geometry}}| + \\#\\{i : y_i \\text{ not finite}\\}',
  summary: 'Missing, surplus or non-finite values in the frame with the target and in the reference frame.',
  source: commonPractice,
  evaluate({ layout, frame, reference }) {
    const expected = layoutSize(layout);
    let faults = Math.abs(frame.length - expected) + Math.abs(reference.length - expected);
    for (const values of [frame, reference]) for (const value of values) if (!Number.isFinite(value)) faults++;
    return judge(this, faults, `Missing, surplus or non-finite values in the two frames of ${expected}.`);
  },
};
