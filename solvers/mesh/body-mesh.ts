import Constrainautor from '@kninnug/constrainautor';
import Delaunator from 'delaunator';
import { atan2 } from '../core/math';
import { boundaryPlaces } from './boundary-points';
import { interfaceFeatures, type InterfaceFeatures } from './feature-sizes';
import { fillBody } from './front-points';
import { InterfaceGraph, type MeshInterface } from './interface-graph';
import { boundaryCrossing, unitCircle, type MeshBoundary } from './mesh-boundary';
import { PointBuckets } from './point-buckets';
import { repair } from './repair';
import { SizeField, type SizeSource } from './size-field';
import { qualityOf } from './quality';
import { relax } from './smoothing';

/** Lengths in radii of the body. */
export interface BodyMeshSpec {
  /** The unit circle when left out. */
  readonly boundary?: MeshBoundary;
  /** Arc lengths that must be boundary nodes and grading centres: the ends of the electrodes. May be empty. */
  readonly ends: readonly number[];
  /** Edge length over the distance to the nearest end. */
  readonly grading: number;
  readonly hMin: number;
  readonly hMax: number;
  /** Grading right at the ends; between them and half the smallest gap of two ends it falls to `grading`. */
  readonly tipGrading?: number;
  /** Curves that edges of the mesh follow. */
  readonly interfaces?: readonly MeshInterface[];
  /** Largest edge on an interface; `hMax` when left out. */
  readonly interfaceSize?: number;
  /** Edge length over the radius of curvature of a smooth interface, and of a boundary that bends more than the unit circle. */
  readonly curvatureShare?: number;
  /** Edge length over the distance to a corner of an interface, and its lower bound. */
  readonly cornerGrading?: number;
  readonly cornerMinimum?: number;
  /** Further places that ask for small edges. */
  readonly sources?: readonly SizeSource[];
  /** Growth of the edge length away from interfaces and sources. */
  readonly growth?: number;
  /** Counter seed of the small turns of the front; two meshes with other seeds share no interior vertex. */
  readonly seed?: number;
  /** Steps of force smoothing. */
  readonly smoothing?: number;
  /** Refuses a mesh of more vertices. */
  readonly maxVertices?: number;
}

/** A conforming triangulation of a body. */
export interface TriangleMesh {
  readonly boundary: MeshBoundary;
  /** x, y per vertex; the first `boundaryCount` run counter-clockwise along the boundary. */
  readonly vertices: Float64Array;
  readonly boundaryCount: number;
  /** Vertex triples, counter-clockwise. */
  readonly triangles: Int32Array;
  /** Edges on interfaces: vertex, vertex, index of the interface. */
  readonly interfaceEdges: Int32Array;
  /** Smallest value of 4 sqrt(3) area / (sum of squared edges). */
  readonly quality: number;
}

const fullyGradedCorners = 24;

/**
 * Graded triangulation of a body with the electrode ends as nodes and edges along the interfaces.
 *
 * Boundary and interfaces are split by the size function, the inside is filled by an advancing front, smoothed by bar forces
 * (Persson and Strang 2004) and triangulated with constraints (Delaunay; Sloan 1993). Deterministic: plain arithmetic and
 * exact predicates only.
 * @throws RangeError when the sizes make no sense or the mesh would be too large
 */
export function meshBody(spec: BodyMeshSpec): TriangleMesh {
  const boundary = spec.boundary ?? unitCircle;
  const { hMin, hMax, grading } = spec;
  if (!(hMin >= 1e-7 && hMin <= hMax && hMax <= 1)) throw new RangeError(`Sizes must satisfy 1e-7 <= hMin <= hMax <= 1, not hMin = ${hMin}, hMax = ${hMax}.`);
  if (!(grading > 0 && grading <= 1)) throw new RangeError(`The grading must lie in (0, 1], not ${grading}.`);
  const ends = sortedEnds(boundary, spec.ends);
  const interfaces = spec.interfaces ?? [];
  const centres = new Float64Array(2 * ends.length);
  ends.forEach((s, i) => centres.set(boundary.pointAt(s), 2 * i));
  const interfaceSize = Math.min(hMax, spec.interfaceSize ?? hMax);
  const floor = Math.max(hMin, Math.min(0.004, 0.25 * interfaceSize));
  const curvatureShare = spec.curvatureShare ?? 0.35;
  const features: InterfaceFeatures =
    interfaces.length > 0
      ? interfaceFeatures(boundary, interfaces, { interfaceSize, curvatureShare, gapShare: 0.5, floor })
      : { sources: [], corners: new Float64Array(0) };
  // Hundreds of corners share the elements that a few would get.
  const crowd = Math.max(1, features.corners.length / (2 * fullyGradedCorners));
  const field = new SizeField({
    centres,
    grading,
    minimum: hMin,
    maximum: hMax,
    relief: halfGap(boundary, ends),
    tipGrading: Math.max(grading, spec.tipGrading ?? grading),
    sources: [...features.sources, ...(spec.sources ?? []), ...boundary.bends(curvatureShare, Math.max(0.5 * hMin, 0.004)).filter(({ size }) => size < hMax)],
    sourceSlope: spec.growth ?? 0.3,
    corners: features.corners,
    reach: boundary.reach,
    cornerGrading: Math.min(0.7, (spec.cornerGrading ?? grading) * Math.sqrt(crowd)),
    cornerMinimum: (spec.cornerMinimum ?? 0.002) * crowd,
  });
  const polylines = interfaces.map((curve) => curve.points((x, y) => field.at(x, y)));
  const places = boundaryPlaces(boundary, withCrossings(boundary, ends, polylines, field), field);
  if (places.length < 6) throw new RangeError(`The sizes leave only ${places.length} boundary nodes: choose a smaller hMax.`);
  const graph = new InterfaceGraph(boundary, places, field);
  polylines.forEach((polyline, k) => graph.add(polyline, k));

  const points = new PointBuckets(boundary.reach);
  const directions: number[] = [];
  for (let i = 0; i < graph.x.length; i++) {
    points.add(graph.x[i], graph.y[i], graph.size[i]);
    directions.push(atan2(graph.tangentY[i], graph.tangentX[i]));
  }
  const fixedCount = points.count;
  const limit = spec.maxVertices ?? 60_000;
  if (fixedCount > limit) throw new RangeError(`The mesh would need more than ${limit} points: choose larger elements.`);
  fillBody(boundary, points, directions, field, spec.seed ?? 1, limit);

  let coords = new Float64Array(2 * points.count);
  for (let i = 0; i < points.count; i++) {
    coords[2 * i] = points.x[i];
    coords[2 * i + 1] = points.y[i];
  }
  const delaunay = new Delaunator(coords);
  relax(boundary, graph.boundaryCount, delaunay, fixedCount, field, spec.smoothing ?? 8);
  let result = constrain(boundary, delaunay, graph);
  // Vertices of flat triangles are moved or removed; a few rounds reach the wanted shape.
  for (let round = 0; round < 4; round++) {
    const repaired = repair(coords, result.triangles, fixedCount, field);
    if (!repaired) break;
    coords = repaired as Float64Array<ArrayBuffer>;
    result = constrain(boundary, new Delaunator(coords), graph);
  }
  return { boundary, vertices: coords, boundaryCount: graph.boundaryCount, ...result };
}

