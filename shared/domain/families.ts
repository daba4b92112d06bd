import { z } from 'zod';

/** Problem families. A family appears here once its forward problem is registered in `solvers/problems`. */
export const familyKeys = ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'] as const;
export const familyKeySchema = z.enum(familyKeys);
export type FamilyKey = z.infer<typeof familyKeySchema>;

export interface FamilyWords {
  readonly name: string;
  readonly line: string;
  /** What a frame of data is called in a sentence: 'voltages'. */
  readonly dataName: string;
  /** What is reconstructed, and its unit; '' for a pure number. */
  readonly valueName: string;
  readonly valueUnit: string;
  /** Unit of the data; '' for a pure number. */
  readonly dataUnit: string;
  /** One group of values of a frame: 'pattern', 'view', 'row'. */
  readonly groupNoun: string;
}

export const familyNames: Record<FamilyKey, FamilyWords> = {
  'electrical-impedance': {
    name: 'Electrical impedance', line: 'conductivity from electrode voltages', dataName: 'voltages',
    valueName: 'conductivity', valueUnit: 'S/m', dataUnit: 'V', groupNoun: 'pattern',
  },
  'x-ray': {
    name: 'X-ray tomography', line: 'attenuation from line integrals', dataName: 'line integrals',
    valueName: 'attenuation', valueUnit: '1/m', dataUnit: '', groupNoun: 'view',
  },
  'integral-equation': {
    name: 'Integral equation', line: 'a function of one variable from an integral of the first kind', dataName: 'right-hand side',
    valueName: 'value', valueUnit: '', dataUnit: '', groupNoun: 'curve',
  },
  deblurring: {
    name: 'Deblurring', line: 'an image from its convolution with a point-spread function', dataName: 'blurred image',
    valueName: 'intensity', valueUnit: '', dataUnit: '', groupNoun: 'row',
  },
};
