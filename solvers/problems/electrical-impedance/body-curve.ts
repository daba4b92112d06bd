import type { Body } from '../../../shared/domain/body';
import { atan2, cos, sin } from '../../core/math';

/** Bodies that carry electrodes. */
export type ImpedanceBody = Extract<Body, { kind: 'disc' | 'star' }>;

/** A point of the boundary and its derivatives by the parameter, m, m per rad, m per rad^2. */
export interface CurvePoint {
  readonly x: number;
  readonly y: number;
  readonly dx: number;
  readonly dy: number;
  readonly ddx: number;
  readonly ddy: number;
}

/** The boundary of a body, counter-clockwise, by the polar angle t (rad) about the origin. Lengths in m, period 2 pi. */
export interface BodyCurve {
  /** True for a disc centred at the origin, and for a star whose coefficients are all zero. */
  readonly disc: boolean;
  /** Of the definition, m. */
  readonly radius: number;
  /** Perimeter, m. */
  readonly length: number;
  /** r(t), m. */
  radiusAt(t: number): number;
  point(t: number): CurvePoint;
  /** The point on the ray through (x, y). */
  pointTowards(x: number, y: number): CurvePoint;
  /** Length from t = 0 to t, m; goes on over turns in both directions. */
  arcLength(t: number): number;
  /** Inverse of `arcLength`, rad. */
  parameterAt(s: number): number;
  inside(x: number, y: number): boolean;
  /** Distance to the boundary, m, right to first order near it; negative outside. Along the ray to the origin, times the cosine of its slope. */
  depth(x: number, y: number): number;
}

const twoPi = 2 * Math.PI;

/** No coefficient other than zero. */
export function isDisc(body: ImpedanceBody): boolean {
  return body.kind === 'disc' || [...body.cosine, ...body.sine].every((value) => value === 0);
}

/** The boundary of a body. Cost of a star: a table of arc lengths, about 2,000 points of the curve. */
export function bodyCurve(geometry: { readonly body: ImpedanceBody }): BodyCurve {
  const { body } = geometry;
  return body.kind === 'disc' || isDisc(body) ? circle(body.radius) : star(body.radius, body.cosine, body.sine);
}

function circle(radius: number): BodyCurve {
  const pointOf = (c: number, s: number): CurvePoint => {
    const x = radius * c;
    const y = radius * s;
    return { x, y, dx: -y, dy: x, ddx: -x, ddy: -y };
  };
  return {
    disc: true,
    radius,
    length: twoPi * radius,
    radiusAt: () => radius,
    point: (t) => pointOf(cos(t), sin(t)),
    pointTowards: (x, y) => pointOf(...direction(x, y)),
    arcLength: (t) => radius * t,
    parameterAt: (s) => s / radius,
    inside: (x, y) => (x / radius) * (x / radius) + (y / radius) * (y / radius) < 1,
    depth: (x, y) => radius - Math.sqrt(x * x + y * y),
  };
}

/** Gauss-Legendre points and weights on (0, 1), eight points (Abramowitz and Stegun 1964, table 25.4). */
const gauss: readonly (readonly [number, number])[] = [
  [0.9602898564975363, 0.1012285362903763],
  [0.7966664774136267, 0.2223810344533745],
  [0.525532409916329, 0.3137066458778873],
  [0.1834346424956498, 0.362683783378362],
].flatMap(([x, w]) => [[0.5 * (1 - x), 0.5 * w], [0.5 * (1 + x), 0.5 * w]] as const);

/** Panels of the table of arc lengths: with eight points each the length of a curve of eight harmonics is right to rounding. */
const panels = 256;

