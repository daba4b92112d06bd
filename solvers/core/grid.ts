import type { EvaluationGrid } from './types';

/**
 * The evaluation grid of a disc: n x n equal pixels over the square that encloses it; the mask holds the pixels whose centre
 * lies inside.
 * @param radius of the body, m
 * @param n pixels a side
 * @throws RangeError when the radius is not positive or n is not a positive whole number
 */
export function createEvaluationGrid(radius: number, n = 64): EvaluationGrid {
  if (!(radius > 0 && radius < Infinity)) throw new RangeError(`The radius of the body must be positive, not ${radius} m.`);
  if (!(Number.isInteger(n) && n > 0 && n <= 4096)) throw new RangeError(`The grid must have 1 to 4096 pixels a side, not ${n}.`);
  const mask = new Uint8Array(n * n);
  const inside: number[] = [];
  for (let i = 0; i < n; i++) {
    const y = (2 * i + 1 - n) / n;
    for (let j = 0; j < n; j++) {
      const x = (2 * j + 1 - n) / n;
      if (x * x + y * y < 1) {
        mask[i * n + j] = 1;
        inside.push(i * n + j);
      }
    }
  }
  return { nx: n, ny: n, xMin: -radius, xMax: radius, yMin: -radius, yMax: radius, mask, inside: Int32Array.from(inside), bodyRadius: radius };
}
