/** Where a ray enters and leaves the parts of a ground truth. */
import type { TruthDefinition } from '../../../shared/domain/truth-definition';
import { cos, sin } from '../../core/math';
import type { Ray } from './rays';

type Shape = Extract<TruthDefinition, { kind: 'shapes' }>['shapes'][number];

/** Adds the parameters t of the points where a ray crosses an outline. */
type Crossings = (ray: Ray, add: (t: number) => void) => void;

const degree = Math.PI / 180;

/** Both crossings of an ellipse: the roots of a quadratic in t. A ray that only touches crosses nothing. */
function ellipseCrossings(g: { x: number; y: number; semiAxisA: number; semiAxisB: number; angleDeg: number }): Crossings {
  const c = cos(g.angleDeg * degree);
  const s = sin(g.angleDeg * degree);
  return (ray, add) => {
    // In the frame where the ellipse is the unit circle: p + t e.
    const ox = ray.nx * ray.offset - g.x;
    const oy = ray.ny * ray.offset - g.y;
    const px = (c * ox + s * oy) / g.semiAxisA;
    const py = (c * oy - s * ox) / g.semiAxisB;
    const ex = (-c * ray.ny + s * ray.nx) / g.semiAxisA;
    const ey = (c * ray.nx + s * ray.ny) / g.semiAxisB;
    const square = ex * ex + ey * ey;
    // |p x e|^2 <= |e|^2 where they meet; without the cancellation of b^2 - 4 a c.
    const cross = px * ey - py * ex;
    const rest = square - cross * cross;
    if (!(rest > 0)) return;
    const middle = -(px * ex + py * ey) / square;
    const half = Math.sqrt(rest) / square;
    add(middle - half);
    add(middle + half);
  };
}

/** Crossings of the edges whose ends lie on two sides of the ray; a corner on the ray counts as on its left. */
function polygonCrossings(vertices: readonly (readonly [number, number])[]): Crossings {
  const n = vertices.length;
  return (ray, add) => {
    let [x, y] = vertices[n - 1];
    let side = x * ray.nx + y * ray.ny - ray.offset;
    let along = y * ray.nx - x * ray.ny;
    for (let i = 0; i < n; i++) {
      [x, y] = vertices[i];
      const nextSide = x * ray.nx + y * ray.ny - ray.offset;
      const nextAlong = y * ray.nx - x * ray.ny;
      if (side > 0 !== nextSide > 0) add(along + (side / (side - nextSide)) * (nextAlong - along));
      side = nextSide;
      along = nextAlong;
    }
  };
}

function shapeCrossings(shape: Shape): Crossings {
  switch (shape.kind) {
    case 'ellipse':
    case 'bump':
      return ellipseCrossings(shape);
    case 'polygon':
      return polygonCrossings(shape.vertices);
    case 'annulus': {
      const circle = (radius: number) => ellipseCrossings({ x: shape.x, y: shape.y, semiAxisA: radius, semiAxisB: radius, angleDeg: 0 });
      const outer = circle(shape.outerRadius);
      const inner = circle(shape.innerRadius);
      return (ray, add) => {
        outer(ray, add);
        inner(ray, add);
      };
    }
  }
}

/** Crossings with the lines through the pixel centres of an array and with its rim: between them it is a quadratic along the ray. */
function arrayCrossings({ rows, cols, extent }: Extract<TruthDefinition, { kind: 'array' }>): Crossings {
  const lines = (from: number, to: number, count: number): Float64Array => {
    const step = (to - from) / count;
    return Float64Array.from({ length: count + 2 }, (_, k) => (k === 0 ? from : k === count + 1 ? to : from + (k - 0.5) * step));
  };
  const xs = lines(extent.xMin, extent.xMax, cols);
  const ys = lines(extent.yMin, extent.yMax, rows);
  return (ray, add) => {
    const px = ray.nx * ray.offset;
    const py = ray.ny * ray.offset;
    if (Math.abs(ray.ny) > 1e-12) for (const x of xs) add((px - x) / ray.ny);
    if (Math.abs(ray.nx) > 1e-12) for (const y of ys) add((y - py) / ray.nx);
  };
}

/** How the truth behaves between the breaks: by what rule a piece is integrated. */
export interface RayBreaks {
  /** All crossings of a ray, in any order. */
  readonly crossings: Crossings;
  /** Gauss-Legendre points that integrate a piece exactly; 0 where no number does. */
  readonly points: number;
}

/** Smooth bumps on one another, at most, that are integrated to rounding. */
const stackedBumps = 4;

/** Breaks of a truth along any ray. */
export function rayBreaks(truth: TruthDefinition): RayBreaks {
  switch (truth.kind) {
    case 'shapes': {
      const all = truth.shapes.map(shapeCrossings);
      const bumps = truth.shapes.filter((shape) => shape.kind === 'bump').length;
      const adds = 'combine' in truth && truth.combine === 'add';
      // A bump is of degree 4 along a ray, k blended ones of degree 4 k; n points are exact up to degree 2 n - 1.
      const points = bumps === 0 ? 1 : adds ? 3 : 2 * Math.min(bumps, stackedBumps) + 1;
      return { points, crossings: (ray, add) => all.forEach((crossings) => crossings(ray, add)) };
    }
    case 'array':
      return { points: 2, crossings: arrayCrossings(truth) };
    case 'expression':
    case 'standard':
      return { points: 0, crossings: () => undefined };
  }
}
