import type { TruthInterface } from '../../../truth/truth-field';
import type { BodyCurve } from '../body-curve';

/** A closed smooth curve, counter-clockwise. Lengths in radii of the body. */
export interface SmoothCurve {
  /** The parameter runs from 0 to this and starts again. */
  readonly period: number;
  /** Position, first and second derivative by the parameter: x, y, x', y', x'', y''. */
  at(t: number, out: Float64Array): void;
}

/** The boundary of a body, by the polar angle. */
export function outerCurve(body: BodyCurve): SmoothCurve {
  const scale = 1 / body.radius;
  return {
    period: 2 * Math.PI,
    at(t, out) {
      const p = body.point(t);
      out[0] = p.x * scale;
      out[1] = p.y * scale;
      out[2] = p.dx * scale;
      out[3] = p.dy * scale;
      out[4] = p.ddx * scale;
      out[5] = p.ddy * scale;
    },
  };
}

/** A smooth outline of a truth, or null where it has corners. */
export function outlineCurve(outline: TruthInterface, radius: number): SmoothCurve | null {
  const { curveAt } = outline;
  if (!curveAt) return null;
  const scale = 1 / radius;
  return {
    period: 1,
    at(t, out) {
      curveAt(t, out);
      for (let i = 0; i < 6; i++) out[i] *= scale;
    },
  };
}
