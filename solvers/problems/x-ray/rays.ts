import type { XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import { cos, sin } from '../../core/math';

/** The line of points (nx, ny) offset + t (-ny, nx), t in m, (nx, ny) of length 1. */
export interface Ray {
  readonly nx: number;
  readonly ny: number;
  /** Signed distance from the origin, m. */
  readonly offset: number;
}

const degree = Math.PI / 180;

/** cos and sin of an angle in degrees, exact at multiples of 90. */
export function directionOf(angleDeg: number): [number, number] {
  const turn = angleDeg - 360 * Math.floor(angleDeg / 360);
  const quarter = Math.round(turn / 90);
  const rest = (turn - 90 * quarter) * degree;
  const c = cos(rest);
  const s = sin(rest);
  switch (quarter % 4) {
    case 0:
      return [c, s];
    case 1:
      return [-s, c];
    case 2:
      return [-c, -s];
    default:
      return [s, -c];
  }
}

/** Angle of each view, degrees. */
export function viewAngles({ views, firstAngleDeg, arcDeg }: XrayGeometry): number[] {
  return Array.from({ length: views }, (_, k) => firstAngleDeg + (k * arcDeg) / views);
}

/** Coordinate of the middle of a detector cell on the detector axis, m; 0 is the middle of the detector. */
export function detectorCentre(geometry: XrayGeometry, cell: number): number {
  return (cell - (geometry.detectors - 1) / 2) * geometry.detectorSpacing;
}

/** Distances of source and detector of a fan beam from the centre, m. @throws RangeError where the geometry leaves them out */
export function fanDistances({ sourceDistance, detectorDistance }: XrayGeometry): { source: number; detector: number } {
  if (sourceDistance === undefined || detectorDistance === undefined) throw new RangeError('A fan beam needs the distances of its source and of its detector.');
  return { source: sourceDistance, detector: detectorDistance };
}

/**
 * The rays of one view, by the coordinate u (m) on the detector axis. Parallel at angle theta: the axis is (cos theta, sin theta), the
 * rays run along (-sin theta, cos theta). Fan: the source stands at D (cos beta, sin beta), the flat detector at the far side of the
 * centre along (-sin beta, cos beta), so that the ray through the centre is that of a parallel view at beta + 90 degrees, seen from its source.
 */
export function viewRays(geometry: XrayGeometry, angleDeg: number): (u: number) => Ray {
  const [c, s] = directionOf(angleDeg);
  if (geometry.beam === 'parallel') return (u) => ({ nx: c, ny: s, offset: u });
  const { source, detector } = fanDistances(geometry);
  return (u) => {
    // From the source to the detector, in the frame of the view: (source + detector) along the axis, u across.
    const length = Math.sqrt((source + detector) * (source + detector) + u * u);
    const along = (source + detector) / length;
    const across = u / length;
    // Direction d = -along (c, s) + across (-s, c); the normal is (d_y, -d_x).
    return { nx: -along * s + across * c, ny: along * c + across * s, offset: source * across };
  };
}
