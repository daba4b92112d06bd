import type { TriangleMesh } from './body-mesh';
import type { MeshBoundary } from './mesh-boundary';
import { qualityOf } from './quality';

export interface RefinedMesh {
  readonly mesh: TriangleMesh;
  /** Triangle of the given mesh that each triangle of the refined one is part of. */
  readonly parent: Int32Array;
}

/**
 * Refines a triangulation by bisecting longest edges along their propagation paths (Rivara 1984) until the
 * longest edge of every triangle is at most `wanted` at its centroid. The mesh stays conforming, angles stay at least half
 * the smallest angle given, every new triangle lies in one old one, and new boundary vertices lie on the boundary (a bend of it then moves a little area between parents).
 * @throws RangeError when more than `limit` triangles would be needed
 */
export function bisectUntil(mesh: TriangleMesh, wanted: (x: number, y: number) => number, limit = 100_000): RefinedMesh {
  const xs: number[] = [];
  const ys: number[] = [];
  for (let i = 0; i < mesh.vertices.length; i += 2) {
    xs.push(mesh.vertices[i]);
    ys.push(mesh.vertices[i + 1]);
  }
  const corners: number[] = Array.from(mesh.triangles);
  const parent: number[] = Array.from({ length: corners.length / 3 }, (_, t) => t);
  // Triangles on both sides of an edge; the key orders the pair of vertices.
  const stride = 4 * (limit + xs.length);
  const keyOf = (a: number, b: number): number => (a < b ? a * stride + b : b * stride + a);
  const sides = new Map<number, [number, number]>();
  const attach = (a: number, b: number, t: number): void => {
    const key = keyOf(a, b);
    const pair = sides.get(key);
    if (!pair) sides.set(key, [t, -1]);
    else if (pair[0] < 0) pair[0] = t;
    else pair[1] = t;
  };
  const replace = (a: number, b: number, from: number, to: number): void => {
    const pair = sides.get(keyOf(a, b));
    if (pair) pair[pair[0] === from ? 0 : 1] = to;
  };
  for (let t = 0; t < parent.length; t++) for (let k = 0; k < 3; k++) attach(corners[3 * t + k], corners[3 * t + ((k + 1) % 3)], t);

  const squared = (a: number, b: number): number => (xs[a] - xs[b]) * (xs[a] - xs[b]) + (ys[a] - ys[b]) * (ys[a] - ys[b]);
  // The longest edge by length, then by key: two triangles that share an edge agree on its rank.
  const longest = (t: number): number => {
    let best = 0;
    let bestLength = -1;
    let bestKey = 0;
    for (let k = 0; k < 3; k++) {
      const a = corners[3 * t + k];
      const b = corners[3 * t + ((k + 1) % 3)];
      const length = a < b ? squared(a, b) : squared(b, a);
      const key = keyOf(a, b);
      if (length > bestLength || (length === bestLength && key > bestKey)) {
        best = k;
        bestLength = length;
        bestKey = key;
      }
    }
    return best;
  };
  const splitSide = (t: number, a: number, b: number, middle: number): void => {
    // Rotate so that the split edge comes first: t becomes (p, middle, c), the new triangle (middle, q, c).
    const k = [0, 1, 2].find((i) => {
      const p = corners[3 * t + i];
      const q = corners[3 * t + ((i + 1) % 3)];
      return (p === a && q === b) || (p === b && q === a);
    }) as number;
    const p = corners[3 * t + k];
    const q = corners[3 * t + ((k + 1) % 3)];
    const c = corners[3 * t + ((k + 2) % 3)];
    const added = parent.length;
    corners[3 * t] = p;
    corners[3 * t + 1] = middle;
    corners[3 * t + 2] = c;
    corners.push(middle, q, c);
    parent.push(parent[t]);
    replace(q, c, t, added);
    attach(p, middle, t);
    attach(middle, q, added);
    attach(middle, c, t);
    attach(middle, c, added);
  };
  const bisect = (t: number): void => {
    // Follow the path of ever longer edges to its end, split there, and return.
    const path = [t];
    while (path.length > 0) {
      const current = path[path.length - 1];
      const k = longest(current);
      const a = corners[3 * current + k];
      const b = corners[3 * current + ((k + 1) % 3)];
      const pair = sides.get(keyOf(a, b)) as [number, number];
      const other = pair[0] === current ? pair[1] : pair[0];
      if (other >= 0) {
        const j = longest(other);
        if (keyOf(corners[3 * other + j], corners[3 * other + ((j + 1) % 3)]) !== keyOf(a, b)) {
          path.push(other);
          continue;
        }
      }
      const middle = xs.length;
      let x = (xs[a] + xs[b]) / 2;
      let y = (ys[a] + ys[b]) / 2;
      if (other < 0) [x, y] = mesh.boundary.nearest(x, y);
      xs.push(x);
      ys.push(y);
      sides.delete(keyOf(a, b));
      splitSide(current, a, b, middle);
      if (other >= 0) splitSide(other, a, b, middle);
      path.pop();
    }
  };
  for (let t = 0; t < parent.length; t++) {
    for (;;) {
      const a = corners[3 * t];
      const b = corners[3 * t + 1];
      const c = corners[3 * t + 2];
      const size = wanted((xs[a] + xs[b] + xs[c]) / 3, (ys[a] + ys[b] + ys[c]) / 3);
      const k = longest(t);
      const length2 = squared(corners[3 * t + k], corners[3 * t + ((k + 1) % 3)]);
      if (length2 <= size * size) break;
      if (parent.length > limit) throw new RangeError(`The refinement would need more than ${limit} triangles.`);
      bisect(t);
    }
  }
  return { mesh: numbered(mesh.boundary, xs, ys, corners), parent: Int32Array.from(parent) };
}

/** Puts the boundary vertices first, counter-clockwise from vertex 0 (a boundary vertex of the given mesh). */
function numbered(boundary: MeshBoundary, xs: readonly number[], ys: readonly number[], corners: readonly number[]): TriangleMesh {
  const total = xs.length;
  // An edge lies on the boundary when no triangle runs along it the other way.
  const directed = new Set<number>();
  for (let k = 0; k < corners.length; k++) directed.add(corners[k] * total + corners[k % 3 === 2 ? k - 2 : k + 1]);
  const following = new Int32Array(total).fill(-1);
  for (let k = 0; k < corners.length; k++) {
    const a = corners[k];
    const b = corners[k % 3 === 2 ? k - 2 : k + 1];
    if (!directed.has(b * total + a)) following[a] = b;
  }
  const place = new Int32Array(total).fill(-1);
  let count = 0;
  for (let v = 0; v >= 0 && place[v] < 0; v = following[v]) place[v] = count++;
  const boundaryCount = count;
  for (let v = 0; v < total; v++) if (place[v] < 0) place[v] = count++;
  const vertices = new Float64Array(2 * total);
  for (let v = 0; v < total; v++) {
    vertices[2 * place[v]] = xs[v];
    vertices[2 * place[v] + 1] = ys[v];
  }
  const triangles = Int32Array.from(corners, (v) => place[v]);
  let quality = 1;
  for (let t = 0; t < triangles.length; t += 3) quality = Math.min(quality, qualityOf(vertices, triangles[t], triangles[t + 1], triangles[t + 2]));
  return { boundary, vertices, boundaryCount, triangles, interfaceEdges: new Int32Array(0), quality };
}
