import type { ForwardProblem, SparseMatrix } from '../core/types';

const cache = new WeakMap<ForwardProblem, SparseMatrix>();

/**
 * The unknowns of an image: row j holds the shares of the pixels of `grid.inside` in cell j, which sum to 1 (a row without pixels is empty).
 * The transpose of `toImage` with its rows scaled; n calls of it, once a problem.
 * @returns unknowns x grid.inside.length
 */
export function cellsOfImage(problem: ForwardProblem): SparseMatrix {
  let map = cache.get(problem);
  if (!map) cache.set(problem, (map = transposeOfImage(problem)));
  return map;
}

function transposeOfImage(problem: ForwardProblem): SparseMatrix {
  const n = problem.unknowns;
  const pixels = problem.grid.inside.length;
  const unit = new Float64Array(n);
  const image = new Float64Array(pixels);
  const rowStart = new Int32Array(n + 1);
  const columns: number[] = [];
  const values: number[] = [];
  for (let j = 0; j < n; j++) {
    unit[j] = 1;
    problem.toImage(unit, image);
    unit[j] = 0;
    let sum = 0;
    for (let p = 0; p < pixels; p++) sum += image[p];
    if (sum > 0)
      for (let p = 0; p < pixels; p++)
        if (image[p] !== 0) {
          columns.push(p);
          values.push(image[p] / sum);
        }
    rowStart[j + 1] = columns.length;
  }
  return { rows: n, cols: pixels, rowStart, columns: Int32Array.from(columns), values: Float64Array.from(values) };
}

/** Centroids of the unknowns, x, y pairs in metres, by the pixels that they cover; the middle of the grid for a cell without one. */
export function unknownPlaces(problem: ForwardProblem): Float64Array {
  const { grid } = problem;
  const map = cellsOfImage(problem);
  const stepX = (grid.xMax - grid.xMin) / grid.nx;
  const stepY = (grid.yMax - grid.yMin) / grid.ny;
  const places = new Float64Array(2 * map.rows);
  for (let j = 0; j < map.rows; j++) {
    if (map.rowStart[j] === map.rowStart[j + 1]) {
      places[2 * j] = (grid.xMin + grid.xMax) / 2;
      places[2 * j + 1] = (grid.yMin + grid.yMax) / 2;
    }
    for (let k = map.rowStart[j]; k < map.rowStart[j + 1]; k++) {
      const pixel = grid.inside[map.columns[k]];
      const column = pixel % grid.nx;
      places[2 * j] += map.values[k] * (grid.xMin + (column + 0.5) * stepX);
      places[2 * j + 1] += map.values[k] * (grid.yMin + ((pixel - column) / grid.nx + 0.5) * stepY);
    }
  }
  return places;
}
