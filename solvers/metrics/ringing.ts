import { splitByDisc } from './equal-area-disc';
import { adler2009, defineMetric, undefinedMetric } from './metric-definition';

export const ringing = defineMetric({
  key: 'ringing',
  name: 'Ringing',
  short: 'Ringing',
  unit: '',
  better: 'lower',
  formula: 'RNG = \\frac{\\sum_{i \\notin C,\\, a_i < 0} |a_i|}{\\sum_{i \\in C} a_i}, \\quad a_i = \\pm(\\hat x_i - x_{b,i})',
  summary: 'Change of the opposite sign outside the disc of the quarter-amplitude set, against the change inside it; 0 without overshoot.',
  sources: [adler2009],
  traps: ['It sums over the whole body: noise rings too.', 'The sign is that of the declared contrast.', 'Defined for one target.'],
  fromSummary: (s) => {
    const split = splitByDisc(s);
    if (typeof split === 'string') return undefinedMetric(split);
    return split.amplitudeInside > 0 ? { value: split.oppositeOutside / split.amplitudeInside } : undefinedMetric('The change inside the disc is not of the sign of the target.');
  },
});
