import { adler2009, defineMetric, noTarget } from './metric-definition';

export const falseTargetsError = defineMetric({
  key: 'false-targets-error',
  name: 'False targets',
  short: 'False',
  unit: 'spots',
  better: 'lower',
  formula: 'N = \\#\\{\\text{large spots of the quarter-amplitude set}\\} - \\#\\{\\text{targets}\\}, \\text{ at least } 0',
  summary: 'Spots of the quarter-amplitude set, of the sign of the targets, that belong to no declared target. A spot smaller than a tenth of the largest does not count.',
  sources: [adler2009],
  traps: [
    'With one declared target the whole quarter-amplitude set is taken as one spot, as in Adler et al. 2009, for the position; here its parts are counted.',
    'Artefacts of the opposite sign do not count: read the ringing beside it.',
  ],
  fromSummary: (s) => {
    const missing = noTarget(s);
    if (missing) return missing;
    const quarter = s.quarter();
    return { value: quarter.findings ? quarter.falseSpots : 0 };
  },
});
