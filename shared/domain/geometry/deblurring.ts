import { z } from 'zod';
import { rectangleBodySchema } from '../body';

export const pointSpreadKeys = ['gaussian', 'disc', 'motion'] as const;
export type PointSpreadKey = (typeof pointSpreadKeys)[number];
export const edgeKeys = ['zero', 'periodic', 'reflective'] as const;
export type EdgeKey = (typeof edgeKeys)[number];

/**
 * An image seen through a point-spread function. `spread` in m: the standard deviation of a Gaussian, the radius of a disc, half the
 * length of a motion. The data are simulated on a larger field; `edge` says what the inversion assumes beyond the picture.
 */
export const deblurringGeometrySchema = z.strictObject({
  body: rectangleBodySchema,
  pointSpread: z.enum(pointSpreadKeys),
  spread: z.number().positive().max(10),
  /** Direction of a motion, degrees counter-clockwise from x. */
  motionDeg: z.number().min(-360).max(360).optional(),
  /** Pixels along the longer side of the data and of the unknowns. */
  cells: z.int().min(8).max(96).default(32),
  edge: z.enum(edgeKeys),
}).superRefine((g, ctx) => {
  if (g.motionDeg !== undefined && g.pointSpread !== 'motion') ctx.addIssue({ code: 'custom', path: ['motionDeg'], message: 'Only a motion has a direction.' });
  const across = g.pointSpread === 'gaussian' ? 6 * g.spread : 2 * g.spread;
  if (across > Math.min(g.body.width, g.body.height))
    ctx.addIssue({ code: 'custom', path: ['spread'], message: 'The point-spread function (six deviations of a Gaussian, the diameter of a disc, the length of a motion) must not be wider than the picture.' });
});
export type DeblurringGeometry = z.infer<typeof deblurringGeometrySchema>;
