import type { MeshInterface } from './interface-graph';
import type { TriangleMesh } from './body-mesh';

/** Isoparametric six-node triangles. */
export interface QuadraticMesh {
  /** x, y per node: the vertices of the triangulation first, then one node per edge. */
  readonly nodes: Float64Array;
  readonly vertexCount: number;
  /** Six nodes per element: vertices 0, 1, 2 counter-clockwise, then the nodes of edges 01, 12, 20. */
  readonly elements: Int32Array;
  /** 1 where the node of an edge is off its chord, so that the Jacobian varies. */
  readonly curved: Uint8Array;
  /** Boundary edges counter-clockwise: start, end, middle node. */
  readonly boundaryEdges: Int32Array;
}

/** Largest distance of an edge's node from its chord, in chord lengths; a curve that asks for more is not followed. */
const largestBulge = 0.16;

/**
 * Quadratic elements over a triangulation: nodes of boundary edges on the boundary, nodes of interface edges on the
 * interface where it is smooth, the others at the middle of their chords. An element that would fold keeps straight interface
 * edges.
 */
export function quadraticMesh(mesh: TriangleMesh, interfaces: readonly MeshInterface[] = []): QuadraticMesh {
  const { boundary, vertices, triangles, boundaryCount } = mesh;
  const vertexCount = vertices.length / 2;
  const elementCount = triangles.length / 3;
  const elements = new Int32Array(6 * elementCount);
  // Edges by their lower vertex in linked lists.
  const head = new Int32Array(vertexCount).fill(-1);
  const next: number[] = [];
  const upper: number[] = [];
  const lower: number[] = [];
  const edgeOf = (a: number, b: number, create: boolean): number => {
    const low = a < b ? a : b;
    const high = a < b ? b : a;
    for (let e = head[low]; e >= 0; e = next[e]) if (upper[e] === high) return e;
    if (!create) return -1;
    next.push(head[low]);
    upper.push(high);
    lower.push(low);
    head[low] = next.length - 1;
    return next.length - 1;
  };
  for (let t = 0; t < elementCount; t++) {
    const a = triangles[3 * t];
    const b = triangles[3 * t + 1];
    const c = triangles[3 * t + 2];
    elements[6 * t] = a;
    elements[6 * t + 1] = b;
    elements[6 * t + 2] = c;
    elements[6 * t + 3] = vertexCount + edgeOf(a, b, true);
    elements[6 * t + 4] = vertexCount + edgeOf(b, c, true);
    elements[6 * t + 5] = vertexCount + edgeOf(c, a, true);
  }
  const edgeCount = next.length;
  const nodes = new Float64Array(2 * (vertexCount + edgeCount));
  nodes.set(vertices);
  const chordX = (e: number): number => 0.5 * (vertices[2 * lower[e]] + vertices[2 * upper[e]]);
  const chordY = (e: number): number => 0.5 * (vertices[2 * lower[e] + 1] + vertices[2 * upper[e] + 1]);
  for (let e = 0; e < edgeCount; e++) {
    nodes[2 * (vertexCount + e)] = chordX(e);
    nodes[2 * (vertexCount + e) + 1] = chordY(e);
  }
  const bent = new Uint8Array(edgeCount);
  const boundaryEdges = new Int32Array(3 * boundaryCount);
  for (let i = 0; i < boundaryCount; i++) {
    const j = (i + 1) % boundaryCount;
    const e = edgeOf(i, j, false);
    if (e < 0) throw new RangeError('The triangulation does not hold every boundary edge.');
    nodes.set(boundary.nearest(chordX(e), chordY(e)), 2 * (vertexCount + e));
    bent[e] = 1;
    boundaryEdges[3 * i] = i;
    boundaryEdges[3 * i + 1] = j;
    boundaryEdges[3 * i + 2] = vertexCount + e;
  }
  for (let k = 0; k < mesh.interfaceEdges.length; k += 3) {
    const curve = interfaces[mesh.interfaceEdges[k + 2]];
    if (!curve || curve.corners) continue;
    const e = edgeOf(mesh.interfaceEdges[k], mesh.interfaceEdges[k + 1], false);
    if (e < 0 || bent[e]) continue;
    const x = chordX(e);
    const y = chordY(e);
    const [px, py] = curve.project(x, y);
    const dx = vertices[2 * upper[e]] - vertices[2 * lower[e]];
    const dy = vertices[2 * upper[e] + 1] - vertices[2 * lower[e] + 1];
    const length = Math.sqrt(dx * dx + dy * dy);
    const bulge = Math.sqrt((px - x) * (px - x) + (py - y) * (py - y));
    if (!(bulge <= largestBulge * length)) continue;
    nodes[2 * (vertexCount + e)] = px;
    nodes[2 * (vertexCount + e) + 1] = py;
    bent[e] = 2;
  }
  const curved = new Uint8Array(elementCount);
  for (let pass = 0; pass < 3; pass++) {
    let folded = 0;
    for (let t = 0; t < elementCount; t++) {
      const edges = [elements[6 * t + 3], elements[6 * t + 4], elements[6 * t + 5]];
      curved[t] = edges.some((m) => bent[m - vertexCount] > 0) ? 1 : 0;
      if (curved[t] === 0 || smallestJacobian(nodes, elements, t) > 0) continue;
      for (const m of edges) {
        const e = m - vertexCount;
        if (bent[e] !== 2) continue;
        nodes[2 * m] = chordX(e);
        nodes[2 * m + 1] = chordY(e);
        bent[e] = 0;
        folded++;
      }
    }
    if (folded === 0) break;
  }
  return { nodes, vertexCount, elements, curved, boundaryEdges };
}

/** Smallest Jacobian determinant over the six nodes and the centroid, relative to nothing: its sign is what counts. */
function smallestJacobian(nodes: Float64Array, elements: Int32Array, t: number): number {
  let smallest = Infinity;
  for (let p = 0; p < 7; p++) {
    const r = places[2 * p];
    const s = places[2 * p + 1];
    const q = 1 - r - s;
    // Derivatives of the quadratic shape functions with respect to r and s.
    const dr = [1 - 4 * q, 4 * r - 1, 0, 4 * (q - r), 4 * s, -4 * s];
    const ds = [1 - 4 * q, 0, 4 * s - 1, -4 * r, 4 * r, 4 * (q - s)];
    let xr = 0;
    let yr = 0;
    let xs = 0;
    let ys = 0;
    for (let i = 0; i < 6; i++) {
      const node = elements[6 * t + i];
      xr += dr[i] * nodes[2 * node];
      yr += dr[i] * nodes[2 * node + 1];
      xs += ds[i] * nodes[2 * node];
      ys += ds[i] * nodes[2 * node + 1];
    }
    const determinant = xr * ys - xs * yr;
    if (determinant < smallest) smallest = determinant;
  }
  return smallest;
}

const places = [0, 0, 1, 0, 0, 1, 0.5, 0, 0.5, 0.5, 0, 0.5, 1 / 3, 1 / 3];
