import { cos, sin } from '../core/math';
import { spreadAlong } from './curve-points';
import type { ShapeField, TruthInterface } from './truth-field';

const degree = Math.PI / 180;

export interface EllipseGeometry {
  readonly x: number;
  readonly y: number;
  readonly semiAxisA: number;
  readonly semiAxisB: number;
  readonly angleDeg: number;
}

/** Squared elliptic radius: 0 at the centre, 1 on the ellipse. */
export function ellipticRadiusSquared(g: EllipseGeometry): (x: number, y: number) => number {
  const c = cos(g.angleDeg * degree);
  const s = sin(g.angleDeg * degree);
  return (x, y) => {
    const dx = x - g.x;
    const dy = y - g.y;
    const u = (c * dx + s * dy) / g.semiAxisA;
    const v = (c * dy - s * dx) / g.semiAxisB;
    return u * u + v * v;
  };
}

/** The ellipse as a curve, counter-clockwise. */
export function ellipseInterface(g: EllipseGeometry): TruthInterface {
  const c = cos(g.angleDeg * degree);
  const s = sin(g.angleDeg * degree);
  const radius2 = ellipticRadiusSquared(g);
  const curve = (t: number, out: Float64Array): void => {
    const u = g.semiAxisA * cos(2 * Math.PI * t);
    const v = g.semiAxisB * sin(2 * Math.PI * t);
    out[0] = g.x + c * u - s * v;
    out[1] = g.y + s * u + c * v;
  };
  return {
    closed: true,
    corners: false,
    points(maxSpacing) {
      const ts = spreadAlong(curve, maxSpacing, 12);
      const points = new Float64Array(2 * ts.length);
      const point = new Float64Array(2);
      for (let i = 0; i < ts.length; i++) {
        curve(ts[i], point);
        points[2 * i] = point[0];
        points[2 * i + 1] = point[1];
      }
      return points;
    },
    project(x, y) {
      const dx = x - g.x;
      const dy = y - g.y;
      const [u, v] = nearestOnEllipse(g.semiAxisA, g.semiAxisB, c * dx + s * dy, c * dy - s * dx);
      return [g.x + c * u - s * v, g.y + s * u + c * v];
    },
    inside: (x, y) => radius2(x, y) < 1,
    curveAt(t, out) {
      const turn = 2 * Math.PI;
      const u = g.semiAxisA * cos(turn * t);
      const v = g.semiAxisB * sin(turn * t);
      const du = -turn * g.semiAxisA * sin(turn * t);
      const dv = turn * g.semiAxisB * cos(turn * t);
      out[0] = g.x + c * u - s * v;
      out[1] = g.y + s * u + c * v;
      out[2] = c * du - s * dv;
      out[3] = s * du + c * dv;
      out[4] = -turn * turn * (c * u - s * v);
      out[5] = -turn * turn * (s * u + c * v);
    },
  };
}

/**
 * Nearest point of an axis-parallel ellipse: the root of (a u / (t + a^2))^2 + (b v / (t + b^2))^2 = 1 in t > -min(a, b)^2,
 * found by bisection and Newton steps (Eberly 2013, from memory).
 */
function nearestOnEllipse(a: number, b: number, u: number, v: number): [number, number] {
  if (b > a) {
    const [p, q] = nearestOnEllipse(b, a, v, u);
    return [q, p];
  }
  const su = u < 0 ? -1 : 1;
  const sv = v < 0 ? -1 : 1;
  const p = Math.abs(u);
  const q = Math.abs(v);
  if (a === b) {
    const r = Math.sqrt(p * p + q * q);
    return r > 0 ? [(a * u) / r, (a * v) / r] : [a, 0];
  }
  if (q === 0) {
    const limit = (a * a - b * b) / a;
    if (p >= limit) return [su * a, 0];
    const x = (a * a * p) / (a * a - b * b);
    return [su * x, sv * b * Math.sqrt(Math.max(0, 1 - (x / a) * (x / a)))];
  }
  // Bracket: at the lower end the second term alone is 1 or more, at the upper end the sum is at most 1.
  let low = -b * b + b * q;
  let high = -b * b + Math.sqrt(a * a * p * p + b * b * q * q);
  let t = (low + high) / 2;
  for (let step = 0; step < 100; step++) {
    const da = t + a * a;
    const db = t + b * b;
    const fu = (a * p) / da;
    const fv = (b * q) / db;
    const f = fu * fu + fv * fv - 1;
    if (f > 0) low = t;
    else high = t;
    let next = t + f / (2 * ((fu * fu) / da + (fv * fv) / db));
    if (!(next > low && next < high)) next = (low + high) / 2;
    const moved = Math.abs(next - t);
    t = next;
    if (moved <= 4e-16 * (Math.abs(t) + b * b) || high - low === 0) break;
  }
  return [(su * a * a * p) / (t + a * a), (sv * b * b * q) / (t + b * b)];
}

/** Constant value inside an ellipse. */
export function ellipseField(g: EllipseGeometry): ShapeField {
  const radius2 = ellipticRadiusSquared(g);
  return {
    weightAt: (x, y) => (radius2(x, y) < 1 ? 1 : 0),
    interfaces: [ellipseInterface(g)],
    piecewiseConstant: true,
    x: g.x,
    y: g.y,
    area: Math.PI * g.semiAxisA * g.semiAxisB,
  };
}
