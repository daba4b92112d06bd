import type { PixelGrid } from '../pixel-grid/pixel-grid';
import type { Ray } from './rays';

/** Adds `weight` of a cell (i * nx + j) to a ray. */
export type AddCell = (cell: number, weight: number) => void;
/** Splits one ray, clipped to the disc of `radius` metres about the origin, among cells. */
export type Projector = (grid: PixelGrid, radius: number, ray: Ray, add: AddCell) => void;

/** Half the chord that a disc cuts from a ray, m; 0 where they do not meet. */
export function halfChord(radius: number, ray: Ray): number {
  const square = (radius - ray.offset) * (radius + ray.offset);
  return square > 0 ? Math.sqrt(square) : 0;
}

/** Components of a direction below this are taken as 0: the ray runs along the lines of the grid. */
const parallel = 1e-12;

/**
 * Exact lengths of a ray in the cells that it crosses: the crossings with the vertical and with the horizontal lines of the grid in one
 * sequence (Siddon 1985). The lengths sum to the chord.
 */
export const siddon: Projector = (grid, radius, ray, add) => {
  const end = halfChord(radius, ray);
  if (end === 0) return;
  const { nx, ny, xMin, yMin, dx, dy } = grid;
  const px = ray.nx * ray.offset;
  const py = ray.ny * ray.offset;
  const ex = Math.abs(ray.ny) < parallel ? 0 : -ray.ny;
  const ey = Math.abs(ray.nx) < parallel ? 0 : ray.nx;
  const stepX = ex > 0 ? 1 : -1;
  const stepY = ey > 0 ? 1 : -1;
  // The next line of each kind beyond the start of the chord.
  let lineX = ex === 0 ? 0 : ex > 0 ? Math.floor((px - end * ex - xMin) / dx) + 1 : Math.ceil((px - end * ex - xMin) / dx) - 1;
  let lineY = ey === 0 ? 0 : ey > 0 ? Math.floor((py - end * ey - yMin) / dy) + 1 : Math.ceil((py - end * ey - yMin) / dy) - 1;
  const crossX = (): number => (ex === 0 ? Infinity : (xMin + lineX * dx - px) / ex);
  const crossY = (): number => (ey === 0 ? Infinity : (yMin + lineY * dy - py) / ey);
  let t = -end;
  let tx = crossX();
  let ty = crossY();
  while (t < end) {
    const next = Math.min(tx, ty, end);
    if (next > t) {
      // The cell by the middle of the piece, where rounding cannot put it across a line.
      const middle = 0.5 * (t + next);
      const j = Math.floor((px + middle * ex - xMin) / dx);
      const i = Math.floor((py + middle * ey - yMin) / dy);
      if (i >= 0 && j >= 0 && i < ny && j < nx) add(i * nx + j, next - t);
      t = next;
    }
    if (next === end) break;
    if (tx <= next) {
      lineX += stepX;
      tx = crossX();
    }
    if (ty <= next) {
      lineY += stepY;
      ty = crossY();
    }
  }
};
