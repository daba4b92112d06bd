import { halfChord, type Projector } from './siddon';

/**
 * Linear interpolation between the two cells next to the ray in each column (row) of cells that it crosses most squarely, times the length
 * of the ray in that column (Joseph 1982), clipped to the chord.
 */
export const joseph: Projector = (grid, radius, ray, add) => {
  const end = halfChord(radius, ray);
  if (end === 0) return;
  const px = ray.nx * ray.offset;
  const py = ray.ny * ray.offset;
  const { nx, ny, xMin, yMin, dx, dy } = grid;
  if (Math.abs(ray.ny) * dy >= Math.abs(ray.nx) * dx)
    alongColumns({ end, p: px, e: -ray.ny, q: py, f: ray.nx, count: nx, other: ny, from: xMin, step: dx, otherFrom: yMin, otherStep: dy }, (k, l, weight) => add(l * nx + k, weight));
  else
    alongColumns({ end, p: py, e: ray.nx, q: px, f: -ray.ny, count: ny, other: nx, from: yMin, step: dy, otherFrom: xMin, otherStep: dx }, (k, l, weight) => add(k * nx + l, weight));
};

interface Sweep {
  readonly end: number;
  /** Main coordinate p + t e, the other q + t f. */
  readonly p: number;
  readonly e: number;
  readonly q: number;
  readonly f: number;
  readonly count: number;
  readonly other: number;
  readonly from: number;
  readonly step: number;
  readonly otherFrom: number;
  readonly otherStep: number;
}

function alongColumns({ end, p, e, q, f, count, other, from, step, otherFrom, otherStep }: Sweep, add: (column: number, place: number, weight: number) => void): void {
  for (let k = 0; k < count; k++) {
    const a = (from + k * step - p) / e;
    const b = (from + (k + 1) * step - p) / e;
    const low = Math.max(-end, Math.min(a, b));
    const high = Math.min(end, Math.max(a, b));
    if (!(high > low)) continue;
    const place = (q + 0.5 * (low + high) * f - otherFrom) / otherStep - 0.5;
    const lower = Math.floor(place);
    const share = place - lower;
    // Beyond the outermost centres the rim's own value holds.
    add(k, Math.max(0, Math.min(other - 1, lower)), (1 - share) * (high - low));
    add(k, Math.max(0, Math.min(other - 1, lower + 1)), share * (high - low));
  }
}

