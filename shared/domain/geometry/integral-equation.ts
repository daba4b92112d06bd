import { z } from 'zod';

/** Published test equations of the first kind; their formulas and sources are in `solvers/problems/integral-equation`. */
export const equationKeys = ['phillips', 'shaw', 'gravity', 'second-derivative', 'baart', 'fox-goodwin', 'inverse-heat'] as const;
export type EquationKey = (typeof equationKeys)[number];

/** An equation of the first kind on its own interval. `cells` unknowns, `points` data. */
export const integralEquationGeometrySchema = z.strictObject({
  equation: z.enum(equationKeys),
  cells: z.int().min(8).max(512).default(200),
  points: z.int().min(8).max(512).default(200),
  /** Depth of the masses for gravity surveying, in the unit of the interval. */
  depth: z.number().min(0.05).max(2).optional(),
  /** Stiffness of the inverse heat equation: small is severely, 5 mildly ill-posed. */
  diffusivity: z.number().min(0.5).max(5).optional(),
}).superRefine((g, ctx) => {
  if (g.depth !== undefined && g.equation !== 'gravity') ctx.addIssue({ code: 'custom', path: ['depth'], message: 'Only gravity surveying has a depth.' });
  if (g.diffusivity !== undefined && g.equation !== 'inverse-heat') ctx.addIssue({ code: 'custom', path: ['diffusivity'], message: 'Only the inverse heat equation has this number.' });
});
export type IntegralEquationGeometry = z.infer<typeof integralEquationGeometrySchema>;
