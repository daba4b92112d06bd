/**
 * The disc of the area of the quarter-amplitude set about its centroid, for the shape figures of Adler et al. 2009. Defined for one target.
 */
import { gridGeometry } from './grid-geometry';
import type { ImageSummary } from './metric-definition';

export interface DiscSplit {
  /** Pixels of the quarter-amplitude set, and those of them outside the disc. */
  readonly set: number;
  readonly setOutside: number;
  /** Sum of the amplitude (change times the sign of the target) inside the disc. */
  readonly amplitudeInside: number;
  /** Sum of |amplitude| where it is negative outside the disc. */
  readonly oppositeOutside: number;
}

/** Two figures read the split of one image. */
const cache = new WeakMap<ImageSummary, DiscSplit | string>();

/** The split, or the reason why there is none. */
export function splitByDisc(summary: ImageSummary): DiscSplit | string {
  let split = cache.get(summary);
  if (split === undefined) cache.set(summary, (split = compute(summary)));
  return split;
}

function compute(s: ImageSummary): DiscSplit | string {
  const { targets, grid, estimate, background } = s.input;
  if (targets.length === 0) return 'The phantom declares no target.';
  if (targets.length > 1) return 'The figure is defined for one target.';
  const { findings, reason, count } = s.quarter();
  if (!findings) return reason ?? 'No target was found.';
  const { x, y, pixelArea } = gridGeometry(grid);
  const sign = targets[0].contrast > 0 ? 1 : -1;
  const threshold = 0.25 * (sign > 0 ? s.changeHighest : -s.changeLowest);
  const squareRadius = (count * pixelArea) / 3.141592653589793;
  let set = 0;
  let setOutside = 0;
  let amplitudeInside = 0;
  let oppositeOutside = 0;
  for (let k = 0; k < estimate.length; k++) {
    const dx = x[k] - findings[0].x;
    const dy = y[k] - findings[0].y;
    const amplitude = sign * (estimate[k] - background[k]);
    const outside = dx * dx + dy * dy > squareRadius;
    if (amplitude >= threshold) {
      set++;
      if (outside) setOutside++;
    }
    if (!outside) amplitudeInside += amplitude;
    else if (amplitude < 0) oppositeOutside -= amplitude;
  }
  return { set, setOutside, amplitudeInside, oppositeOutside };
}
