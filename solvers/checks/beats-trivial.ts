import { median } from '../statistics/quantiles';
import { judge, notApplicable, type Check } from './check';
import { commonPractice } from './phantom-check';
import type { RunCheckContext } from './run-check';

/** Median relative L2 error at the lowest noise against the trivial reconstruction's, which is 1. */
export const beatsTrivialCheck: Check<RunCheckContext> = {
  key: 'beats-trivial',
  name: 'Beats the trivial reconstruction',
  unit: '',
  bound: 0.95,
  comparison: 'at-most',
  formula: '\\operatorname{median}_k E_2(\\hat x_k) \\text{ at the lowest noise}',
  summary: 'At the lowest noise the median relative L2 error lies at least 5 % below that of the background alone. A method that cannot do this on a phantom has a fault, or the phantom is out of its reach.',
  source: commonPractice,
  evaluate({ prepared, lowestErrors }) {
    if (prepared.method.class === 'baseline') return notApplicable(this, 'This is the trivial reconstruction.');
    const values = lowestErrors.filter((value): value is number => value !== null);
    if (values.length === 0) return notApplicable(this, 'The relative L2 error is not defined on this phantom.');
    const result = judge(this, median(values), 'Median relative L2 error at the lowest noise; the background alone has 1.');
    // Being no better than nothing is a finding about the method, not a fault of the run.
    return result.state === 'fail' ? { ...result, state: 'warning' } : result;
  },
};
