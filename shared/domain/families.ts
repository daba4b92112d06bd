import { z } from 'zod';

/** Problem families. A family appears here once its forward problem is registered in `solvers/problems`. */
export const familyKeys = ['electrical-impedance'] as const;
export const familyKeySchema = z.enum(familyKeys);
export type FamilyKey = z.infer<typeof familyKeySchema>;

export const familyNames: Record<FamilyKey, { name: string; line: string; dataName: string }> = {
  'electrical-impedance': {
    name: 'Electrical impedance',
    line: 'conductivity from electrode voltages',
    dataName: 'voltages',
  },
};
