/**
 * The quarter-amplitude set of Adler et al. 2009: pixels of at least one fourth of the largest amplitude, with 0/1 weights. The
 * amplitude is (estimate - background) times the sign of the declared contrast, so conductive and resistive targets both work.
 */
import type { MetricInput, Target } from '../core/types';
import { assign } from './assignment';
import { gridGeometry, type GridGeometry } from './grid-geometry';

/** A spot of smaller area than this share of the largest one is noise, not a candidate for a target. */
const smallestSpotShare = 0.1;

export interface TargetFinding {
  readonly target: Target;
  /** Centroid of the spot that the target was matched to, in metres. */
  readonly x: number;
  readonly y: number;
  /** True where the target had to share a spot: fewer spots than targets. */
  readonly missed: boolean;
}

export interface QuarterAmplitude {
  /** One finding a target, in the order declared; null with a reason where the image has no amplitude of the target's sign. */
  readonly findings: readonly TargetFinding[] | null;
  readonly reason?: string;
  /** Pixels in the set (of both signs together). */
  readonly count: number;
  /** Spots that belong to no target. */
  readonly falseSpots: number;
}

interface Spot {
  x: number;
  y: number;
  count: number;
}

/** @param highest, lowest of (estimate - background) over the body, 0 included */
export function quarterAmplitude(input: MetricInput, highest: number, lowest: number): QuarterAmplitude {
  const { targets } = input;
  const geometry = gridGeometry(input.grid);
  const findings: TargetFinding[] = [];
  let count = 0;
  let falseSpots = 0;
  for (const sign of [1, -1]) {
    const wanted = targets.filter((target) => (sign > 0 ? target.contrast > 0 : target.contrast < 0));
    if (wanted.length === 0) continue;
    const peak = sign > 0 ? highest : -lowest;
    // A background that went through the projection to pixels differs from itself by rounding: that is no response.
    let contrast = 0;
    for (const target of wanted) contrast = Math.max(contrast, Math.abs(target.contrast));
    if (!(peak > 1e-9 * contrast))
      return { findings: null, reason: `The image has no ${sign > 0 ? 'rise above' : 'fall below'} the background, as the target has.`, count: 0, falseSpots: 0 };
    const whole = wanted.length === 1 ? wholeSet(input, geometry, sign, 0.25 * peak) : null;
    const spots = whole ? [whole] : connectedSpots(input, geometry, sign, 0.25 * peak);
    for (const spot of spots) count += spot.count;
    findings.push(...match(wanted, spots));
    const parts = whole ? connectedSpots(input, geometry, sign, 0.25 * peak) : spots;
    falseSpots += Math.max(0, largeSpots(parts).length - wanted.length);
  }
  if (findings.length === 0) return { findings: null, reason: 'The declared targets have no contrast to the background.', count: 0, falseSpots: 0 };
  findings.sort((a, b) => targets.indexOf(a.target) - targets.indexOf(b.target));
  return { findings, count, falseSpots };
}

/** Centroid of the whole set, as for the single target of Adler et al. 2009. */
function wholeSet({ estimate, background }: MetricInput, { x, y }: GridGeometry, sign: number, threshold: number): Spot {
  let count = 0;
  let sumX = 0;
  let sumY = 0;
  for (let k = 0; k < estimate.length; k++)
    if (sign * (estimate[k] - background[k]) >= threshold) {
      count++;
      sumX += x[k];
      sumY += y[k];
    }
  return { x: sumX / count, y: sumY / count, count };
}

/** Parts of the set that hang together over pixel edges, in the order of their first pixel. */
function connectedSpots({ estimate, background, grid }: MetricInput, geometry: GridGeometry, sign: number, threshold: number): Spot[] {
  const { nx, ny, inside } = grid;
  const { x, y, insideIndex } = geometry;
  const open = new Uint8Array(estimate.length);
  for (let k = 0; k < estimate.length; k++) if (sign * (estimate[k] - background[k]) >= threshold) open[k] = 1;
  const stack = new Int32Array(estimate.length);
  const spots: Spot[] = [];
  for (let start = 0; start < open.length; start++) {
    if (!open[start]) continue;
    let size = 0;
    stack[size++] = start;
    open[start] = 0;
    let count = 0;
    let sumX = 0;
    let sumY = 0;
    while (size > 0) {
      const k = stack[--size];
      count++;
      sumX += x[k];
      sumY += y[k];
      const pixel = inside[k];
      const column = pixel % nx;
      const row = (pixel - column) / nx;
      for (let side = 0; side < 4; side++) {
        const c = column + (side === 0 ? 1 : side === 1 ? -1 : 0);
        const r = row + (side === 2 ? 1 : side === 3 ? -1 : 0);
        if (c < 0 || c >= nx || r < 0 || r >= ny) continue;
        const neighbour = insideIndex[r * nx + c];
        if (neighbour >= 0 && open[neighbour]) {
          open[neighbour] = 0;
          stack[size++] = neighbour;
        }
      }
    }
    spots.push({ x: sumX / count, y: sumY / count, count });
  }
  return spots;
}

function largeSpots(spots: readonly Spot[]): Spot[] {
  let largest = 0;
  for (const spot of spots) largest = Math.max(largest, spot.count);
  return spots.filter((spot) => spot.count >= smallestSpotShare * largest);
}

/** Least total distance one to one; a target left over takes the nearest spot and counts as missed. */
function match(targets: readonly Target[], spots: readonly Spot[]): TargetFinding[] {
  const large = largeSpots(spots);
  const distance = (target: Target, spot: Spot): number => {
    const dx = target.x - spot.x;
    const dy = target.y - spot.y;
    return Math.sqrt(dx * dx + dy * dy);
  };
  const spotOf = new Int32Array(targets.length).fill(-1);
  const few = large.length < targets.length;
  const rows = few ? large.length : targets.length;
  const cols = few ? targets.length : large.length;
  const cost = new Float64Array(rows * cols);
  for (let i = 0; i < rows; i++) for (let j = 0; j < cols; j++) cost[i * cols + j] = few ? distance(targets[j], large[i]) : distance(targets[i], large[j]);
  const columnOf = assign(cost, rows, cols);
  for (let i = 0; i < rows; i++) {
    if (few) spotOf[columnOf[i]] = i;
    else spotOf[i] = columnOf[i];
  }
  return targets.map((target, index) => {
    let spot = spotOf[index];
    const missed = spot < 0;
    if (missed) {
      spot = 0;
      for (let j = 1; j < large.length; j++) if (distance(target, large[j]) < distance(target, large[spot])) spot = j;
    }
    return { target, x: large[spot].x, y: large[spot].y, missed };
  });
}
