import { spreadAlong } from './curve-points';
import type { ShapeField, TruthInterface } from './truth-field';

type Vertex = readonly [number, number];

/** Twice the signed area of the triangle a b c, positive when counter-clockwise. */
const turn = (a: Vertex, b: Vertex, c: Vertex): number => (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);

function onSegment(a: Vertex, b: Vertex, p: Vertex): boolean {
  return Math.min(a[0], b[0]) <= p[0] && p[0] <= Math.max(a[0], b[0]) && Math.min(a[1], b[1]) <= p[1] && p[1] <= Math.max(a[1], b[1]);
}

function segmentsMeet(a: Vertex, b: Vertex, c: Vertex, d: Vertex): boolean {
  const d1 = turn(c, d, a);
  const d2 = turn(c, d, b);
  const d3 = turn(a, b, c);
  const d4 = turn(a, b, d);
  if (d1 * d2 < 0 && d3 * d4 < 0) return true;
  return (d1 === 0 && onSegment(c, d, a)) || (d2 === 0 && onSegment(c, d, b)) || (d3 === 0 && onSegment(a, b, c)) || (d4 === 0 && onSegment(a, b, d));
}

/** @throws RangeError when two vertices coincide, two edges meet, or the polygon has no area */
function requireSimple(vertices: readonly Vertex[]): void {
  const n = vertices.length;
  if (n < 3) throw new RangeError(`vertices must hold at least 3 points, not ${n}.`);
  for (let i = 0; i < n; i++) {
    const a = vertices[i];
    const b = vertices[(i + 1) % n];
    if (a[0] === b[0] && a[1] === b[1]) throw new RangeError(`vertices ${i + 1} and ${((i + 1) % n) + 1} coincide: leave one out.`);
    const c = vertices[(i + 2) % n];
    if (turn(a, b, c) === 0 && (b[0] - a[0]) * (c[0] - b[0]) + (b[1] - a[1]) * (c[1] - b[1]) < 0)
      throw new RangeError(`the edges at vertex ${((i + 1) % n) + 1} fold back on each other.`);
  }
  for (let i = 0; i < n; i++)
    for (let j = i + 2; j < n; j++) {
      if (i === 0 && j === n - 1) continue;
      if (segmentsMeet(vertices[i], vertices[i + 1], vertices[j], vertices[(j + 1) % n]))
        throw new RangeError(`the edges after vertices ${i + 1} and ${j + 1} meet: order the vertices so that no two edges cross.`);
    }
}

function areaAndCentroid(vertices: readonly Vertex[]): { area: number; x: number; y: number } {
  // Relative to the first vertex, against cancellation far from the origin.
  const [ox, oy] = vertices[0];
  let doubled = 0;
  let mx = 0;
  let my = 0;
  for (let i = 1; i + 1 < vertices.length; i++) {
    const t = turn(vertices[0], vertices[i], vertices[i + 1]);
    doubled += t;
    mx += t * (vertices[i][0] - ox + vertices[i + 1][0] - ox);
    my += t * (vertices[i][1] - oy + vertices[i + 1][1] - oy);
  }
  return { area: doubled / 2, x: ox + mx / (3 * doubled), y: oy + my / (3 * doubled) };
}

/** The outline of a simple polygon, counter-clockwise. */
export function polygonInterface(given: readonly Vertex[]): TruthInterface {
  const vertices = areaAndCentroid(given).area < 0 ? [...given].reverse() : given;
  const n = vertices.length;
  return {
    closed: true,
    corners: true,
    points(maxSpacing) {
      const points: number[] = [];
      for (let i = 0; i < n; i++) {
        const [ax, ay] = vertices[i];
        const [bx, by] = vertices[(i + 1) % n];
        const edge = (t: number, out: Float64Array): void => {
          out[0] = ax + t * (bx - ax);
          out[1] = ay + t * (by - ay);
        };
        for (const t of spreadAlong(edge, maxSpacing, 1)) points.push(ax + t * (bx - ax), ay + t * (by - ay));
      }
      return Float64Array.from(points);
    },
    project(x, y) {
      let best = Infinity;
      let px = 0;
      let py = 0;
      for (let i = 0; i < n; i++) {
        const [ax, ay] = vertices[i];
        const [bx, by] = vertices[(i + 1) % n];
        const ex = bx - ax;
        const ey = by - ay;
        const t = Math.max(0, Math.min(1, ((x - ax) * ex + (y - ay) * ey) / (ex * ex + ey * ey)));
        const qx = ax + t * ex;
        const qy = ay + t * ey;
        const d = (qx - x) * (qx - x) + (qy - y) * (qy - y);
        if (d < best) {
          best = d;
          px = qx;
          py = qy;
        }
      }
      return [px, py];
    },
    inside: insideTest(vertices),
  };
}

/** Crossing-number test (even-odd). */
function insideTest(vertices: readonly Vertex[]): (x: number, y: number) => boolean {
  const n = vertices.length;
  const xs = Float64Array.from(vertices, (v) => v[0]);
  const ys = Float64Array.from(vertices, (v) => v[1]);
  const xMin = Math.min(...xs);
  const xMax = Math.max(...xs);
  const yMin = Math.min(...ys);
  const yMax = Math.max(...ys);
  return (x, y) => {
    if (x < xMin || x > xMax || y < yMin || y > yMax) return false;
    let inside = false;
    for (let i = 0, j = n - 1; i < n; j = i++)
      if (ys[i] > y !== ys[j] > y && x < ((xs[j] - xs[i]) * (y - ys[i])) / (ys[j] - ys[i]) + xs[i]) inside = !inside;
    return inside;
  };
}

/** Constant value inside a simple polygon. @throws RangeError when it is not simple */
export function polygonField(vertices: readonly Vertex[]): ShapeField {
  requireSimple(vertices);
  const { area, x, y } = areaAndCentroid(vertices);
  if (area === 0) throw new RangeError('the polygon has no area.');
  const inside = insideTest(vertices);
  return { weightAt: (px, py) => (inside(px, py) ? 1 : 0), interfaces: [polygonInterface(vertices)], piecewiseConstant: true, x, y, area: Math.abs(area) };
}
