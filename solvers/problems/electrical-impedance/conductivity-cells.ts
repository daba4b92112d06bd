import type { EvaluationGrid, PenaltyKey, SparseMatrix } from '../../core/types';
import type { TriangleMesh } from '../../mesh/body-mesh';
import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import { degreeFourShapes } from './elements';
import type { ElectrodeFrame } from './electrodes';

/** Cells of constant conductivity: the triangles of a coarse mesh, those at the rim bounded by the body's boundary. Metres. */
export interface ConductivityCells {
  readonly count: number;
  /** Area of each cell, m^2. */
  readonly areas: Float64Array;
  /** Centroids, x, y per cell, m, in the electrode frame. */
  readonly centroids: Float64Array;
  /** Pairs of neighbouring cells, the lower first, and the length of their common edge, m. */
  readonly pairs: Int32Array;
  readonly lengths: Float64Array;
}

/**
 * @param coarse the triangles of the cells, in radii
 * @param fine quadratic elements that fill the cells
 * @param cellOf cell of each element
 */
export function conductivityCells(coarse: TriangleMesh, fine: QuadraticMesh, cellOf: Int32Array, radius: number): ConductivityCells {
  const count = coarse.triangles.length / 3;
  const areas = new Float64Array(count);
  const centroids = new Float64Array(2 * count);
  const { points, weight, value, dr, ds } = degreeFourShapes;
  for (let t = 0; t < cellOf.length; t++) {
    for (let p = 0; p < points; p++) {
      let x = 0, y = 0, xr = 0, yr = 0, xs = 0, ys = 0;
      for (let i = 0; i < 6; i++) {
        const node = fine.elements[6 * t + i];
        const nx = fine.nodes[2 * node];
        const ny = fine.nodes[2 * node + 1];
        const k = 6 * p + i;
        x += value[k] * nx;
        y += value[k] * ny;
        xr += dr[k] * nx;
        yr += dr[k] * ny;
        xs += ds[k] * nx;
        ys += ds[k] * ny;
      }
      const area = weight[p] * (xr * ys - xs * yr);
      areas[cellOf[t]] += area;
      centroids[2 * cellOf[t]] += area * x;
      centroids[2 * cellOf[t] + 1] += area * y;
    }
  }
  for (let c = 0; c < count; c++) {
    centroids[2 * c] *= radius / areas[c];
    centroids[2 * c + 1] *= radius / areas[c];
    areas[c] *= radius * radius;
  }
  const { pairs, lengths } = neighbours(coarse, radius);
  return { count, areas, centroids, pairs, lengths };
}

function neighbours(coarse: TriangleMesh, radius: number): { pairs: Int32Array; lengths: Float64Array } {
  const { triangles, vertices } = coarse;
  const stride = vertices.length;
  const firstSide = new Map<number, number>();
  const pairs: number[] = [];
  const lengths: number[] = [];
  for (let k = 0; k < triangles.length; k++) {
    const a = triangles[k];
    const b = triangles[k % 3 === 2 ? k - 2 : k + 1];
    const key = a < b ? a * stride + b : b * stride + a;
    const other = firstSide.get(key);
    const cell = (k - (k % 3)) / 3;
    if (other === undefined) {
      firstSide.set(key, cell);
      continue;
    }
    const dx = vertices[2 * a] - vertices[2 * b];
    const dy = vertices[2 * a + 1] - vertices[2 * b + 1];
    pairs.push(other, cell);
    lengths.push(radius * Math.sqrt(dx * dx + dy * dy));
  }
  return { pairs: Int32Array.from(pairs), lengths: Float64Array.from(lengths) };
}

/** +1 and -1 for the two cells of each interface, times a factor per row. */
function jumpRows(cells: ConductivityCells, factor: (row: number) => number): SparseMatrix {
  const rows = cells.lengths.length;
  const rowStart = new Int32Array(rows + 1);
  const columns = new Int32Array(2 * rows);
  const values = new Float64Array(2 * rows);
  for (let i = 0; i < rows; i++) {
    rowStart[i + 1] = 2 * (i + 1);
    columns[2 * i] = cells.pairs[2 * i];
    columns[2 * i + 1] = cells.pairs[2 * i + 1];
    const f = factor(i);
    values[2 * i] = f;
    values[2 * i + 1] = -f;
  }
  return { rows, cols: cells.count, rowStart, columns, values };
}

