import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { cos, sin } from '../../core/math';
import { unitCircle, type MeshBoundary } from '../../mesh/mesh-boundary';
import { bodyCurve, isDisc, type ImpedanceBody } from './body-curve';
import { starBoundary } from './star-boundary';

/** What places the electrodes on the boundary. */
export type ElectrodeGeometry = Pick<EitGeometry, 'body' | 'electrodes' | 'electrodeCoverage' | 'firstElectrodeDeg' | 'numbering' | 'electrodeAnglesDeg'>;

/**
 * Electrodes in the electrode frame: the body, scaled to radius 1 and turned so that electrode 1 is centred at angle 0. Meshes are made
 * there, so that turning the whole experiment leaves the mesh as it is; `toBody` and `toFrame` change between frames (metres in the
 * body). Arc lengths are in radii, counter-clockwise from angle 0.
 */
export interface ElectrodeFrame {
  readonly count: number;
  readonly radius: number;
  readonly boundary: MeshBoundary;
  /** Arc length of the centre of electrode l, in the order of the numbering. */
  readonly centres: Float64Array;
  /** Half the width of an electrode along the boundary. */
  readonly halfWidth: number;
  /** Arc lengths of all ends, ascending from the start of the electrode at angle 0: start, end, start, end ... counter-clockwise. */
  readonly ends: readonly number[];
  toBody(x: number, y: number): [number, number];
  toFrame(x: number, y: number): [number, number];
}

export function electrodeFrame(geometry: ElectrodeGeometry): ElectrodeFrame {
  const { body, electrodes: count, electrodeAnglesDeg: angles } = geometry;
  const { radius } = body;
  const [c, s] = turn(angles ? angles[0] : geometry.firstElectrodeDeg);
  const boundary = frameBoundary(body, c, s);
  const { length } = boundary;
  const direction = geometry.numbering === 'clockwise' ? -1 : 1;
  const pitch = length / count;
  const halfWidth = 0.5 * geometry.electrodeCoverage * pitch;
  const centres = new Float64Array(count);
  for (let l = 0; l < count; l++) centres[l] = angles ? listedPlace(boundary, direction, angles[l] - angles[0]) : direction * l * pitch;
  const ends: number[] = [];
  // Counter-clockwise from electrode 1: the numbering itself, or backwards from its end.
  for (let k = 0; k < count; k++) {
    const centre = angles ? centres[placeOfElectrode(geometry, k)] + (direction < 0 && k > 0 ? length : 0) : k * pitch;
    ends.push(centre - halfWidth, centre + halfWidth);
  }
  return {
    count,
    radius,
    boundary,
    centres,
    halfWidth,
    ends,
    toBody: (x, y) => [radius * (c * x - s * y), radius * (s * x + c * y)],
    toFrame: (x, y) => [(c * x + s * y) / radius, (c * y - s * x) / radius],
  };
}

/** Arc length of the boundary's point at an angle (degrees in the frame), at most one turn from 0 in the direction of the numbering. */
function listedPlace(boundary: MeshBoundary, direction: 1 | -1, degrees: number): number {
  const [c, s] = turn(degrees);
  const place = boundary.arcLengthOf(c, s);
  return direction < 0 && place > 0 ? place - boundary.length : place;
}

/** The boundary of a body of radius 1, turned by minus the angle whose cosine and sine are c and s. */
function frameBoundary(body: ImpedanceBody, c: number, s: number): MeshBoundary {
  if (body.kind === 'disc' || isDisc(body)) return unitCircle;
  const order = Math.max(body.cosine.length, body.sine.length);
  const cosine: number[] = [];
  const sine: number[] = [];
  let ck = 1;
  let sk = 0;
  for (let k = 0; k < order; k++) {
    const next = ck * c - sk * s;
    sk = sk * c + ck * s;
    ck = next;
    const a = body.cosine[k] ?? 0;
    const b = body.sine[k] ?? 0;
    cosine.push(a * ck + b * sk);
    sine.push(b * ck - a * sk);
  }
  return starBoundary(bodyCurve({ body: { kind: 'star', radius: 1, cosine, sine } }));
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

/** Position in 0 .. count - 1 counter-clockwise of electrode l of the numbering, and the other way round. */
export function placeOfElectrode(geometry: Pick<EitGeometry, 'electrodes' | 'numbering'>, l: number): number {
  return geometry.numbering === 'clockwise' ? (geometry.electrodes - l) % geometry.electrodes : l;
}

/** Start and end of each electrode along the body's curve, radii from polar angle 0 counter-clockwise, in the order of the numbering. */
export function electrodePlaces(geometry: ElectrodeGeometry): { readonly from: number; readonly to: number }[] {
  const { centres, halfWidth, radius } = electrodeFrame(geometry);
  const first = bodyCurve(geometry).arcLength((Math.PI * (geometry.electrodeAnglesDeg?.[0] ?? geometry.firstElectrodeDeg)) / 180) / radius;
  return Array.from(centres, (centre) => ({ from: first + centre - halfWidth, to: first + centre + halfWidth }));
}

/** Index of the electrode that covers a place of the boundary (arc length, radii), -1 between electrodes. */
export function electrodeAt(frame: ElectrodeFrame, place: number): number {
  const { centres, halfWidth, boundary } = frame;
  for (let l = 0; l < centres.length; l++) {
    const d = place - centres[l];
    const distance = Math.abs(d - boundary.length * Math.round(d / boundary.length));
    if (distance < halfWidth) return l;
  }
  return -1;
}
