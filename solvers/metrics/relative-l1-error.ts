import { defineMetric, ownDefinition, relativeTo } from './metric-definition';

export const relativeL1Error = defineMetric({
  key: 'relative-l1-error',
  name: 'Relative L1 error',
  short: 'Relative L1',
  unit: '',
  better: 'lower',
  formula: 'E_1 = \\frac{\\|\\hat x - x\\|_1}{\\|x - x_b\\|_1}, \\quad \\|v\\|_1 = \\sum_i w_i |v_i|',
  summary: 'The mean absolute error against the mean absolute contrast. The trivial reconstruction scores exactly 1.',
  sources: [ownDefinition],
  traps: [
    'Faint artefacts over the whole body weigh more than in L2: for a small target this figure passes 1 first.',
    'Divided by the distance of the truth to the background, as all relative errors here.',
  ],
  fromSummary: (s) => relativeTo(s.errorSum, s.signalSum),
});
