/** Unknowns as equal cells of a rectangle: every cell that touches the body, row after row from the lowest y. */
import type { GridExtent } from '../../core/types';

export interface PixelGrid extends GridExtent {
  /** Sides of a cell, m. */
  readonly dx: number;
  readonly dy: number;
  /** Cells that are unknowns, ascending: cell i * nx + j has row i (from the lowest y) and column j. */
  readonly inside: Int32Array;
  /** Number of the unknown of each cell, -1 where it is none; length nx * ny. */
  readonly numberOf: Int32Array;
  /** Measure of each unknown: dx dy, also where the body cuts a cell. Length `inside.length`. */
  readonly weights: Float64Array;
}

/**
 * Cells that touch the body: all of a rectangle or an interval, and of a disc those with a point inside it, so that the cells cover the body.
 * @throws RangeError where the extent is empty, the counts are not whole numbers from 1 to 4096, or the body is none of these
 */
export function pixelGrid({ nx, ny, xMin, xMax, yMin, yMax, body }: GridExtent): PixelGrid {
  for (const n of [nx, ny]) if (!(Number.isInteger(n) && n > 0 && n <= 4096)) throw new RangeError(`The cells must be 1 to 4096 a side, not ${n}.`);
  if (!(xMax > xMin && yMax > yMin && xMax - xMin < Infinity && yMax - yMin < Infinity)) throw new RangeError(`The extent of the cells is empty: x from ${xMin} to ${xMax}, y from ${yMin} to ${yMax}.`);
  if (body.kind === 'star') throw new RangeError('Pixels are laid over a disc, a rectangle or an interval.');
  // In units of half a cell from the middle, so that the cells of discs of every size are the same.
  const radiusX = body.kind === 'disc' ? (2 * body.radius * nx) / (xMax - xMin) : Infinity;
  const radiusY = body.kind === 'disc' ? (2 * body.radius * ny) / (yMax - yMin) : Infinity;
  const inside: number[] = [];
  const numberOf = new Int32Array(nx * ny).fill(-1);
  for (let i = 0; i < ny; i++) {
    const v = Math.max(0, Math.abs(2 * i + 1 - ny) - 1) / radiusY;
    for (let j = 0; j < nx; j++) {
      const u = Math.max(0, Math.abs(2 * j + 1 - nx) - 1) / radiusX;
      if (u * u + v * v >= 1) continue;
      numberOf[i * nx + j] = inside.length;
      inside.push(i * nx + j);
    }
  }
  const dx = (xMax - xMin) / nx;
  const dy = (yMax - yMin) / ny;
  return { nx, ny, xMin, xMax, yMin, yMax, body, dx, dy, inside: Int32Array.from(inside), numberOf, weights: new Float64Array(inside.length).fill(dx * dy) };
}

/** Pixels a side of the evaluation grid over a body with so many cells a side: 64, or finer where the cells are. */
export function evaluationSide(cells: number): number {
  return cells <= 64 ? 64 : cells <= 96 ? 96 : 128;
}
