import { ln } from '../../../core/math';
import { solveAugmented } from '../../../linear-algebra/dense-lu';
import { matmulLeftTransposed } from '../../../linear-algebra/matrix-product';
import { gaussRule, interpolationWeights, logarithmWeights, nearLimit } from './legendre';

/** Pieces of an electrode on which fields from elsewhere are polynomials; the electrode is -1 <= t <= 1 along its length. */
export interface ElectrodePieces {
  /** Ascending from -1 to 1. */
  readonly breaks: readonly number[];
  /** Gauss points of each piece. */
  readonly orders: readonly number[];
}

export interface ResponseDetail {
  /** Gauss points of a panel. */
  readonly order: number;
  /** Length of the panel at an end over contact (in half lengths), and the largest it may be. */
  readonly tipShare: number;
  readonly tipLargest: number;
}

export const responseDetail: ResponseDetail = { order: 12, tipShare: 0.02, tipLargest: 0.01 };

/**
 * What an electrode answers to a potential. The current density q per unit of t on a straight electrode solves
 *   contact q(t) - (1/pi) integral ln|t - s| q(s) ds = f(t),
 * contact = zeta over the half length. It is singular at the ends (like r ln r, and like r^(-1/2) down to distances of about
 * `contact` where that is small), so the equation is solved on panels graded by two to both ends, down to below the contact
 * number. What other parts of the body need is only the action on smooth fields: for f given at the Gauss points of the pieces the
 * matrix returned gives the moments of q with the polynomials that are 1 at one point and 0 at the others. This compression is in
 * the spirit of Helsing and Ojala 2008 (J. Comput. Phys. 227, 8820-8840), in one step.
 * @returns n x n, row-major, n the sum of the orders; symmetric up to discretisation
 */
export function electrodeResponse(pieces: ElectrodePieces, contact: number, detail: ResponseDetail = responseDetail): Float64Array {
  const panels = gradedPanels(pieces.breaks, Math.min(detail.tipLargest, detail.tipShare * contact));
  const rule = gaussRule(detail.order);
  const N = panels.length * rule.n;
  const n = pieces.orders.reduce((a, b) => a + b, 0);
  const cols = N + n;
  const t = new Float64Array(N);
  const w = new Float64Array(N);
  panels.forEach(([from, to], p) => {
    for (let j = 0; j < rule.n; j++) {
      t[p * rule.n + j] = 0.5 * (from + to) + 0.5 * (to - from) * rule.points[j];
      w[p * rule.n + j] = 0.5 * (to - from) * rule.weights[j];
    }
  });
  const interpolation = toPieces(pieces, t, n);
  const a = new Float64Array(N * cols);
  const near = new Float64Array(rule.n);
  for (let i = 0; i < N; i++) {
    const row = i * cols;
    panels.forEach(([from, to], p) => {
      const half = 0.5 * (to - from);
      const local = (t[i] - 0.5 * (from + to)) / half;
      const at = row + p * rule.n;
      if (Math.abs(local) > nearLimit) {
        for (let j = 0; j < rule.n; j++) a[at + j] = (-w[p * rule.n + j] * ln(Math.abs(t[i] - t[p * rule.n + j]))) / Math.PI;
        return;
      }
      logarithmWeights(rule, local, near);
      const shift = ln(half);
      for (let j = 0; j < rule.n; j++) a[at + j] = (-half * (near[j] + shift * rule.weights[j])) / Math.PI;
    });
    a[row + i] += contact;
    for (let k = 0; k < n; k++) a[row + N + k] = interpolation[i * n + k];
  }
  solveAugmented(a, N, cols);
  const densities = new Float64Array(N * n);
  for (let i = 0; i < N; i++) for (let k = 0; k < n; k++) densities[i * n + k] = w[i] * a[i * cols + N + k];
  return matmulLeftTransposed(interpolation, densities, n, N, n);
}

/** Halves the pieces until a panel is no longer than its distance to the ends, or than `tip` where it touches one. */
function gradedPanels(breaks: readonly number[], tip: number): [number, number][] {
  const panels: [number, number][] = [];
  const visit = (from: number, to: number): void => {
    const distance = Math.min(1 + from, 1 - to);
    if (to - from > Math.max(tip, distance)) {
      const middle = 0.5 * (from + to);
      visit(from, middle);
      visit(middle, to);
    } else panels.push([from, to]);
  };
  for (let k = 0; k + 1 < breaks.length; k++) visit(breaks[k], breaks[k + 1]);
  return panels;
}

/** Values at t of the polynomials of the pieces, t.length x n, row-major. */
function toPieces({ breaks, orders }: ElectrodePieces, t: Float64Array, n: number): Float64Array {
  const matrix = new Float64Array(t.length * n);
  let piece = 0;
  let offset = 0;
  for (let i = 0; i < t.length; i++) {
    while (t[i] > breaks[piece + 1]) offset += orders[piece++];
    const from = breaks[piece];
    const to = breaks[piece + 1];
    const rule = gaussRule(orders[piece]);
    interpolationWeights(rule, (2 * t[i] - from - to) / (to - from), matrix.subarray(i * n + offset, i * n + offset + rule.n));
  }
  return matrix;
}