function star(radius: number, cosine: readonly number[], sine: readonly number[]): BodyCurve {
  const order = Math.max(cosine.length, sine.length);
  // r, r', r'' over the radius at the angle whose cosine and sine are c and s.
  const r = new Float64Array(3);
  const evaluate = (c: number, s: number): void => {
    let value = 1, first = 0, second = 0, ck = 1, sk = 0;
    for (let k = 1; k <= order; k++) {
      const next = ck * c - sk * s;
      sk = sk * c + ck * s;
      ck = next;
      const a = k <= cosine.length ? cosine[k - 1] : 0;
      const b = k <= sine.length ? sine[k - 1] : 0;
      const even = a * ck + b * sk;
      value += even;
      first += k * (b * ck - a * sk);
      second -= k * k * even;
    }
    r[0] = value;
    r[1] = first;
    r[2] = second;
  };
  const speed = (t: number): number => {
    evaluate(cos(t), sin(t));
    return radius * Math.sqrt(r[0] * r[0] + r[1] * r[1]);
  };
  const between = (from: number, to: number): number => {
    let sum = 0;
    for (const [x, w] of gauss) sum += w * speed(from + x * (to - from));
    return sum * (to - from);
  };
  const width = twoPi / panels;
  const table = new Float64Array(panels + 1);
  for (let i = 0; i < panels; i++) table[i + 1] = table[i] + between(i * width, (i + 1) * width);
  const length = table[panels];
  /** The quotient rounded down, and what is left of a period. */
  const reduce = (value: number, period: number): [number, number] => {
    const turns = Math.floor(value / period);
    return [turns, Math.min(period, Math.max(0, value - turns * period))];
  };
  const arcLength = (t: number): number => {
    const [turns, angle] = reduce(t, twoPi);
    const i = Math.min(panels - 1, Math.floor(angle / width));
    return turns * length + table[i] + between(i * width, angle);
  };
  const pointOf = (c: number, s: number): CurvePoint => {
    evaluate(c, s);
    const [r0, r1, r2] = r;
    return {
      x: radius * r0 * c,
      y: radius * r0 * s,
      dx: radius * (r1 * c - r0 * s),
      dy: radius * (r1 * s + r0 * c),
      ddx: radius * (r2 * c - 2 * r1 * s - r0 * c),
      ddy: radius * (r2 * s + 2 * r1 * c - r0 * s),
    };
  };
  return {
    disc: false,
    radius,
    length,
    radiusAt(t) {
      evaluate(cos(t), sin(t));
      return radius * r[0];
    },
    point: (t) => pointOf(cos(t), sin(t)),
    pointTowards: (x, y) => pointOf(...direction(x, y)),
    arcLength,
    parameterAt(value) {
      const [turns, s] = reduce(value, length);
      let low = 0;
      let high = panels;
      while (high - low > 1) {
        const middle = (low + high) >> 1;
        if (table[middle] <= s) low = middle;
        else high = middle;
      }
      const from = low * width;
      let t = from + (width * (s - table[low])) / (table[low + 1] - table[low]);
      // Newton's method; the speed hardly changes within a panel, so the error squares at every step.
      for (let step = 0; step < 6; step++) {
        const move = (table[low] + between(from, t) - s) / speed(t);
        t -= move;
        if (Math.abs(move) <= 1e-15) break;
      }
      return turns * twoPi + t;
    },
    inside(x, y) {
      const rho = Math.sqrt(x * x + y * y);
      if (rho === 0) return true;
      evaluate(x / rho, y / rho);
      return rho < radius * r[0];
    },
    depth(x, y) {
      const rho = Math.sqrt(x * x + y * y);
      evaluate(...direction(x, y));
      return ((radius * r[0] - rho) * r[0]) / Math.sqrt(r[0] * r[0] + r[1] * r[1]);
    },
  };
}

/** Cosine and sine of the polar angle of a point; of the origin, of angle 0. */
function direction(x: number, y: number): [number, number] {
  const rho = Math.sqrt(x * x + y * y);
  return rho > 0 ? [x / rho, y / rho] : [1, 0];
}

/** Polar angle of a point, in [0, 2 pi). */
export function polarAngle(x: number, y: number): number {
  const t = atan2(y, x);
  return t < 0 ? t + twoPi : t;
}
