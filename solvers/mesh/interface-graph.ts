import { boundaryCrossing, type MeshBoundary } from './mesh-boundary';
import type { SizeField } from './size-field';

/** A closed curve across which the coefficient jumps, in the coordinates of the mesh. */
export interface MeshInterface {
  /** True for polygons: straight between listed corners, no curved edges. */
  readonly corners: boolean;
  /** Points in order (x, y pairs), neighbours at most `maxSpacing` apart, the last joined to the first. */
  points(maxSpacing: (x: number, y: number) => number): Float64Array;
  /** Nearest point of the curve. */
  project(x: number, y: number): readonly [number, number];
}

/** Shares of the wanted size below which things are taken to be one. */
const mergeShare = 0.4;
const segmentShare = 0.22;
const boundaryShare = 0.35;

/**
 * Fixed points and constraint segments of a mesh: boundary nodes first, then the interfaces, cleaned so that
 * no two segments cross and nothing lies closer than a share of the wanted size. Points closer than that are merged, crossings
 * become points, parts outside the body or hugging its boundary are left out: there the mesh does not conform and the
 * elements integrate the jump by quadrature.
 */
export class InterfaceGraph {
  readonly x: number[] = [];
  readonly y: number[] = [];
  readonly size: number[] = [];
  /** Tangent angle cosine and sine, the first offer of the front. */
  readonly tangentX: number[] = [];
  readonly tangentY: number[] = [];
  readonly from: number[] = [];
  readonly to: number[] = [];
  readonly owner: number[] = [];
  readonly boundaryCount: number;

  /** @param places arc lengths of the boundary nodes */
  constructor(
    private readonly boundary: MeshBoundary,
    places: Float64Array,
    private readonly field: SizeField,
  ) {
    this.boundaryCount = places.length;
    for (const s of places) {
      const [x, y] = boundary.pointAt(s);
      this.push(x, y, ...boundary.tangent(x, y));
    }
  }

  /** Adds the closed polyline of interface `owner`. */
  add(polyline: Float64Array, owner: number): void {
    const n = polyline.length / 2;
    if (n < 3) return;
    const ids = new Int32Array(n);
    for (let i = 0; i < n; i++) {
      const previous = (i + n - 1) % n;
      const next = (i + 1) % n;
      ids[i] = this.place(
        polyline[2 * i],
        polyline[2 * i + 1],
        polyline[2 * next] - polyline[2 * previous],
        polyline[2 * next + 1] - polyline[2 * previous + 1],
      );
    }
    for (let i = 0; i < n; i++) {
      const j = (i + 1) % n;
      let a = ids[i];
      let b = ids[j];
      if (a === -2 && b === -2) continue;
      if (a === -1 || b === -1) continue;
      if (a === -2 || b === -2) {
        const [cx, cy] = boundaryCrossing(this.boundary, polyline[2 * i], polyline[2 * i + 1], polyline[2 * j], polyline[2 * j + 1]);
        const node = this.nearestBoundaryNode(cx, cy);
        if (a === -2) a = node;
        else b = node;
        const dx = this.x[node] - cx;
        const dy = this.y[node] - cy;
        if (dx * dx + dy * dy > 0.36 * this.size[node] * this.size[node]) continue;
      }
      this.addSegment(a, b, owner, 0);
    }
  }

  /** Index of the point, -1 when it hugs the boundary, -2 when it lies outside. */
  private place(x: number, y: number, tx: number, ty: number): number {
    const depth = this.boundary.depth(x, y);
    if (depth <= 0) return -2;
    const h = this.field.at(x, y);
    let best = -1;
    let bestDistance = mergeShare * h;
    for (let i = 0; i < this.x.length; i++) {
      const dx = this.x[i] - x;
      const dy = this.y[i] - y;
      if (dx > bestDistance || dx < -bestDistance || dy > bestDistance || dy < -bestDistance) continue;
      const d = Math.sqrt(dx * dx + dy * dy);
      if (d < bestDistance) {
        best = i;
        bestDistance = d;
      }
    }
    if (best >= 0) return best;
    if (depth < boundaryShare * h) return -1;
    const p = this.push(x, y, tx, ty);
    // A point almost on an earlier segment splits it.
    for (let s = 0; s < this.from.length; s++) {
      const c = this.from[s];
      const d = this.to[s];
      if (this.distanceToSegment(p, c, d) < segmentShare * h) {
        this.split(s, p);
        break;
      }
    }
    return p;
  }

  private push(x: number, y: number, tx: number, ty: number): number {
    this.x.push(x);
    this.y.push(y);
    this.size.push(this.field.at(x, y));
    const t = Math.sqrt(tx * tx + ty * ty);
    this.tangentX.push(t > 0 ? tx / t : 1);
    this.tangentY.push(t > 0 ? ty / t : 0);
    return this.x.length - 1;
  }

