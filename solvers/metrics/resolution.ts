import { adler2009, defineMetric, noTarget, undefinedMetric } from './metric-definition';

export const resolution = defineMetric({
  key: 'resolution',
  name: 'Resolution',
  short: 'Resolution',
  unit: 'body radius',
  better: 'lower',
  formula: 'RES = \\sqrt{A_q / A_0}',
  summary: 'Radius of the quarter-amplitude set as a share of the body radius: the square root of its share of the area of the body.',
  sources: [adler2009],
  traps: [
    'A ratio of radii, not of areas.',
    'Smaller is finer, but not below the size of the target: compare with the target.',
    'With several targets the areas of all spots are taken together.',
  ],
  fromSummary: (s) => {
    const missing = noTarget(s);
    if (missing) return missing;
    const { findings, reason, count } = s.quarter();
    if (!findings) return undefinedMetric(reason ?? 'No target was found.');
    return { value: Math.sqrt(count / s.input.grid.inside.length) };
  },
});
