import type { MeshBoundary } from './mesh-boundary';
import type { SizeField } from './size-field';

/**
 * Boundary nodes by their arc lengths, ascending over one turn from the first fixed one: every fixed place is a node, and between
 * two fixed places the nodes split the integral of ds / h(s) into equal parts.
 * @param fixed at least one arc length, ascending, within one turn.
 */
export function boundaryPlaces(boundary: MeshBoundary, fixed: readonly number[], size: SizeField): Float64Array {
  const places: number[] = [];
  const sizeAt = (s: number): number => size.at(...boundary.pointAt(s));
  for (let k = 0; k < fixed.length; k++) {
    const from = fixed[k];
    const to = k + 1 < fixed.length ? fixed[k + 1] : fixed[0] + boundary.length;
    appendArc(places, from, to, sizeAt);
  }
  return Float64Array.from(places);
}

function appendArc(places: number[], from: number, to: number, sizeAt: (s: number) => number): void {
  const length = to - from;
  // Cumulative ds / h at steps of an eighth of the local size, from both ends to the middle so that equal ends give a
  // symmetric split.
  const left = march(from, length / 2, 1, sizeAt);
  const right = march(to, length / 2, -1, sizeAt);
  const total = left.total + right.total;
  const parts = Math.max(length > 2 ? 3 : 1, Math.round(total + 0.2));
  places.push(from);
  for (let i = 1; i < parts; i++) {
    const target = (total * i) / parts;
    places.push(target <= left.total ? from + locate(left, target) : to - locate(right, total - target));
  }
}

interface March {
  readonly s: number[];
  readonly sum: number[];
  readonly total: number;
}

function march(start: number, length: number, direction: 1 | -1, sizeAt: (s: number) => number): March {
  const s = [0];
  const sum = [0];
  let at = 0;
  let total = 0;
  while (at < length) {
    const here = start + direction * at;
    const step = Math.min(length - at, 0.125 * sizeAt(here));
    const middle = start + direction * (at + step / 2);
    total += step / sizeAt(middle);
    at = length - at - step < 1e-12 * length ? length : at + step;
    s.push(at);
    sum.push(total);
  }
  return { s, sum, total };
}

function locate(m: March, target: number): number {
  let low = 0;
  let high = m.sum.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (m.sum[middle] <= target) low = middle;
    else high = middle;
  }
  const share = (target - m.sum[low]) / (m.sum[high] - m.sum[low]);
  return m.s[low] + share * (m.s[high] - m.s[low]);
}
