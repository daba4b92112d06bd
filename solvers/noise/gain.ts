import { familyKeys } from '../../shared/domain/families';
import { RandomStream } from '../core/random';
import { norm2 } from '../core/vector';
import { requireNoiseInput, type NoiseModel } from './noise-model';

/** e_i = c g_i y_i with normal g; c makes ||e|| = level * noiseScale. Channels of value 0 stay clean. */
export const gainNoise: NoiseModel = {
  key: 'gain',
  name: 'Gain of each channel, exact level',
  summary: 'Every datum is multiplied by its own factor near 1, drawn independently, so that large data carry large noise. Rescaled in every draw so that the norm of the noise is exactly the level times the reference norm.',
  formula: 'y^\\delta_i = (1 + c\\,g_i)\\,y_i, \\quad g \\sim \\mathcal{N}(0, I), \\; c = \\delta\\,\\frac{\\|y_{\\mathrm{ref}}\\|}{\\|g \\odot y\\|}',
  sources: [{ short: 'common practice', full: 'Multiplicative noise of independent channels. Common practice, no source.' }],
  exact: true,
  normal: false,
  families: familyKeys,
  draw(clean, level, noiseScale, key) {
    requireNoiseInput(clean, level, noiseScale);
    const data = new Float64Array(clean.length);
    new RandomStream(key).fillNormal(data);
    for (let i = 0; i < data.length; i++) data[i] *= clean[i];
    const size = norm2(data);
    if (!(size > 0)) throw new RangeError('A gain changes nothing where all data are zero.');
    const target = level * noiseScale;
    const factor = target / size;
    for (let i = 0; i < data.length; i++) data[i] = clean[i] + factor * data[i];
    return { data, noiseNorm: target };
  },
};
