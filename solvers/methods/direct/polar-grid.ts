import { gaussLegendre } from '../../core/gauss-legendre';

/**
 * Radial nodes for functions f(s) e^{ip phi} of the unit disc that are smooth at the origin, so that f has the parity of p: the
 * positive half of a Gauss-Legendre rule of 2n points on [-1, 1], ascending.
 */
export function radialNodes(n: number): Float64Array {
  return gaussLegendre(2 * n).nodes.slice(n);
}

/** Values at s of the n polynomials of the parity (degree below 2n) that are 1 at one node and 0 at the others. */
export function parityCardinals(nodes: Float64Array, odd: boolean, s: number, out: Float64Array): void {
  const n = nodes.length;
  for (let j = 0; j < n; j++) {
    let value = odd ? s / nodes[j] : 1;
    for (let i = 0; i < n; i++) if (i !== j) value *= ((s - nodes[i]) * (s + nodes[i])) / ((nodes[j] - nodes[i]) * (nodes[j] + nodes[i]));
    out[j] = value;
  }
}