/** Differences across the interior interfaces of cells, with the lengths of the interfaces. */
export function cellJumps(cells: ConductivityCells): { matrix: SparseMatrix; lengths: Float64Array } {
  return { matrix: jumpRows(cells, () => 1), lengths: cells.lengths };
}

function edgeOverDistance(cells: ConductivityCells, row: number): number {
  const a = 2 * cells.pairs[2 * row];
  const b = 2 * cells.pairs[2 * row + 1];
  const dx = cells.centroids[a] - cells.centroids[b];
  const dy = cells.centroids[a + 1] - cells.centroids[b + 1];
  return cells.lengths[row] / Math.sqrt(dx * dx + dy * dy);
}

/** Penalties as `ForwardProblem.penalty` describes them. */
export function cellPenalty(cells: ConductivityCells, kind: PenaltyKey): SparseMatrix {
  const n = cells.count;
  if (kind === 'identity') {
    const rowStart = new Int32Array(n + 1);
    const columns = new Int32Array(n);
    const values = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      rowStart[i + 1] = i + 1;
      columns[i] = i;
      values[i] = Math.sqrt(cells.areas[i]);
    }
    return { rows: n, cols: n, rowStart, columns, values };
  }
  if (kind === 'gradient') return jumpRows(cells, (row) => Math.sqrt(edgeOverDistance(cells, row)));
  // Finite-volume Laplacian G^T G, row i over sqrt(measure i): ||L x||^2 approximates the integral of (Laplacian of x)^2.
  const entries: [number, number][][] = Array.from({ length: n }, () => []);
  const diagonal = new Float64Array(n);
  for (let row = 0; row < cells.lengths.length; row++) {
    const a = cells.pairs[2 * row];
    const b = cells.pairs[2 * row + 1];
    const weight = edgeOverDistance(cells, row);
    diagonal[a] += weight;
    diagonal[b] += weight;
    entries[a].push([b, -weight]);
    entries[b].push([a, -weight]);
  }
  const rowStart = new Int32Array(n + 1);
  const columns: number[] = [];
  const values: number[] = [];
  for (let i = 0; i < n; i++) {
    const scale = 1 / Math.sqrt(cells.areas[i]);
    for (const [column, value] of [...entries[i], [i, diagonal[i]] as [number, number]].sort((p, q) => p[0] - q[0])) {
      columns.push(column);
      values.push(value * scale);
    }
    rowStart[i + 1] = columns.length;
  }
  return { rows: n, cols: n, rowStart, columns: Int32Array.from(columns), values: Float64Array.from(values) };
}

/** Sample points a side in each pixel; the area share of a cell in a pixel is right to about 1 %. */
const samples = 8;

/**
 * Averages over the pixels of `grid.inside`: row i holds the share of each cell in pixel i, clipped to the body. Rows sum to 1.
 */
