/** The peak of a curve on a line and its width at half height, for the truth and for the estimate. Defined where the grid is a line. */
import type { EvaluationGrid } from '../core/types';
import type { ImageSummary } from './metric-definition';

export interface Peak {
  /** In the unit of the line. */
  readonly place: number;
  /** Full width at half height; null where the curve does not fall to half its height on both sides. */
  readonly width: number | null;
}

export interface LinePeaks {
  readonly truth: Peak;
  readonly estimate: Peak;
}

/** Two figures read the peaks of one curve. */
const cache = new WeakMap<ImageSummary, LinePeaks | string>();

/** Both peaks, or the reason why there are none. */
export function linePeaks(summary: ImageSummary): LinePeaks | string {
  let peaks = cache.get(summary);
  if (peaks === undefined) cache.set(summary, (peaks = compute(summary)));
  return peaks;
}

function compute(s: ImageSummary): LinePeaks | string {
  const { truth, estimate, background, grid } = s.input;
  if (grid.body.kind !== 'interval') return 'The figure is defined on a line.';
  if (!(s.signalLargest > 0)) return 'The truth equals the background: it has no peak.';
  let sign = 1;
  for (let k = 0; k < truth.length; k++)
    if (Math.abs(truth[k] - background[k]) === s.signalLargest) {
      sign = truth[k] > background[k] ? 1 : -1;
      break;
    }
  const rise = sign > 0 ? s.changeHighest : -s.changeLowest;
  // A background that differs from itself by rounding has no peak.
  if (!(rise > 1e-9 * s.signalLargest)) return `The estimate does not ${sign > 0 ? 'rise above' : 'fall below'} the background, as the truth does.`;
  const change = (values: Float64Array): Float64Array => values.map((v, k) => sign * (v - background[k]));
  const wanted = change(truth);
  const top = largestRun(wanted);
  if (top.first === 0 || top.last === wanted.length - 1) return 'The truth is largest at an end of the line: it has no peak.';
  return { truth: peakOf(wanted, grid), estimate: peakOf(change(estimate), grid) };
}

/** Cells of the largest value, the first run of equals. */
function largestRun(v: Float64Array): { readonly first: number; readonly last: number } {
  let first = 0;
  for (let k = 1; k < v.length; k++) if (v[k] > v[first]) first = k;
  let last = first;
  while (last + 1 < v.length && v[last + 1] === v[first]) last++;
  return { first, last };
}

function peakOf(v: Float64Array, grid: EvaluationGrid): Peak {
  const step = (grid.xMax - grid.xMin) / grid.nx;
  const { first, last } = largestRun(v);
  const half = 0.5 * v[first];
  let middle = 0.5 * (first + last);
  if (first === last && first > 0 && last < v.length - 1) {
    // Vertex of the parabola through the cell and its neighbours.
    const below = v[first - 1];
    const above = v[first + 1];
    middle += (0.5 * (below - above)) / (below - 2 * v[first] + above);
  }
  let left = first;
  while (left >= 0 && v[left] > half) left--;
  let right = last;
  while (right < v.length && v[right] > half) right++;
  const place = grid.xMin + (middle + 0.5) * step;
  if (left < 0 || right === v.length) return { place, width: null };
  const from = left + (half - v[left]) / (v[left + 1] - v[left]);
  const to = right - (half - v[right]) / (v[right - 1] - v[right]);
  return { place, width: (to - from) * step };
}
