import { familyKeys } from '../../shared/domain/families';
import { RandomStream, type DrawKey } from '../core/random';
import { norm2 } from '../core/vector';
import { requireNoiseInput, type NoiseModel, type NoisyData } from './noise-model';

const quantile = { short: 'Wichura 1988', full: 'M. J. Wichura: Algorithm AS 241: the percentage points of the normal distribution. Applied Statistics 37 (1988) 477-484 (normal values by the quantile of a uniform).', fromMemory: true };
const philox = { short: 'Salmon et al. 2011', full: 'J. K. Salmon, M. A. Moraes, R. O. Dror, D. E. Shaw: Parallel random numbers: as easy as 1, 2, 3. SC11, 2011.', fromMemory: true };

function drawGaussian(exact: boolean, clean: Float64Array, level: number, noiseScale: number, key: DrawKey): NoisyData {
  requireNoiseInput(clean, level, noiseScale);
  const data = new Float64Array(clean.length);
  new RandomStream(key).fillNormal(data);
  const target = level * noiseScale;
  const factor = exact ? target / norm2(data) : target / Math.sqrt(clean.length);
  for (let i = 0; i < data.length; i++) data[i] = factor * data[i];
  const noiseNorm = exact ? target : norm2(data);
  for (let i = 0; i < data.length; i++) data[i] = clean[i] + data[i];
  return { data, noiseNorm };
}

/** Independent normal entries, rescaled in each draw so that ||e|| = level * noiseScale (up to rounding). */
export const gaussianNoise: NoiseModel = {
  key: 'gaussian',
  name: 'Gaussian, exact level',
  summary: 'Independent normal values of equal variance, rescaled in every draw so that the norm of the noise is exactly the level times the reference norm.',
  formula: 'y^\\delta = y + \\delta\\,\\|y_{\\mathrm{ref}}\\|\\,\\frac{g}{\\|g\\|}, \\quad g \\sim \\mathcal{N}(0, I)',
  sources: [philox, quantile],
  exact: true,
  normal: true,
  families: familyKeys,
  draw: (clean, level, noiseScale, key) => drawGaussian(true, clean, level, noiseScale, key),
};

/** Independent normal entries with E ||e||^2 = (level * noiseScale)^2; the norm of one draw differs by about 1 / sqrt(2 m). */
export const gaussianExpectedNoise: NoiseModel = {
  key: 'gaussian-expected',
  name: 'Gaussian, level in expectation',
  summary: 'Independent normal values of equal variance; the mean square norm of the noise is the square of the level times the reference norm, and single draws scatter around it.',
  formula: 'y^\\delta = y + \\delta\\,\\frac{\\|y_{\\mathrm{ref}}\\|}{\\sqrt{m}}\\,g, \\quad g \\sim \\mathcal{N}(0, I)',
  sources: [philox, quantile],
  exact: false,
  normal: true,
  families: familyKeys,
  draw: (clean, level, noiseScale, key) => drawGaussian(false, clean, level, noiseScale, key),
};