export function pixelShares(coarse: TriangleMesh, grid: EvaluationGrid, frame: ElectrodeFrame): SparseMatrix {
  const locate = cellLocator(coarse);
  const { inside, nx } = grid;
  const dx = (grid.xMax - grid.xMin) / nx;
  const dy = (grid.yMax - grid.yMin) / grid.ny;
  const rowStart = new Int32Array(inside.length + 1);
  const columns: number[] = [];
  const values: number[] = [];
  const cellsHere: number[] = [];
  const counts: number[] = [];
  let guess = 0;
  for (let p = 0; p < inside.length; p++) {
    const x0 = grid.xMin + (inside[p] % nx) * dx;
    const y0 = grid.yMin + Math.floor(inside[p] / nx) * dy;
    cellsHere.length = 0;
    counts.length = 0;
    let total = 0;
    for (let k = 0; k < samples * samples; k++) {
      const row = Math.floor(k / samples);
      const [u, v] = frame.toFrame(x0 + (((k % samples) + 0.5) / samples) * dx, y0 + ((row + 0.5) / samples) * dy);
      if (!frame.boundary.inside(u, v)) continue;
      const cell = locate(u, v, guess);
      if (cell < 0) continue;
      guess = cell;
      total++;
      const at = cellsHere.indexOf(cell);
      if (at >= 0) counts[at]++;
      else {
        cellsHere.push(cell);
        counts.push(1);
      }
    }
    const sorted = cellsHere.map((cell, i) => [cell, counts[i]] as const).sort((a, b) => a[0] - b[0]);
    for (const [cell, count] of sorted) {
      columns.push(cell);
      values.push(count / total);
    }
    rowStart[p + 1] = columns.length;
  }
  return { rows: inside.length, cols: coarse.triangles.length / 3, rowStart, columns: Int32Array.from(columns), values: Float64Array.from(values) };
}

/**
 * Finds the cell of a point of the body by walking from a guess across the edges that the point lies beyond. Past a boundary edge the
 * point lies between chord and boundary and belongs to that cell, unless a bay of the boundary stopped the walk: then all cells are
 * looked at, and the one that the point lies in, or least outside of, is taken.
 */
function cellLocator(coarse: TriangleMesh): (x: number, y: number, guess: number) => number {
  const { triangles, vertices } = coarse;
  const count = triangles.length / 3;
  const across = new Int32Array(3 * count).fill(-1);
  const stride = vertices.length;
  const sides = new Map<number, number>();
  for (let k = 0; k < triangles.length; k++) {
    const a = triangles[k];
    const b = triangles[k % 3 === 2 ? k - 2 : k + 1];
    const key = a < b ? a * stride + b : b * stride + a;
    const other = sides.get(key);
    if (other === undefined) sides.set(key, k);
    else {
      across[k] = (other - (other % 3)) / 3;
      across[other] = (k - (k % 3)) / 3;
    }
  }
  /** How far the point lies outside cell t, over the square root of twice its area; 0 or less inside. */
  const outside = (t: number, x: number, y: number): number => {
    let most = -Infinity;
    let area2 = 0;
    for (let k = 0; k < 3; k++) {
      const a = triangles[3 * t + k];
      const b = triangles[3 * t + (k === 2 ? 0 : k + 1)];
      const ux = vertices[2 * b] - vertices[2 * a];
      const uy = vertices[2 * b + 1] - vertices[2 * a + 1];
      const side = ux * (y - vertices[2 * a + 1]) - uy * (x - vertices[2 * a]);
      area2 += side;
      most = Math.max(most, -side / Math.sqrt(ux * ux + uy * uy));
    }
    return most / Math.sqrt(area2);
  };
  const search = (x: number, y: number): number => {
    let best = 0;
    let least = Infinity;
    for (let t = 0; t < count && least > 0; t++) {
      const d = outside(t, x, y);
      if (d < least) {
        least = d;
        best = t;
      }
    }
    return best;
  };
  return (x, y, guess) => {
    let t = guess;
    // Straight walks in a Delaunay mesh end; the bound only guards against rounding on degenerate edges.
    for (let step = 0; step < count; step++) {
      let next = -1;
      let worst = 0;
      for (let k = 0; k < 3; k++) {
        const a = triangles[3 * t + k];
        const b = triangles[3 * t + (k === 2 ? 0 : k + 1)];
        const side = (vertices[2 * b] - vertices[2 * a]) * (y - vertices[2 * a + 1]) - (vertices[2 * b + 1] - vertices[2 * a + 1]) * (x - vertices[2 * a]);
        if (side < worst && across[3 * t + k] >= 0) {
          worst = side;
          next = across[3 * t + k];
        }
      }
      if (next < 0) return coarse.boundary.convex || outside(t, x, y) <= 0 ? t : search(x, y);
      t = next;
    }
    return coarse.boundary.convex ? -1 : search(x, y);
  };
}
