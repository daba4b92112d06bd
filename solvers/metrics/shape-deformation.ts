import { splitByDisc } from './equal-area-disc';
import { adler2009, defineMetric, undefinedMetric } from './metric-definition';

export const shapeDeformation = defineMetric({
  key: 'shape-deformation',
  name: 'Shape deformation',
  short: 'Deformation',
  unit: '',
  better: 'lower',
  formula: 'SD = \\frac{\\#\\{i \\in Q : i \\notin C\\}}{\\# Q}, \\quad C = \\text{disc about the centroid of } Q \\text{ with the area of } Q',
  summary: 'Share of the quarter-amplitude set Q that lies outside the disc of its own area about its centroid; 0 for a disc.',
  sources: [adler2009],
  traps: ['A target that is no disc is deformed by itself: compare with the figure of the truth.', 'Defined for one target.', 'Pixels at the rim leave about 0.005 for a perfect disc.'],
  fromSummary: (s) => {
    const split = splitByDisc(s);
    return typeof split === 'string' ? undefinedMetric(split) : { value: split.setOutside / split.set };
  },
});
