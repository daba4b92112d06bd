import { defineMetric, undefinedMetric } from './metric-definition';

export const diceScore = defineMetric({
  key: 'dice-score',
  name: 'Dice overlap',
  short: 'Dice',
  unit: '',
  better: 'higher',
  formula: 'D = \\frac{2\\,|A \\cap B|}{|A| + |B|}, \\quad A = \\{i : |x_i - x_{b,i}| \\ge \\tfrac12 \\max_j |x_j - x_{b,j}|\\}, \\; B \\text{ the same of } \\hat x',
  summary: 'Overlap of the region that departs from the background by at least half of the largest departure, in the truth and in the reconstruction. 1 is the same region, 0 none in common.',
  sources: [{ short: 'Dice 1945', full: 'L. R. Dice: Measures of the amount of ecologic association between species. Ecology 26 (1945) 297-302.', fromMemory: true }],
  traps: [
    'The threshold is half of each image\'s own largest departure: a weak second target can fall below it in both.',
    'Blind to the size of the contrast and to its sign.',
    'For a smooth truth the region is an arbitrary level set: the figure is meant for sharp targets.',
  ],
  fromSummary: ({ input: { truth, background, estimate }, changeHighest, changeLowest, signalLargest }) => {
    if (!(signalLargest > 0)) return undefinedMetric('The truth equals the background: there is nothing to find.');
    const peak = Math.max(changeHighest, -changeLowest);
    if (!(peak > 1e-9 * signalLargest)) return { value: 0 };
    let both = 0;
    let sum = 0;
    for (let k = 0; k < truth.length; k++) {
      const a = Math.abs(truth[k] - background[k]) >= 0.5 * signalLargest;
      const b = Math.abs(estimate[k] - background[k]) >= 0.5 * peak;
      if (a && b) both++;
      sum += (a ? 1 : 0) + (b ? 1 : 0);
    }
    return { value: (2 * both) / sum };
  },
});
