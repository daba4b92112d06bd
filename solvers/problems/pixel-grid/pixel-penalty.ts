/** Penalties and jumps on a grid of cells, as `ForwardProblem.penalty` and `.jumps` describe them. */
import type { PenaltyKey, SparseMatrix } from '../../core/types';
import type { PixelGrid } from './pixel-grid';

/** Calls back for each interface of two unknowns, those to the right before those above, cell after cell; `a` is the lower number. */
function eachInterface(grid: PixelGrid, visit: (a: number, b: number, length: number, distance: number) => void): void {
  const { nx, ny, dx, dy, numberOf, inside } = grid;
  for (let a = 0; a < inside.length; a++) {
    const cell = inside[a];
    if ((cell % nx) + 1 < nx && numberOf[cell + 1] >= 0) visit(a, numberOf[cell + 1], dy, dx);
    if (cell + nx < nx * ny && numberOf[cell + nx] >= 0) visit(a, numberOf[cell + nx], dx, dy);
  }
}

/** One row an interface: factor at the lower, -factor at the higher unknown. */
function interfaceRows(grid: PixelGrid, factor: (length: number, distance: number) => number): SparseMatrix {
  const columns: number[] = [];
  const values: number[] = [];
  eachInterface(grid, (a, b, length, distance) => {
    const f = factor(length, distance);
    columns.push(a, b);
    values.push(f, -f);
  });
  const rows = columns.length / 2;
  return { rows, cols: grid.inside.length, rowStart: Int32Array.from({ length: rows + 1 }, (_, i) => 2 * i), columns: Int32Array.from(columns), values: Float64Array.from(values) };
}

/** +1 and -1 across each interface, with its length: a total variation that is anisotropic along the axes. */
export function pixelJumps(grid: PixelGrid): { matrix: SparseMatrix; lengths: Float64Array } {
  const lengths: number[] = [];
  eachInterface(grid, (_a, _b, length) => lengths.push(length));
  return { matrix: interfaceRows(grid, () => 1), lengths: Float64Array.from(lengths) };
}

/**
 * 'identity': square roots of the measures. 'gradient': (length / distance)^(1/2) times the jump of each interface. 'laplacian': G^T G with
 * row i over the square root of measure i. Nothing is penalised across the rim.
 */
export function pixelPenalty(grid: PixelGrid, kind: PenaltyKey): SparseMatrix {
  const n = grid.inside.length;
  const { weights } = grid;
  if (kind === 'identity') {
    const index = Int32Array.from({ length: n + 1 }, (_, i) => i);
    return { rows: n, cols: n, rowStart: index, columns: index.slice(0, n), values: weights.map((w) => Math.sqrt(w)) };
  }
  if (kind === 'gradient') return interfaceRows(grid, (length, distance) => Math.sqrt(length / distance));
  const entries: [number, number][][] = Array.from({ length: n }, () => []);
  const diagonal = new Float64Array(n);
  eachInterface(grid, (a, b, length, distance) => {
    const weight = length / distance;
    diagonal[a] += weight;
    diagonal[b] += weight;
    entries[a].push([b, -weight]);
    entries[b].push([a, -weight]);
  });
  const rowStart = new Int32Array(n + 1);
  const columns: number[] = [];
  const values: number[] = [];
  for (let i = 0; i < n; i++) {
    const scale = 1 / Math.sqrt(weights[i]);
    for (const [column, value] of [...entries[i], [i, diagonal[i]] as [number, number]].sort((p, q) => p[0] - q[0])) {
      columns.push(column);
      values.push(value * scale);
    }
    rowStart[i + 1] = columns.length;
  }
  return { rows: n, cols: n, rowStart, columns: Int32Array.from(columns), values: Float64Array.from(values) };
}
