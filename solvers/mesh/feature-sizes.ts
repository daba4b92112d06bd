import type { MeshInterface } from './interface-graph';
import { boundaryCrossing, type MeshBoundary } from './mesh-boundary';
import type { SizeSource } from './size-field';

export interface FeatureSpec {
  /** Largest size on an interface, radii. */
  readonly interfaceSize: number;
  /** Size over radius of curvature on smooth interfaces. */
  readonly curvatureShare: number;
  /** Size over the gap to another interface, to the same one across, or to the body's boundary. */
  readonly gapShare: number;
  /** Nothing here asks for less, but for small closed curves: they get at least `smallestParts` edges down to `smallestFloor`. */
  readonly floor: number;
}

export interface InterfaceFeatures {
  readonly sources: SizeSource[];
  /**
   * Where the potential is singular (x, y pairs): corners of polygons, crossings of two interfaces and of an interface with
   * the boundary.
   */
  readonly corners: Float64Array;
}

const smallestParts = 24;
const smallestFloor = 5e-4;

/** Turn of a polyline, as a cosine, beyond which a vertex counts as a corner (20 degrees). */
const cornerCosine = 0.94;

/**
 * Sizes wanted along interfaces: by their curvature, by the gap to the next interface or the boundary, and their corners.
 * Each interface is sampled at up to about 400 points; pairs are compared directly (cost: square of the number of samples).
 */
export function interfaceFeatures(boundary: MeshBoundary, interfaces: readonly MeshInterface[], spec: FeatureSpec): InterfaceFeatures {
  const corners: number[] = [];
  const x: number[] = [];
  const y: number[] = [];
  const nx: number[] = [];
  const ny: number[] = [];
  const size: number[] = [];
  const owner: number[] = [];
  const floors: number[] = [];
  /** Next sample along the same curve, to find crossings; -1 where it lies outside. */
  const nextX: number[] = [];
  const nextY: number[] = [];
  interfaces.forEach((curve, k) => {
    if (curve.corners) {
      const vertices = curve.points(() => 1e9);
      collectCorners(boundary, vertices, corners);
    }
    const coarse = curve.points(() => 0.1);
    let perimeter = 0;
    for (let i = 0, n = coarse.length / 2; i < n; i++) perimeter += distance(coarse, i, (i + 1) % n);
    const samples = curve.points(() => Math.max(smallestFloor, Math.min(0.03, perimeter / 60)));
    floors.push(Math.min(spec.floor, Math.max(smallestFloor, perimeter / smallestParts)));
    const n = samples.length / 2;
    for (let i = 0; i < n; i++) {
      const px = samples[2 * i];
      const py = samples[2 * i + 1];
      const a = (i + n - 1) % n;
      const b = (i + 1) % n;
      const inside = boundary.inside(px, py);
      if (inside !== boundary.inside(samples[2 * b], samples[2 * b + 1])) corners.push(...leaving(boundary, curve, px, py, samples[2 * b], samples[2 * b + 1]));
      if (!inside) continue;
      const tx = samples[2 * b] - samples[2 * a];
      const ty = samples[2 * b + 1] - samples[2 * a + 1];
      const t = Math.sqrt(tx * tx + ty * ty);
      if (t === 0) continue;
      let h = spec.interfaceSize;
      if (!curve.corners) {
        const l1 = distance(samples, a, i);
        const l2 = distance(samples, i, b);
        const cross =
          (px - samples[2 * a]) * (samples[2 * b + 1] - py) - (py - samples[2 * a + 1]) * (samples[2 * b] - px);
        // Menger curvature: twice the turn of three points over the product of their distances.
        const curvature = (2 * Math.abs(cross)) / (l1 * l2 * t);
        if (curvature > 0) h = Math.min(h, spec.curvatureShare / curvature);
      }
      h = Math.min(h, spec.gapShare * boundary.depth(px, py));
      x.push(px);
      y.push(py);
      nx.push(-ty / t);
      ny.push(tx / t);
      size.push(h);
      owner.push(k);
      nextX.push(samples[2 * b]);
      nextY.push(samples[2 * b + 1]);
    }
  });
  const reach = spec.interfaceSize / spec.gapShare;
  for (let i = 0; i < x.length; i++) {
    for (let j = 0; j < i; j++) {
      const dx = x[i] - x[j];
      if (dx > reach || dx < -reach) continue;
      const dy = y[i] - y[j];
      if (dy > reach || dy < -reach) continue;
      const d = Math.sqrt(dx * dx + dy * dy);
      // Neighbours along the same curve lie across its normal; an opposite side lies along it.
      if (owner[i] === owner[j] && (Math.abs(dx * nx[i] + dy * ny[i]) < 0.8 * d || Math.abs(dx * nx[j] + dy * ny[j]) < 0.8 * d)) continue;
      if (owner[i] !== owner[j] && d < 0.1) {
        const t = crossing(x[i], y[i], nextX[i], nextY[i], x[j], y[j], nextX[j], nextY[j]);
        if (t >= 0) corners.push(x[i] + t * (nextX[i] - x[i]), y[i] + t * (nextY[i] - y[i]));
      }
      const h = spec.gapShare * d;
      if (h < size[i]) size[i] = h;
      if (h < size[j]) size[j] = h;
    }
  }
  const sources: SizeSource[] = [];
  for (let i = 0; i < x.length; i++) sources.push({ x: x[i], y: y[i], size: Math.max(floors[owner[i]], size[i]) });
  return { sources, corners: Float64Array.from(corners) };
}

/** Where a curve meets the boundary between two samples on either side of it. */
function leaving(boundary: MeshBoundary, curve: MeshInterface, ax: number, ay: number, bx: number, by: number): [number, number] {
  let [x, y] = boundaryCrossing(boundary, ax, ay, bx, by);
  for (let i = 0; i < 3; i++) {
    const [px, py] = curve.project(x, y);
    if (!(boundary.depth(px, py) < 0.5)) break;
    [x, y] = boundary.nearest(px, py);
  }
  return [x, y];
}

/** Parameter along (a, b) of its crossing with (c, d), or -1. */
function crossing(ax: number, ay: number, bx: number, by: number, cx: number, cy: number, dx: number, dy: number): number {
  const ux = bx - ax;
  const uy = by - ay;
  const vx = dx - cx;
  const vy = dy - cy;
  const determinant = ux * vy - uy * vx;
  if (determinant === 0) return -1;
  const t = ((cx - ax) * vy - (cy - ay) * vx) / determinant;
  const s = ((cx - ax) * uy - (cy - ay) * ux) / determinant;
  return t >= 0 && t < 1 && s >= 0 && s < 1 ? t : -1;
}

function collectCorners(boundary: MeshBoundary, vertices: Float64Array, corners: number[]): void {
  const n = vertices.length / 2;
  for (let i = 0; i < n; i++) {
    const a = (i + n - 1) % n;
    const b = (i + 1) % n;
    const px = vertices[2 * i];
    const py = vertices[2 * i + 1];
    if (!boundary.inside(px, py)) continue;
    const ux = px - vertices[2 * a];
    const uy = py - vertices[2 * a + 1];
    const vx = vertices[2 * b] - px;
    const vy = vertices[2 * b + 1] - py;
    if (ux * vx + uy * vy < cornerCosine * Math.sqrt((ux * ux + uy * uy) * (vx * vx + vy * vy))) corners.push(px, py);
  }
}

function distance(points: Float64Array, a: number, b: number): number {
  const dx = points[2 * a] - points[2 * b];
  const dy = points[2 * a + 1] - points[2 * b + 1];
  return Math.sqrt(dx * dx + dy * dy);
}
