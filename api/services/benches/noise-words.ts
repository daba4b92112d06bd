import type { NoiseReference } from '../../../shared/domain/phantom-definition';

/** What a noise level means, as every export repeats it. */
export const noiseWords = (reference: NoiseReference): string =>
  reference === 'difference'
    ? 'Noise: Gaussian; its level is the Euclidean norm of the noise over that of the clean difference signal, exactly, in every draw'
    : 'Noise: Gaussian; its level is the Euclidean norm of the noise over that of the clean raw voltages, exactly, in every draw';
