import { gaussLegendre } from '../../core/gauss-legendre';
import { exp, ln } from '../../core/math';
import { parityCardinals } from './polar-grid';

/** Points of the rule for each radial integral. */
const integralPoints = 48;

/**
 * Radial matrices of the solid Cauchy transform on the unit disc, C f(k) = (1 / pi) integral of f(k') / (k - k') dk', the inverse of d-bar
 * that vanishes at infinity. It takes g(s) e^{ip phi} to h(s) e^{i(p - 1) phi} with
 * h(s) = -2 integral from s to 1 of (s / t)^{p - 1} g(t) dt for p >= 1, 2 integral from 0 to s of (t / s)^{1 - p} g(t) dt for p <= 0
 * (both follow from d-bar = e^{i phi} (d/ds + (i / s) d/dphi) / 2).
 * @param nodes radial nodes (`radialNodes`)
 * @param modes number M of angular modes, p = -M/2 ... M/2 - 1, index p < 0 at p + M
 * @returns matrices M x n x n: h at node i is sum_j matrix[p][i][j] g at node j; and `centre`: h(0) of p = 1, length n
 */
export function cauchyMatrices(nodes: Float64Array, modes: number): { matrices: Float64Array; centre: Float64Array } {
  const n = nodes.length;
  const matrices = new Float64Array(modes * n * n);
  const centre = new Float64Array(n);
  const rule = gaussLegendre(integralPoints);
  const cardinals = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const s = nodes[i];
    const outward = -ln(s);
    for (let q = 0; q < integralPoints; q++) {
      const u = 0.5 * (rule.nodes[q] + 1);
      // Outside: t = s e^{u ln(1 / s)}, so that a high power of s / t stays resolved; inside: t = s u.
      const tOut = s * exp(u * outward);
      const tIn = s * u;
      for (const odd of [false, true]) {
        parityCardinals(nodes, odd, tOut, cardinals);
        const ratio = s / tOut;
        let factor = -rule.weights[q] * outward * tOut;
        for (let p = 1; p < modes / 2; p++) {
          if ((p % 2 === 1) === odd) for (let j = 0; j < n; j++) matrices[(p * n + i) * n + j] += factor * cardinals[j];
          factor *= ratio;
        }
        parityCardinals(nodes, odd, tIn, cardinals);
        factor = rule.weights[q] * s * u;
        for (let p = 0; p >= -modes / 2; p--) {
          const row = p === 0 ? 0 : p + modes;
          if ((p % 2 !== 0) === odd) for (let j = 0; j < n; j++) matrices[(row * n + i) * n + j] += factor * cardinals[j];
          factor *= u;
        }
      }
    }
  }
  // At the centre only p = 1 gives a value: -2 times the integral of an odd polynomial over [0, 1].
  for (let q = 0; q < integralPoints; q++) {
    parityCardinals(nodes, true, 0.5 * (rule.nodes[q] + 1), cardinals);
    for (let j = 0; j < n; j++) centre[j] -= rule.weights[q] * cardinals[j];
  }
  return { matrices, centre };
}
