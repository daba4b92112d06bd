import type { NoiseReference } from '../../../shared/domain/phantom-definition';

/** What a noise level means, as every export repeats it. */
export const noiseWords = (reference: NoiseReference): string =>
  `Noise: Gaussian; its level is the Euclidean norm of the noise over that of the clean ${{ difference: 'difference signal', voltages: 'raw voltages', data: 'data' }[reference]}, exactly, in every draw`;
