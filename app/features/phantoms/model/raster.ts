import { placedVertices, shapeNumbers, type DraftShape } from './draft-shape';

type Inside = (x: number, y: number) => number;

/** Value of the shape at a point over what lies below it, `undefined` where it does not cover. */
function painter(shape: DraftShape, background: number): ((x: number, y: number) => number | undefined) | null {
  const n = shapeNumbers(shape);
  if (!Number.isFinite(n.value)) return null;
  if (shape.kind === 'polygon') {
    const vertices = placedVertices(n);
    if (vertices.length < 3 || vertices.some(([x, y]) => !Number.isFinite(x) || !Number.isFinite(y))) return null;
    return (x, y) => (insidePolygon(vertices, x, y) ? n.value : undefined);
  }
  if (![n.x, n.y, n.a, n.b].every(Number.isFinite)) return null;
  if (shape.kind === 'annulus') {
    return (x, y) => {
      const r = Math.hypot(x - n.x, y - n.y);
      return r >= n.a && r <= n.b ? n.value : undefined;
    };
  }
  if (!(n.a > 0) || !(n.b > 0) || !Number.isFinite(n.angle)) return null;
  const turn = (n.angle * Math.PI) / 180;
  const c = Math.cos(turn);
  const s = Math.sin(turn);
  const square: Inside = (x, y) => {
    const u = ((x - n.x) * c + (y - n.y) * s) / n.a;
    const v = (-(x - n.x) * s + (y - n.y) * c) / n.b;
    return u * u + v * v;
  };
  if (shape.kind === 'ellipse') return (x, y) => (square(x, y) <= 1 ? n.value : undefined);
  return (x, y) => {
    const q = 1 - square(x, y);
    return q > 0 ? background + (n.value - background) * q * q : undefined;
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

/**
 * The shapes drawn on `size` x `size` pixels over the body's square, row 0 at the lowest y; NaN outside the disc. For the
 * screen only: two by two samples a pixel.
 */
export function rasterShapes(shapes: readonly DraftShape[], background: number, radiusMm: number, size: number): Float64Array {
  const painters = shapes.map((shape) => painter(shape, background)).filter((p) => p !== null);
  const at = (x: number, y: number): number => {
    for (let i = painters.length - 1; i >= 0; i--) {
      const value = painters[i]!(x, y);
      if (value !== undefined) return value;
    }
    return background;
  };
  return rasterFunction(at, radiusMm, size);
}

/** Any function of mm coordinates on the same pixels. */
export function rasterFunction(at: (x: number, y: number) => number, radius: number, size: number): Float64Array {
  const out = new Float64Array(size * size).fill(Number.NaN);
  const step = (2 * radius) / size;
  const quarter = step / 4;
  for (let j = 0; j < size; j++) {
    const y = -radius + (j + 0.5) * step;
    for (let i = 0; i < size; i++) {
      const x = -radius + (i + 0.5) * step;
      if (x * x + y * y > radius * radius * 1.004) continue;
      out[j * size + i] = (at(x - quarter, y - quarter) + at(x + quarter, y - quarter) + at(x - quarter, y + quarter) + at(x + quarter, y + quarter)) / 4;
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
