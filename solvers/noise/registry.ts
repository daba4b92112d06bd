import { findByKey } from '../core/registry';
import { gaussianExpectedNoise, gaussianNoise } from './gaussian';
import type { NoiseModel } from './noise-model';

export const noiseModels: readonly NoiseModel[] = [gaussianNoise, gaussianExpectedNoise];

/** @throws RangeError for an unknown key. */
export const getNoiseModel = (key: string): NoiseModel => findByKey(noiseModels, key, 'noise model');
