import { judge, notApplicable, type Check } from './check';
import { realisedNoise } from './noise-calibration';
import type { RunCheckContext } from './run-check';
import { chiSquareSurvival } from '../statistics/distributions';

/** Jarque-Bera test over the standardised values of all draws of the run. */
export const noiseNormalityCheck: Check<RunCheckContext> = {
  key: 'noise-normality',
  name: 'Noise is normal',
  unit: '',
  bound: 1e-4,
  comparison: 'at-least',
  formula: 'p = P\\bigl(\\chi^2_2 \\ge \\tfrac{n}{6}\\bigl(S^2 + \\tfrac14 (K - K_0)^2\\bigr)\\bigr)',
  summary: 'Skewness S and kurtosis K of all noise values of the run, each draw scaled to unit variance, against a normal distribution. K_0 = 3 m / (m + 2) for m values of fixed norm.',
  source: { short: 'Jarque and Bera 1987', full: 'C. M. Jarque, A. K. Bera: A test for normality of observations and regression residuals. International Statistical Review 55 (1987) 163-172.', fromMemory: true },
  evaluate(context) {
    if (!context.prepared.noiseModel.normal) return notApplicable(this, 'The noise of this run is of another kind.');
    const m = context.simulated.clean.length;
    let count = 0;
    let third = 0;
    let fourth = 0;
    realisedNoise(context, (noise) => {
      let square = 0;
      for (let i = 0; i < m; i++) square += noise[i] * noise[i];
      const scale = Math.sqrt(m / square);
      for (let i = 0; i < m; i++) {
        const g = scale * noise[i];
        third += g * g * g;
        fourth += g * g * g * g;
      }
      count += m;
    });
    const skewness = third / count;
    const kurtosis = fourth / count;
    const excess = kurtosis - (3 * m) / (m + 2);
    const statistic = (count / 6) * (skewness * skewness + 0.25 * excess * excess);
    return judge(this, chiSquareSurvival(statistic, 2), `p value over ${count} noise values; skewness ${skewness.toPrecision(2)}, kurtosis ${kurtosis.toPrecision(4)}.`);
  },
};
