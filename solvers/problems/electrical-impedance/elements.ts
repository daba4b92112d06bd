import type { QuadraticMesh } from '../../mesh/quadratic-mesh';

/** Quadrature points of a triangle: barycentric r, s (r to vertex 1, s to vertex 2) and weights that sum to 1/2. */
export interface TriangleRule {
  readonly r: readonly number[];
  readonly s: readonly number[];
  readonly weight: readonly number[];
}

const a1 = 0.4459484909159649;
const b1 = 0.10810301816807023;
const w1 = 0.5 * 0.22338158967801147;
const a2 = 0.09157621350977074;
const b2 = 0.8168475729804585;
const w2 = 0.5 * 0.10995174365532187;

/** Six points, exact to degree 4 (Strang and Fix 1973; Dunavant 1985, table II). */
export const degreeFour: TriangleRule = {
  r: [a1, b1, a1, a2, b2, a2],
  s: [a1, a1, b1, a2, a2, b2],
  weight: [w1, w1, w1, w2, w2, w2],
};

/** Entries of a symmetric 6 x 6 element matrix kept: lower triangle, row by row. */
export const entriesPerElement = 21;

/** Shape functions and derivatives of the quadratic triangle at the points of a rule, six values a point. */
export interface ShapeTable {
  readonly points: number;
  readonly weight: readonly number[];
  readonly value: Float64Array;
  readonly dr: Float64Array;
  readonly ds: Float64Array;
}

export function shapeTable(rule: TriangleRule): ShapeTable {
  const points = rule.weight.length;
  const value = new Float64Array(6 * points);
  const dr = new Float64Array(6 * points);
  const ds = new Float64Array(6 * points);
  for (let p = 0; p < points; p++) {
    const r = rule.r[p];
    const s = rule.s[p];
    const q = 1 - r - s;
    value.set([q * (2 * q - 1), r * (2 * r - 1), s * (2 * s - 1), 4 * q * r, 4 * r * s, 4 * s * q], 6 * p);
    dr.set([1 - 4 * q, 4 * r - 1, 0, 4 * (q - r), 4 * s, -4 * s], 6 * p);
    ds.set([1 - 4 * q, 0, 4 * s - 1, -4 * r, 4 * r, 4 * (q - s)], 6 * p);
  }
  return { points, weight: rule.weight, value, dr, ds };
}

export const degreeFourShapes = shapeTable(degreeFour);

/**
 * Unit-coefficient stiffness per quadrature point: `out[21 p + k]`, k over the lower triangle row by row, holds the integrand
 * weight * detJ * grad N_i . grad N_j at point p of element t; the sum over p is the element matrix.
 */
export function elementStiffness(mesh: QuadraticMesh, t: number, shapes: ShapeTable, out: Float64Array): void {
  const { nodes, elements } = mesh;
  for (let p = 0; p < shapes.points; p++) {
    let xr = 0;
    let yr = 0;
    let xs = 0;
    let ys = 0;
    for (let i = 0; i < 6; i++) {
      const node = elements[6 * t + i];
      const x = nodes[2 * node];
      const y = nodes[2 * node + 1];
      xr += shapes.dr[6 * p + i] * x;
      yr += shapes.dr[6 * p + i] * y;
      xs += shapes.ds[6 * p + i] * x;
      ys += shapes.ds[6 * p + i] * y;
    }
    const determinant = xr * ys - xs * yr;
    const scale = shapes.weight[p] / determinant;
    for (let i = 0; i < 6; i++) {
      gradX[i] = ys * shapes.dr[6 * p + i] - yr * shapes.ds[6 * p + i];
      gradY[i] = xr * shapes.ds[6 * p + i] - xs * shapes.dr[6 * p + i];
    }
    let k = entriesPerElement * p;
    for (let i = 0; i < 6; i++) for (let j = 0; j <= i; j++) out[k++] = scale * (gradX[i] * gradX[j] + gradY[i] * gradY[j]);
  }
}

const gradX = new Float64Array(6);
const gradY = new Float64Array(6);

/**
 * Stiffness of a straight-sided element with unit coefficient, lower triangle row by row into `out[0 .. 20]`: the gradients
 * of quadratic shape functions are linear, so three edge midpoints integrate their products exactly.
 */
export function straightStiffness(mesh: QuadraticMesh, t: number, out: Float64Array): void {
  elementStiffness(mesh, t, midpointShapes, scratch);
  for (let k = 0; k < entriesPerElement; k++) out[k] = scratch[k] + scratch[entriesPerElement + k] + scratch[2 * entriesPerElement + k];
}

const scratch = new Float64Array(3 * entriesPerElement);
const midpointShapes = shapeTable({ r: [0.5, 0.5, 0], s: [0, 0.5, 0.5], weight: [1 / 6, 1 / 6, 1 / 6] });

/** Gauss-Legendre points on (-1, 1), four points, exact to degree 7 (Abramowitz and Stegun 1964, table 25.4). */
export const gaussPoints = [-0.8611363115940526, -0.33998104358485626, 0.33998104358485626, 0.8611363115940526] as const;
export const gaussWeights = [0.34785484513745385, 0.6521451548625461, 0.6521451548625461, 0.34785484513745385] as const;

/** Shape values of the quadratic edge (start, end, middle) at t in (-1, 1). */
export function edgeShapes(t: number): [number, number, number] {
  return [0.5 * t * (t - 1), 0.5 * t * (t + 1), 1 - t * t];
}

/** Length element of the curved edge at t. */
export function edgeSpeed(nodes: Float64Array, a: number, b: number, m: number, t: number): number {
  const da = t - 0.5;
  const db = t + 0.5;
  const dm = -2 * t;
  const x = da * nodes[2 * a] + db * nodes[2 * b] + dm * nodes[2 * m];
  const y = da * nodes[2 * a + 1] + db * nodes[2 * b + 1] + dm * nodes[2 * m + 1];
  return Math.sqrt(x * x + y * y);
}
