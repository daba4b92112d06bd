import { bodyCurve, type ImpedanceBody } from './body-curve';
import { electrodePlaces, type ElectrodeGeometry } from './electrodes';

/** What drawings need of a body and its electrodes. Lengths in m, x, y pairs counter-clockwise. */
export function bodyOutline(geometry: { readonly body: ImpedanceBody }, points: number): Float64Array {
  if (!(Number.isInteger(points) && points >= 3)) throw new RangeError(`An outline needs at least 3 points, not ${points}.`);
  const curve = bodyCurve(geometry);
  const outline = new Float64Array(2 * points);
  for (let i = 0; i < points; i++) {
    const { x, y } = curve.point(curve.parameterAt((i * curve.length) / points));
    outline[2 * i] = x;
    outline[2 * i + 1] = y;
  }
  return outline;
}

export interface ElectrodeArc {
  /** Centre, and the outward unit normal there. */
  readonly centre: readonly [number, number];
  readonly normal: readonly [number, number];
  /** Points along the electrode from one end to the other, x, y pairs. */
  readonly points: Float64Array;
  /** Polar angles of its start, centre and end about the origin, rad, ascending. */
  readonly start: number;
  readonly middle: number;
  readonly end: number;
}

/**
 * The electrodes in the order of their numbering.
 * @param points of each arc, at least 2
 */
export function electrodeArcs(geometry: ElectrodeGeometry, points = 9): ElectrodeArc[] {
  if (!(Number.isInteger(points) && points >= 2)) throw new RangeError(`An arc needs at least 2 points, not ${points}.`);
  const curve = bodyCurve(geometry);
  const { radius } = geometry.body;
  return electrodePlaces(geometry).map(({ from, to }) => {
    const arc = new Float64Array(2 * points);
    for (let i = 0; i < points; i++) {
      const { x, y } = curve.point(curve.parameterAt(radius * (from + ((to - from) * i) / (points - 1))));
      arc[2 * i] = x;
      arc[2 * i + 1] = y;
    }
    const middle = curve.parameterAt(0.5 * radius * (from + to));
    const { x, y, dx, dy } = curve.point(middle);
    const speed = Math.sqrt(dx * dx + dy * dy);
    return { centre: [x, y], normal: [dy / speed, -dx / speed], points: arc, start: curve.parameterAt(radius * from), middle, end: curve.parameterAt(radius * to) };
  });
}
