import { cos } from './math';

/**
 * Nodes (ascending) and weights of the Gauss-Legendre rule of n points on [-1, 1]: Newton's method on the Legendre polynomial from
 * cos(pi (i - 1/4) / (n + 1/2)). Exact for polynomials up to degree 2n - 1.
 * @throws RangeError unless n is a whole number from 1 to 512
 */
export function gaussLegendre(n: number): { nodes: Float64Array; weights: Float64Array } {
  if (!(Number.isInteger(n) && n >= 1 && n <= 512)) throw new RangeError(`A Gauss-Legendre rule has 1 to 512 points, not ${n}.`);
  const nodes = new Float64Array(n);
  const weights = new Float64Array(n);
  for (let i = 0; i < Math.ceil(n / 2); i++) {
    let x = cos((Math.PI * (i + 0.75)) / (n + 0.5));
    let slope = 1;
    for (let iteration = 0; iteration < 100; iteration++) {
      let p = 1;
      let before = 0;
      for (let k = 1; k <= n; k++) {
        const next = ((2 * k - 1) * x * p - (k - 1) * before) / k;
        before = p;
        p = next;
      }
      slope = (n * (x * p - before)) / (x * x - 1);
      const step = p / slope;
      x -= step;
      if (Math.abs(step) <= 1e-15) break;
    }
    if (2 * i + 1 === n) x = 0;
    nodes[n - 1 - i] = x;
    nodes[i] = -x;
    weights[i] = weights[n - 1 - i] = 2 / ((1 - x * x) * slope * slope);
  }
  return { nodes, weights };
}
