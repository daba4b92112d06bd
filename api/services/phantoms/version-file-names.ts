import type { FamilyKey } from '../../../shared/domain/families';

export const versionFileNames = ['definition.json', 'truth.npy', 'voltages.csv', 'data.csv', 'noisy-frames.npy', 'frames.csv', 'README.txt'] as const;
export type VersionFileName = (typeof versionFileNames)[number];

/** The table of clean data: voltages where they are voltages. */
export const dataFileName = (family: FamilyKey): 'voltages.csv' | 'data.csv' => (family === 'electrical-impedance' ? 'voltages.csv' : 'data.csv');
