import { z } from 'zod';
import { discBodySchema } from '../body';

export const electrodeCounts = [8, 16, 32] as const;
export const patternKeys = ['adjacent', 'trigonometric'] as const;
export type PatternKey = (typeof patternKeys)[number];
export const measurementKeys = ['adjacent-undriven', 'adjacent-all', 'electrode-voltages'] as const;
export type MeasurementKey = (typeof measurementKeys)[number];
/**
 * Complete electrode model on a disc. Electrode 1 is centred at `firstElectrodeDeg`; the others follow clockwise or
 * counter-clockwise at equal spacing. `electrodeCoverage` is the share of the boundary under all electrodes.
 */
export const eitGeometrySchema = z
  .strictObject({
    body: discBodySchema,
    electrodes: z.literal(electrodeCounts),
    electrodeCoverage: z.number().min(0.1, 'At least 10 % of the boundary.').max(0.9, 'At most 90 % of the boundary.'),
    firstElectrodeDeg: z.number().min(-360).max(360).default(90),
    numbering: z.enum(['clockwise', 'counter-clockwise']).default('clockwise'),
    contactImpedance: z.number().min(1e-7, 'At least 1e-7 ohm m².').max(10, 'At most 10 ohm m².'),
    pattern: z.enum(patternKeys),
    /** Amplitude of the current per unit height, A/m. */
    current: z.number().positive().max(100),
    measurement: z.enum(measurementKeys),
  })
  .refine((g) => !(g.pattern === 'trigonometric' && g.measurement === 'adjacent-undriven'), {
    path: ['measurement'],
    message: 'Trigonometric patterns drive every electrode: measure all adjacent pairs or all electrode voltages.',
  });
export type EitGeometry = z.infer<typeof eitGeometrySchema>;
