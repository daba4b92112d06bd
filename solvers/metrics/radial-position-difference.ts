import { adler2009, defineMetric, noTarget, undefinedMetric } from './metric-definition';
import { gridGeometry } from './grid-geometry';

export const radialPositionDifference = defineMetric({
  key: 'radial-position-difference',
  name: 'Radial position difference',
  short: 'Radial',
  unit: 'body radius',
  better: 'zero',
  formula: '\\Delta r = \\frac{r_t - \\hat r}{R}, \\quad r = \\text{distance to the centre of the body}',
  summary: 'How much closer to the centre than the target the quarter-amplitude set lies, as a share of the body radius; positive when the image is pulled inwards. The mean over targets.',
  sources: [adler2009],
  traps: ['Signed: a mean over draws near zero can hide large differences of both signs.', 'It does not see a turn around the centre; the position error does.'],
  fromSummary: (s) => {
    const missing = noTarget(s);
    if (missing) return missing;
    const { findings, reason } = s.quarter();
    if (!findings) return undefinedMetric(reason ?? 'No target was found.');
    const { centreX, centreY } = gridGeometry(s.input.grid);
    const radius = (x: number, y: number): number => Math.sqrt((x - centreX) * (x - centreX) + (y - centreY) * (y - centreY));
    let sum = 0;
    for (const { target, x, y } of findings) sum += radius(target.x, target.y) - radius(x, y);
    return { value: sum / findings.length / s.input.grid.bodyRadius };
  },
});
