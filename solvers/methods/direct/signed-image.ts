import { dot } from '../../core/vector';
import { matmul } from '../../linear-algebra/matrix-product';
import type { ElectrodeData } from './electrode-data';

/** Largest change of conductivity that a fit may give an indicator, in backgrounds: a few cells can ask for anything. */
const largestChange = 19;

/**
 * Conductivity of two indicator images, of more and of less conductivity than the background: each times one number, the two that fit the
 * frame best in the model linearised at the background (least squares, the first at least 0, the second at most 0). Less conductivity is
 * put as more resistivity, which is the same to first order and stays positive: x_b (1 + a p) / (1 + |b| q).
 * @param more values from 0, one a cell; null for none
 * @returns x; the background where neither indicator has a value
 */
export function signedImage(data: ElectrodeData, change: Float64Array, more: Float64Array | null, less: Float64Array | null): Float64Array {
  const background = data.problem.background();
  const cells = background.length;
  const responses = [more, less].map((image) => image && matmul(data.jacobian, image.map((value, j) => value * background[j]), change.length, cells, 1));
  const [a, b] = signedFit(change, responses[0], responses[1]);
  return background.map((value, j) => (value * (1 + a * (more ? more[j] : 0))) / (1 - b * (less ? less[j] : 0)));
}

/** a >= 0 and b <= 0 that minimise |y - a p - b q|, each within the largest change. */
function signedFit(y: Float64Array, p: Float64Array | null, q: Float64Array | null): [number, number] {
  const pp = p ? dot(p, p) : 0;
  const qq = q ? dot(q, q) : 0;
  const py = p ? dot(p, y) : 0;
  const qy = q ? dot(q, y) : 0;
  const pq = p && q ? dot(p, q) : 0;
  let a = pp > 0 ? Math.max(0, py / pp) : 0;
  let b = qq > 0 ? Math.min(0, qy / qq) : 0;
  if (a > 0 && b < 0) {
    const determinant = pp * qq - pq * pq;
    const both = determinant > 1e-12 * pp * qq ? [(py * qq - qy * pq) / determinant, (qy * pp - py * pq) / determinant] : [0, 0];
    if (both[0] > 0 && both[1] < 0) [a, b] = both;
    // The best lies on an edge: keep the sign that explains more.
    else if (py * py * qq >= qy * qy * pp) b = 0;
    else a = 0;
  }
  return [Math.min(a, largestChange), Math.max(b, -largestChange)];
}
