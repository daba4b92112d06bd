import { defineMetric, ownDefinition, relativeTo } from './metric-definition';

export const relativeL2Error = defineMetric({
  key: 'relative-l2-error',
  name: 'Relative L2 error',
  short: 'Relative L2',
  unit: '',
  better: 'lower',
  formula: 'E_2 = \\frac{\\|\\hat x - x\\|_2}{\\|x - x_b\\|_2}, \\quad \\|v\\|_2^2 = \\sum_i w_i v_i^2',
  summary: 'The size of the error against the size of what there was to find. The trivial reconstruction (the background) scores exactly 1.',
  sources: [ownDefinition],
  traps: [
    'Divided by what: many sources divide by the norm of the truth, background included, and get a smaller figure. Here it is the distance of the truth to the background.',
    'A shift costs as much as an absence: a sharp target moved by its own width scores about 1.41, worse than no target at all. Read the position error beside it.',
    'One bad spot disappears in the sum. Read the sup error beside it.',
    'The truth is averaged over each pixel, not sampled: against point samples the rim pixels alone would add an error.',
  ],
  fromSummary: (s) => relativeTo(Math.sqrt(s.errorSquares), Math.sqrt(s.signalSquares)),
});
