import { deriveDrawKey } from '../core/random';
import { norm2 } from '../core/vector';
import { judge, type Check } from './check';
import { commonPractice } from './phantom-check';
import type { RunCheckContext } from './run-check';

/** Noise of every draw of a run, as really added. */
export function realisedNoise(context: RunCheckContext, visit: (noise: Float64Array, level: number) => void): void {
  const { prepared, simulated, ladder, draws, benchSeed, phantomHash } = context;
  const noise = new Float64Array(simulated.clean.length);
  ladder.forEach((level, levelIndex) => {
    for (let draw = 0; draw < draws; draw++) {
      const { data } = prepared.noiseModel.draw(simulated.clean, level, simulated.noiseScale, deriveDrawKey(benchSeed, phantomHash, levelIndex, draw));
      for (let i = 0; i < noise.length; i++) noise[i] = data[i] - simulated.clean[i];
      visit(noise, level);
    }
  });
}

/** The level of counts holds to second order in their number: the rest at a few counts a ray, and the mean norm against the root of the mean square. */
const expansionError = 0.05;

/** Realised level over requested level, over all draws of the run. */
export const noiseCalibrationCheck: Check<RunCheckContext> = {
  key: 'noise-calibration',
  name: 'Noise calibration',
  unit: '',
  bound: 1e-8,
  comparison: 'at-most',
  formula: '\\bigl|\\operatorname{mean}_k \\|e_k\\| / (\\delta\\,\\|y_{\\mathrm{ref}}\\|) - 1\\bigr|',
  summary: 'The noise added has the level asked for. With the exact model every draw has it up to rounding; in expectation the mean may differ by four standard errors, of photon counts by 5 % more.',
  source: commonPractice,
  evaluate(context) {
    let count = 0;
    let mean = 0;
    let squares = 0;
    realisedNoise(context, (noise, level) => {
      // Running mean and squared deviations (Welford 1962).
      const ratio = norm2(noise) / (level * context.simulated.noiseScale);
      count++;
      const step = ratio - mean;
      mean += step / count;
      squares += step * (ratio - mean);
    });
    const sd = count > 1 ? Math.sqrt(squares / (count - 1)) : 0;
    const { exact, normal } = context.prepared.noiseModel;
    const expected = normal ? 1 / Math.sqrt(2 * context.simulated.clean.length) : sd;
    const bound = exact ? this.bound : Math.max(this.bound, (normal ? 0 : expansionError) + (4 * expected) / Math.sqrt(count));
    const words = `Realised over requested level: mean ${mean.toPrecision(7)}, standard deviation ${sd.toPrecision(2)}, over ${count} draws.`;
    return judge({ ...this, bound }, Math.abs(mean - 1), words);
  },
};
