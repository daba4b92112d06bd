import { z } from 'zod';
import { discBodySchema } from '../body';

export const beamKeys = ['parallel', 'fan'] as const;
export type BeamKey = (typeof beamKeys)[number];

/** Rays of one phantom: a matrix of some 200 MB at the finest cells. */
const largestRayCount = 65_536;

/**
 * Line integrals through a disc. Views stand at `firstAngleDeg + k arcDeg / views`, k = 0 .. views - 1: the direction of the
 * detector axis for a parallel beam, the place of the source for a fan. The detector has `detectors` cells of `detectorSpacing`
 * (m) each, centred on the axis; a fan's is flat, at `detectorDistance` beyond the centre, the source at `sourceDistance` before it.
 */
export const xrayGeometrySchema = z
  .strictObject({
    body: discBodySchema,
    beam: z.enum(beamKeys),
    views: z.int().min(1, 'At least one view.').max(720),
    firstAngleDeg: z.number().min(-360).max(360).default(0),
    arcDeg: z.number().min(1, 'At least 1 degree.').max(360, 'At most a full turn.'),
    detectors: z.int().min(2, 'At least two detector cells.').max(1024),
    detectorSpacing: z.number().positive().max(10),
    /** Fan beam only, m. */
    sourceDistance: z.number().positive().max(100).optional(),
    detectorDistance: z.number().min(0).max(100).optional(),
    /** Cells a side of the square of unknowns that the inversion lays over the body. */
    cells: z.int().min(8).max(128).default(40),
  })
  .superRefine((g, ctx) => {
    const fault = (path: string, message: string) => ctx.addIssue({ code: 'custom', path: [path], message });
    if (g.views * g.detectors > largestRayCount) fault('views', `At most ${largestRayCount} rays in all: ${g.views} views of ${g.detectors} detector cells are ${g.views * g.detectors}.`);
    if (g.beam === 'parallel') {
      if (g.sourceDistance !== undefined) fault('sourceDistance', 'A parallel beam has no source distance.');
      if (g.detectorDistance !== undefined) fault('detectorDistance', 'A parallel beam has no detector distance.');
      return;
    }
    if (g.sourceDistance === undefined) fault('sourceDistance', 'A fan beam needs the distance of the source from the centre.');
    else if (g.sourceDistance <= 1.05 * g.body.radius) fault('sourceDistance', 'The source must lie outside the body: at least 1.05 radii from the centre.');
    if (g.detectorDistance === undefined) fault('detectorDistance', 'A fan beam needs the distance of the detector from the centre.');
  });
export type XrayGeometry = z.infer<typeof xrayGeometrySchema>;
