import { bodyReach } from '../../../components/images/body-outline';
import type { PixelGrid } from '../../../components/images/pixels';
import { placedVertices, shapeNumbers, type DraftShape, type RoundOrRectangle } from './draft-shape';

/** How a shape meets what lies below it: `replace` by its value, `add` its value. */
export type Combine = 'replace' | 'add';

/** Value of the shape at a point (mm) over the value below it. */
type Painter = (x: number, y: number, below: number) => number;

function painter(shape: DraftShape, background: number, combine: Combine): Painter | null {
  const n = shapeNumbers(shape);
  if (!Number.isFinite(n.value)) return null;
  const paint = (below: number): number => (combine === 'add' ? below + n.value : n.value);
  if (shape.kind === 'polygon') {
    const vertices = placedVertices(n);
    if (vertices.length < 3 || vertices.some(([x, y]) => !Number.isFinite(x) || !Number.isFinite(y))) return null;
    return (x, y, below) => (insidePolygon(vertices, x, y) ? paint(below) : below);
  }
  if (![n.x, n.y, n.a, n.b].every(Number.isFinite)) return null;
  if (shape.kind === 'annulus') {
    return (x, y, below) => {
      const r = Math.hypot(x - n.x, y - n.y);
      return r >= n.a && r <= n.b ? paint(below) : below;
    };
  }
  if (!(n.a > 0) || !(n.b > 0) || !Number.isFinite(n.angle)) return null;
  const turn = (n.angle * Math.PI) / 180;
  const c = Math.cos(turn);
  const s = Math.sin(turn);
  const square = (x: number, y: number): number => {
    const u = ((x - n.x) * c + (y - n.y) * s) / n.a;
    const v = (-(x - n.x) * s + (y - n.y) * c) / n.b;
    return u * u + v * v;
  };
  if (shape.kind === 'ellipse') return (x, y, below) => (square(x, y) <= 1 ? paint(below) : below);
  return (x, y, below) => {
    const q = 1 - square(x, y);
    if (q <= 0) return below;
    return combine === 'add' ? below + n.value * q * q : background + (n.value - background) * q * q;
  };
}

function insidePolygon(vertices: readonly (readonly [number, number])[], x: number, y: number): boolean {
  let inside = false;
  for (let i = 0, j = vertices.length - 1; i < vertices.length; j = i++) {
    const [xi, yi] = vertices[i]!;
    const [xj, yj] = vertices[j]!;
    if (yi > y !== yj > y && x < ((xj - xi) * (y - yi)) / (yj - yi) + xi) inside = !inside;
  }
  return inside;
}

/** The shapes drawn on a grid over the body, row 0 at the lowest y; NaN outside the body. For the screen only: two by two samples a pixel. */
export function rasterShapes(shapes: readonly DraftShape[], background: number, combine: Combine, body: RoundOrRectangle, grid: PixelGrid): Float64Array {
  const painters = shapes.map((shape) => painter(shape, background, combine)).filter((p) => p !== null);
  return rasterFunction((x, y) => painters.reduce((below, paint) => paint(1000 * x, 1000 * y, below), background), body, grid);
}

/** Any function of coordinates in m on the same pixels. */
export function rasterFunction(at: (x: number, y: number) => number, body: RoundOrRectangle, { nx, ny, xMin, xMax, yMin, yMax }: PixelGrid): Float64Array {
  const out = new Float64Array(nx * ny).fill(Number.NaN);
  const dx = (xMax - xMin) / nx;
  const dy = (yMax - yMin) / ny;
  const outside = (x: number, y: number): boolean => body.kind !== 'rectangle' && Math.hypot(x, y) > 1.002 * bodyReach(body, body.kind === 'disc' ? 0 : Math.atan2(y, x));
  for (let j = 0; j < ny; j++) {
    const y = yMin + (j + 0.5) * dy;
    for (let i = 0; i < nx; i++) {
      const x = xMin + (i + 0.5) * dx;
      if (outside(x, y)) continue;
      out[j * nx + i] = (at(x - dx / 4, y - dy / 4) + at(x + dx / 4, y - dy / 4) + at(x - dx / 4, y + dy / 4) + at(x + dx / 4, y + dy / 4)) / 4;
    }
  }
  return out;
}

/** Smallest and largest finite value. */
export function valueRange(values: ArrayLike<number>): [number, number] | null {
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < values.length; i++) {
    const v = values[i]!;
    if (!Number.isFinite(v)) continue;
    if (v < low) low = v;
    if (v > high) high = v;
  }
  return low <= high ? [low, high] : null;
}
