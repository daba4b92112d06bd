import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { cos, sin } from '../../core/math';

/**
 * Electrodes in the electrode frame: the unit disc turned so that electrode 1 is centred at angle 0. Meshes are made there, so
 * that turning the whole experiment leaves the mesh as it is; `toBody` and `toFrame` change between frames (metres in the body).
 */
export interface ElectrodeFrame {
  readonly count: number;
  readonly radius: number;
  /** Angle of the centre of electrode l in the frame, rad, in the order of the numbering. */
  readonly centres: Float64Array;
  /** Half the angular width of an electrode, rad. */
  readonly halfWidth: number;
  /** Angles of all ends, ascending from the start of the electrode at angle 0: start, end, start, end ... counter-clockwise. */
  readonly ends: readonly number[];
  toBody(x: number, y: number): [number, number];
  toFrame(x: number, y: number): [number, number];
}

export function electrodeFrame(geometry: EitGeometry): ElectrodeFrame {
  const count = geometry.electrodes;
  const radius = geometry.body.radius;
  const direction = geometry.numbering === 'clockwise' ? -1 : 1;
  const pitch = (2 * Math.PI) / count;
  const halfWidth = 0.5 * geometry.electrodeCoverage * pitch;
  const centres = new Float64Array(count);
  for (let l = 0; l < count; l++) centres[l] = direction * l * pitch;
  const ends: number[] = [];
  for (let k = 0; k < count; k++) ends.push(k * pitch - halfWidth, k * pitch + halfWidth);
  const [c, s] = turn(geometry.firstElectrodeDeg);
  return {
    count,
    radius,
    centres,
    halfWidth,
    ends,
    toBody: (x, y) => [radius * (c * x - s * y), radius * (s * x + c * y)],
    toFrame: (x, y) => [(c * x + s * y) / radius, (c * y - s * x) / radius],
  };
}

/** Angle in the body, rad, of the centre of electrode l (0-based). */
export function electrodeAngle(geometry: EitGeometry, l: number): number {
  const direction = geometry.numbering === 'clockwise' ? -1 : 1;
  return (geometry.firstElectrodeDeg * Math.PI) / 180 + (direction * l * 2 * Math.PI) / geometry.electrodes;
}

/** Cosine and sine of an angle in degrees, exact at multiples of 90. */
function turn(degrees: number): [number, number] {
  const d = degrees - 360 * Math.floor(degrees / 360);
  if (d === 0) return [1, 0];
  if (d === 90) return [0, 1];
  if (d === 180) return [-1, 0];
  if (d === 270) return [0, -1];
  const a = (d * Math.PI) / 180;
  return [cos(a), sin(a)];
}

/** Position in 0 .. count - 1 counter-clockwise of electrode l of the numbering. */
export function placeOfElectrode(geometry: EitGeometry, l: number): number {
  return geometry.numbering === 'clockwise' ? (geometry.electrodes - l) % geometry.electrodes : l;
}
