import { adler2009, defineMetric, noTarget, undefinedMetric } from './metric-definition';

export const positionError = defineMetric({
  key: 'position-error',
  name: 'Position error',
  short: 'Position',
  unit: 'body radius',
  better: 'lower',
  formula: 'PE = \\frac{1}{R\\,T} \\sum_{t=1}^{T} \\|c_t - \\hat c_t\\|, \\quad \\hat c = \\text{centroid of } \\{\\hat x - x_b \\ge \\tfrac14 \\max(\\hat x - x_b)\\}',
  summary: 'Distance of the centroid of the quarter-amplitude set to the centroid of the target, as a share of the body radius; the mean over targets.',
  sources: [adler2009],
  traps: [
    'The centroid has weights 0 and 1: each pixel of the quarter-amplitude set counts the same.',
    'The source gives the signed radial difference only; here the vector distance is the error and the radial one a figure of its own.',
    'The sign follows the declared contrast, so a resistive target is found in the fall of the image.',
    'With one target the whole set counts, also far spots of noise. With several, connected spots of at least a tenth of the largest one are matched one to one at the least total distance; a target without a spot of its own takes the nearest.',
  ],
  fromSummary: (s) => {
    const missing = noTarget(s);
    if (missing) return missing;
    const { findings, reason } = s.quarter();
    if (!findings) return undefinedMetric(reason ?? 'No target was found.');
    let sum = 0;
    let missed = 0;
    for (const { target, x, y, missed: shared } of findings) {
      const dx = target.x - x;
      const dy = target.y - y;
      sum += Math.sqrt(dx * dx + dy * dy);
      if (shared) missed++;
    }
    const value = sum / findings.length / s.input.grid.bodyRadius;
    return missed === 0 ? { value } : { value, reason: `${missed} of ${findings.length} targets had no spot of their own.` };
  },
});
