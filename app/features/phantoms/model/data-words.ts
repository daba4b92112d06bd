import type { FamilyKey } from '../../../../shared/domain/families';

/** How a family's data are shown and named. */
export interface DataWords {
  /** Of a group of values and of a value, for axes. */
  readonly group: string;
  readonly value: string;
  /** Of the whole, in a sentence. */
  readonly frame: string;
  /** Data are seen as a picture, one row a group; else as lines. */
  readonly picture: { readonly name: string; readonly lines: string } | null;
  /** The reference tells something: the data of the background differ from nothing. */
  readonly residual: boolean;
}

export const dataWords: Record<FamilyKey, DataWords> = {
  'electrical-impedance': { group: 'drive pattern', value: 'measured between electrodes', frame: 'boundary voltages', picture: null, residual: true },
  'x-ray': { group: 'view', value: 'detector cell', frame: 'line integrals', picture: { name: 'Sinogram', lines: 'One view' }, residual: false },
  'integral-equation': { group: 'right-hand side', value: 'place s', frame: 'right-hand side', picture: null, residual: false },
  deblurring: { group: 'row', value: 'pixel', frame: 'blurred image', picture: { name: 'Blurred image', lines: 'One row' }, residual: false },
};
