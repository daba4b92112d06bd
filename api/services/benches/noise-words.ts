import type { NoiseReference } from '../../../shared/domain/phantom-definition';
import { noiseModels } from '../../../solvers/noise/registry';

/** 'Gaussian, exact level'. */
export const noiseModelName = (key: string): string => noiseModels.find((model) => model.key === key)?.name ?? key;

/** What a noise level means, as every export repeats it. */
export const noiseWords = (reference: NoiseReference, model = 'gaussian'): string =>
  `Noise: ${noiseModelName(model)}; its level is the Euclidean norm of the noise over that of the clean ${{ difference: 'difference signal', voltages: 'raw voltages', data: 'data' }[reference]}${noiseModels.find((own) => own.key === model)?.exact ? ', exactly, in every draw' : ', in expectation'}`;