function sortedEnds({ length }: MeshBoundary, ends: readonly number[]): number[] {
  if (ends.length === 0) return [0];
  const sorted = ends.map((s) => s - length * Math.floor(s / length)).sort((a, b) => a - b);
  for (let i = 0; i < sorted.length; i++) {
    if (!Number.isFinite(sorted[i])) throw new RangeError('The ends of the electrodes must be finite.');
    const gap = (i + 1 < sorted.length ? sorted[i + 1] : sorted[0] + length) - sorted[i];
    if (gap < 1e-5) throw new RangeError(`Two electrode ends lie ${gap} radii apart.`);
  }
  return sorted;
}

/** Half the smallest distance of two neighbouring ends along the boundary. */
function halfGap({ length }: MeshBoundary, ends: readonly number[]): number {
  let smallest = length;
  for (let i = 0; i < ends.length; i++) smallest = Math.min(smallest, (i + 1 < ends.length ? ends[i + 1] : ends[0] + length) - ends[i]);
  return 0.5 * smallest;
}

/** Adds the places where interfaces leave the body to the fixed ones, unless another fixed node is near. */
function withCrossings(boundary: MeshBoundary, ends: readonly number[], polylines: readonly Float64Array[], field: SizeField): number[] {
  const fixed = [...ends];
  for (const p of polylines) {
    const n = p.length / 2;
    for (let i = 0; i < n; i++) {
      const j = (i + 1) % n;
      if (boundary.inside(p[2 * i], p[2 * i + 1]) === boundary.inside(p[2 * j], p[2 * j + 1])) continue;
      const [x, y] = boundaryCrossing(boundary, p[2 * i], p[2 * i + 1], p[2 * j], p[2 * j + 1]);
      const near = 0.5 * field.at(x, y);
      const clear = fixed.every((s) => {
        const [fx, fy] = boundary.pointAt(s);
        return (fx - x) * (fx - x) + (fy - y) * (fy - y) > near * near;
      });
      if (clear) fixed.push(boundary.arcLengthOf(x, y));
    }
  }
  return fixed.sort((a, b) => a - b);
}

function constrain(boundary: MeshBoundary, delaunay: Delaunator<Float64Array>, graph: InterfaceGraph): Pick<TriangleMesh, 'triangles' | 'interfaceEdges' | 'quality'> {
  const edges: number[] = [];
  const n = graph.boundaryCount;
  if (graph.from.length > 0 || !boundary.convex) {
    const constraints = new Constrainautor(delaunay);
    if (!boundary.convex) for (let i = 0; i < n; i++) constraints.constrainOne(i, (i + 1) % n);
    for (let s = 0; s < graph.from.length; s++) {
      try {
        constraints.constrainOne(graph.from[s], graph.to[s]);
        edges.push(graph.from[s], graph.to[s], graph.owner[s]);
      } catch {
        // A segment through a vertex or across another one: left out, the elements there integrate the jump.
      }
    }
  }
  const { triangles, coords } = delaunay;
  const kept = new Int32Array(triangles.length);
  let count = 0;
  let quality = 1;
  for (let t = 0; t < triangles.length; t += 3) {
    const a = triangles[t];
    // Delaunator's triangles run clockwise in a frame with y upwards.
    const b = triangles[t + 2];
    const c = triangles[t + 1];
    if (!boundary.convex && inBay(a, b, c, n)) continue;
    const q = qualityOf(coords, a, b, c);
    if (q < quality) quality = q;
    kept[count++] = a;
    kept[count++] = b;
    kept[count++] = c;
  }
  return { triangles: kept.subarray(0, count), interfaceEdges: Int32Array.from(edges), quality };
}

/**
 * A triangle between boundary nodes only lies outside the body when its corners, counter-clockwise, run against the order of the
 * boundary.
 */
function inBay(a: number, b: number, c: number, boundaryCount: number): boolean {
  return a < boundaryCount && b < boundaryCount && c < boundaryCount && !((a < b && b < c) || (b < c && c < a) || (c < a && a < b));
}
