import { cos, sin } from '../core/math';
import type { SizeField } from './size-field';

const twoPi = 2 * Math.PI;

/**
 * Angles of the boundary nodes of the unit disc, ascending in [first, first + 2 pi): every fixed angle is a node, and between
 * two fixed angles the nodes split the integral of ds / h(s) into equal parts.
 * @param fixed at least one angle, ascending, within one turn.
 */
export function boundaryAngles(fixed: readonly number[], size: SizeField): Float64Array {
  const angles: number[] = [];
  for (let k = 0; k < fixed.length; k++) {
    const from = fixed[k];
    const to = k + 1 < fixed.length ? fixed[k + 1] : fixed[0] + twoPi;
    appendArc(angles, from, to, size);
  }
  return Float64Array.from(angles);
}

function appendArc(angles: number[], from: number, to: number, size: SizeField): void {
  const length = to - from;
  // Cumulative ds / h at steps of an eighth of the local size, from both ends to the middle so that equal ends give a
  // symmetric split.
  const left = march(from, length / 2, 1, size);
  const right = march(to, length / 2, -1, size);
  const total = left.total + right.total;
  const parts = Math.max(length > 2 ? 3 : 1, Math.round(total + 0.2));
  angles.push(from);
  for (let i = 1; i < parts; i++) {
    const target = (total * i) / parts;
    angles.push(target <= left.total ? from + locate(left, target) : to - locate(right, total - target));
  }
}

interface March {
  readonly s: number[];
  readonly sum: number[];
  readonly total: number;
}

function march(start: number, length: number, direction: 1 | -1, size: SizeField): March {
  const s = [0];
  const sum = [0];
  let at = 0;
  let total = 0;
  while (at < length) {
    const here = start + direction * at;
    const step = Math.min(length - at, 0.125 * size.at(cos(here), sin(here)));
    const middle = start + direction * (at + step / 2);
    total += step / size.at(cos(middle), sin(middle));
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
