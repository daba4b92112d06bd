import type { Body } from '../../../shared/domain/body';
import { evaluationGrid } from '../../../solvers/core/grid';
import { bodyReach } from './body-outline';

/** Grid of the images: `ny` rows by `nx` columns, row 0 at the lowest y, lengths in m; of a line one row, from 0 to 1. */
export interface PixelGrid {
  readonly nx: number;
  readonly ny: number;
  readonly xMin: number;
  readonly xMax: number;
  readonly yMin: number;
  readonly yMax: number;
  readonly bodyRadius: number;
  /** A disc of `bodyRadius` where it is absent. */
  readonly body?: Body | undefined;
}

export const bodyOf = (grid: Pick<PixelGrid, 'body' | 'bodyRadius'>): Body => grid.body ?? { kind: 'disc', radius: grid.bodyRadius };
/** The unknown is a function of one variable, drawn as a curve. */
export const isLine = (grid: Pick<PixelGrid, 'body'>): boolean => grid.body?.kind === 'interval';

/** A full picture: NaN outside the body, row 0 at the lowest y. */
export interface Picture {
  readonly grid: PixelGrid;
  readonly values: Float64Array;
}

/** Indices of the pixels whose centre lies inside the body, ascending: the order in which images are stored. */
export const insidePixels = (grid: PixelGrid): Int32Array => evaluationGrid({ ...grid, body: bodyOf(grid) }).inside;

/**
 * Values on the inside pixels (or on all pixels) as a picture.
 * @throws RangeError when the length is neither.
 */
export function toPicture(values: ArrayLike<number>, grid: PixelGrid, inside: Int32Array = insidePixels(grid)): Picture {
  const full = new Float64Array(grid.nx * grid.ny).fill(NaN);
  if (values.length === full.length) {
    for (const p of inside) full[p] = values[p] ?? NaN;
  } else if (values.length === inside.length) {
    inside.forEach((p, i) => {
      full[p] = values[i] ?? NaN;
    });
  } else {
    throw new RangeError(`An image of ${values.length} values does not fit a grid of ${grid.nx} x ${grid.ny} with ${inside.length} pixels inside the body.`);
  }
  return { grid, values: full };
}

export function difference(a: Picture, b: Picture): Picture {
  if (a.values.length !== b.values.length) throw new RangeError(`The images have ${a.values.length} and ${b.values.length} pixels.`);
  return { grid: a.grid, values: a.values.map((v, i) => v - (b.values[i] ?? NaN)) };
}

/** Value at a place, null outside the body. */
export function valueAt(picture: Picture, x: number, y: number): number | null {
  const { grid, values } = picture;
  const i = Math.floor(((x - grid.xMin) / (grid.xMax - grid.xMin)) * grid.nx);
  const j = Math.floor(((y - grid.yMin) / (grid.yMax - grid.yMin)) * grid.ny);
  if (i < 0 || j < 0 || i >= grid.nx || j >= grid.ny) return null;
  const v = values[j * grid.nx + i] ?? NaN;
  return Number.isNaN(v) ? null : v;
}

/** Largest absolute value and where it sits (centre of its pixel). */
export function largest(picture: Picture): { value: number; x: number; y: number } {
  const { grid, values } = picture;
  let at = -1;
  let value = 0;
  values.forEach((v, p) => {
    if (Math.abs(v) > value) {
      value = Math.abs(v);
      at = p;
    }
  });
  const p = Math.max(at, 0);
  return {
    value,
    x: grid.xMin + (((p % grid.nx) + 0.5) * (grid.xMax - grid.xMin)) / grid.nx,
    y: grid.yMin + ((Math.floor(p / grid.nx) + 0.5) * (grid.yMax - grid.yMin)) / grid.ny,
  };
}

/** Least and greatest value over several pictures. */
export function rangeOf(pictures: readonly Picture[]): [low: number, high: number] {
  let low = Infinity;
  let high = -Infinity;
  for (const { values } of pictures) {
    for (const v of values) {
      if (v < low) low = v;
      if (v > high) high = v;
    }
  }
  return low <= high ? [low, high] : [0, 1];
}

/**
 * Ends of the colour scale for a truth and what is shown beside it: as far below the background as above it (not below zero
 * where nothing is), so that the background has the same shade in every picture. A tenth of room to each side.
 */
export function valueScale([least, greatest]: readonly [number, number], background: number): [low: number, high: number] {
  const reach = 1.1 * Math.max(Math.abs(greatest - background), Math.abs(background - least), 1e-9 * Math.abs(background));
  const half = reach > 1e-6 * Math.abs(background) ? reach : Math.abs(background) / 2 || 1;
  return [least >= 0 ? Math.max(0, background - half) : background - half, background + half];
}

/** Symmetric limits of a difference: the least of 1, 2.5, 5 times a power of ten that holds four fifths of it. */
export function differenceLimit(largestError: number): number {
  if (!(largestError > 0)) return 0.1;
  const decade = 10 ** Math.floor(Math.log10(largestError * 0.8));
  const step = [1, 2.5, 5, 10].find((s) => s * decade >= largestError * 0.8) ?? 10;
  return Number((step * decade).toPrecision(3));
}

/** Values along the cut through the centre at an angle (radians) from A to B, `count` places; null outside. Of a line, all its values. */
export function cutThrough(picture: Picture, angle: number, count = 121): { position: number; value: number | null }[] {
  const { grid, values } = picture;
  const body = bodyOf(grid);
  if (body.kind === 'interval') return Array.from(values, (v, i) => ({ position: grid.xMin + ((i + 0.5) * (grid.xMax - grid.xMin)) / grid.nx, value: Number.isNaN(v) ? null : v }));
  const from = -bodyReach(body, angle + Math.PI);
  const to = bodyReach(body, angle);
  return Array.from({ length: count }, (_, k) => {
    const position = from + ((to - from) * k) / (count - 1);
    const inner = position * 0.999;
    return { position, value: valueAt(picture, inner * Math.cos(angle), inner * Math.sin(angle)) };
  });
}
