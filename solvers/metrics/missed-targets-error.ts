import { adler2009, defineMetric, noTarget } from './metric-definition';

export const missedTargetsError = defineMetric({
  key: 'missed-targets-error',
  name: 'Missed targets',
  short: 'Missed',
  unit: 'targets',
  better: 'lower',
  formula: 'M = \\#\\{\\text{declared targets without a spot of their own}\\}',
  summary: 'Declared targets that share a spot of the quarter-amplitude set with another one, or have none: spots and targets of one sign are matched one to one at the least total distance.',
  sources: [adler2009],
  traps: [
    'The quarter-amplitude set is that of Adler et al. 2009; counting its parts one to one is the choice of this registry.',
    'One declared target is missed only where the image has no departure of its sign.',
  ],
  fromSummary: (s) => {
    const missing = noTarget(s);
    if (missing) return missing;
    const { findings } = s.quarter();
    if (!findings) return { value: s.input.targets.length };
    let count = 0;
    for (const { missed } of findings) if (missed) count++;
    return { value: count };
  },
});
