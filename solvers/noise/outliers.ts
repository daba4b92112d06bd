import { familyKeys } from '../../shared/domain/families';
import { RandomStream } from '../core/random';
import { norm2 } from '../core/vector';
import { requireNoiseInput, type NoiseModel } from './noise-model';

/** Share of the channels that are replaced. */
const replacedShare = 0.05;

/** A share of the channels, drawn anew in every draw, is off by a normal error; the others are clean. */
export const outlierNoise: NoiseModel = {
  key: 'outliers',
  name: 'Outliers, exact level',
  summary: 'One channel in twenty (at least one), drawn anew each time, is replaced by its value and a normal error; the others are clean. Rescaled in every draw so that the norm of the noise is exactly the level times the reference norm.',
  formula: 'y^\\delta_i = y_i + \\delta\\,\\|y_{\\mathrm{ref}}\\|\\,\\frac{g_i}{\\|g\\|} \\; (i \\in S), \\quad y^\\delta_i = y_i \\; (i \\notin S), \\quad \\# S = \\lceil 0.05\\,m \\rceil',
  sources: [{ short: 'Huber 1964', full: 'P. J. Huber. Annals of Mathematical Statistics 35 (1964) 73-101 (contaminated data; the share of 5 % and the exact level are choices of this registry).', fromMemory: true }],
  exact: true,
  normal: false,
  families: familyKeys,
  draw(clean, level, noiseScale, key) {
    requireNoiseInput(clean, level, noiseScale);
    const m = clean.length;
    const stream = new RandomStream(key);
    const count = Math.ceil(replacedShare * m);
    const order = Int32Array.from({ length: m }, (_, i) => i);
    const error = new Float64Array(m);
    // The first steps of a shuffle (Fisher and Yates 1938): every set of this size is equally likely.
    for (let i = 0; i < count; i++) {
      const other = i + stream.nextIndex(m - i);
      const chosen = order[other];
      order[other] = order[i];
      order[i] = chosen;
      error[chosen] = stream.nextNormal();
    }
    const target = level * noiseScale;
    const factor = target / norm2(error);
    const data = new Float64Array(m);
    for (let i = 0; i < m; i++) data[i] = clean[i] + factor * error[i];
    return { data, noiseNorm: target };
  },
};
