import { findByKey } from '../core/registry';
import { gainNoise } from './gain';
import { gaussianExpectedNoise, gaussianNoise } from './gaussian';
import type { NoiseModel } from './noise-model';
import { outlierNoise } from './outliers';
import { poissonNoise } from './poisson';

export const noiseModels: readonly NoiseModel[] = [gaussianNoise, gaussianExpectedNoise, gainNoise, outlierNoise, poissonNoise];

/** @throws RangeError for an unknown key. */
export const getNoiseModel = (key: string): NoiseModel => findByKey(noiseModels, key, 'noise model');