  private split(s: number, p: number): void {
    const d = this.to[s];
    this.to[s] = p;
    this.from.push(p);
    this.to.push(d);
    this.owner.push(this.owner[s]);
  }

  private addSegment(a: number, b: number, owner: number, depth: number): void {
    if (a === b || depth > 24) return;
    const { x, y } = this;
    const ax = x[a];
    const ay = y[a];
    const bx = x[b];
    const by = y[b];
    const length = Math.sqrt((bx - ax) * (bx - ax) + (by - ay) * (by - ay));
    const margin = 0.3 * length;
    const xMin = Math.min(ax, bx) - margin;
    const xMax = Math.max(ax, bx) + margin;
    const yMin = Math.min(ay, by) - margin;
    const yMax = Math.max(ay, by) + margin;
    for (let c = 0; c < x.length; c++) {
      if (c === a || c === b || x[c] < xMin || x[c] > xMax || y[c] < yMin || y[c] > yMax) continue;
      if (this.distanceToSegment(c, a, b) < segmentShare * Math.min(length, this.size[c])) {
        this.addSegment(a, c, owner, depth + 1);
        this.addSegment(c, b, owner, depth + 1);
        return;
      }
    }
    for (let s = 0; s < this.from.length; s++) {
      const c = this.from[s];
      const d = this.to[s];
      if ((c === a && d === b) || (c === b && d === a)) return;
      if (c === a || c === b || d === a || d === b) continue;
      if (Math.max(x[c], x[d]) < xMin || Math.min(x[c], x[d]) > xMax) continue;
      if (Math.max(y[c], y[d]) < yMin || Math.min(y[c], y[d]) > yMax) continue;
      const t = this.crossing(a, b, c, d);
      if (t < 0) continue;
      const px = ax + t * (bx - ax);
      const py = ay + t * (by - ay);
      let node = this.closest(px, py, [c, d], mergeShare);
      if (node < 0) {
        const own = this.closest(px, py, [a, b], mergeShare);
        node = own >= 0 ? own : this.push(px, py, bx - ax, by - ay);
        this.split(s, node);
      }
      this.addSegment(a, node, owner, depth + 1);
      this.addSegment(node, b, owner, depth + 1);
      return;
    }
    this.from.push(a);
    this.to.push(b);
    this.owner.push(owner);
  }

  private closest(px: number, py: number, candidates: readonly number[], share: number): number {
    let best = -1;
    let bestDistance = Infinity;
    for (const c of candidates) {
      const d = Math.sqrt((this.x[c] - px) * (this.x[c] - px) + (this.y[c] - py) * (this.y[c] - py));
      if (d < share * this.size[c] && d < bestDistance) {
        best = c;
        bestDistance = d;
      }
    }
    return best;
  }

  /** Distance of point c to the inner part of segment (a, b); Infinity when the foot lies outside it. */
  private distanceToSegment(c: number, a: number, b: number): number {
    const ux = this.x[b] - this.x[a];
    const uy = this.y[b] - this.y[a];
    const wx = this.x[c] - this.x[a];
    const wy = this.y[c] - this.y[a];
    const square = ux * ux + uy * uy;
    const t = (wx * ux + wy * uy) / square;
    if (!(t > 0 && t < 1)) return Infinity;
    const dx = wx - t * ux;
    const dy = wy - t * uy;
    return Math.sqrt(dx * dx + dy * dy);
  }

  /** Parameter along (a, b) of a proper crossing with (c, d), or -1. */
  private crossing(a: number, b: number, c: number, d: number): number {
    const { x, y } = this;
    const ux = x[b] - x[a];
    const uy = y[b] - y[a];
    const vx = x[d] - x[c];
    const vy = y[d] - y[c];
    const wx = x[c] - x[a];
    const wy = y[c] - y[a];
    const determinant = ux * vy - uy * vx;
    if (determinant === 0) return -1;
    const t = (wx * vy - wy * vx) / determinant;
    const s = (wx * uy - wy * ux) / determinant;
    return t > 0 && t < 1 && s > 0 && s < 1 ? t : -1;
  }

  private nearestBoundaryNode(px: number, py: number): number {
    let best = 0;
    let bestDistance = Infinity;
    for (let i = 0; i < this.boundaryCount; i++) {
      const dx = this.x[i] - px;
      const dy = this.y[i] - py;
      const d = dx * dx + dy * dy;
      if (d < bestDistance) {
        bestDistance = d;
        best = i;
      }
    }
    return best;
  }
}
