import { cos, sin } from '../../core/math';
import { parityCardinals } from './polar-grid';

/** A ring of `count` equal angles from 0, a power of two. */
export interface Ring {
  readonly radius: number;
  readonly count: number;
}

/**
 * Interpolation from rings of the unit disc to points: the Fourier modes of each ring below half its count, and in the radius for each
 * mode the polynomial of its parity; rings too small for a mode count as zero there.
 * @param points x, y per point
 * @returns takes the values on the rings, ring after ring, to the values at the points
 */
export function ringInterpolation(points: Float64Array, rings: readonly Ring[]): (values: Float64Array) => Float64Array {
  const count = points.length / 2;
  const n = rings.length;
  const nodes = Float64Array.from(rings, ({ radius }) => radius);
  let modes = 1;
  for (const ring of rings) modes = Math.max(modes, ring.count / 2);
  const cardinals = new Float64Array(2 * n * count);
  const directions = new Float64Array(2 * count);
  for (let c = 0; c < count; c++) {
    const r = Math.sqrt(points[2 * c] * points[2 * c] + points[2 * c + 1] * points[2 * c + 1]);
    directions[2 * c] = r > 0 ? points[2 * c] / r : 1;
    directions[2 * c + 1] = r > 0 ? points[2 * c + 1] / r : 0;
    parityCardinals(nodes, false, r, cardinals.subarray(2 * n * c, 2 * n * c + n));
    parityCardinals(nodes, true, r, cardinals.subarray(2 * n * c + n, 2 * n * (c + 1)));
  }
  const tables = rings.map((ring) => ({
    c: Float64Array.from({ length: ring.count }, (_, j) => cos((2 * Math.PI * j) / ring.count)),
    s: Float64Array.from({ length: ring.count }, (_, j) => sin((2 * Math.PI * j) / ring.count)),
  }));
  return (values) => {
    const re = new Float64Array(modes * n);
    const im = new Float64Array(modes * n);
    let from = 0;
    for (let i = 0; i < n; i++) {
      const size = rings[i].count;
      const { c, s } = tables[i];
      for (let p = 0; p < size / 2; p++) {
        let x = 0;
        let y = 0;
        for (let j = 0; j < size; j++) {
          x += values[from + j] * c[(p * j) % size];
          y += values[from + j] * s[(p * j) % size];
        }
        re[p * n + i] = ((p === 0 ? 1 : 2) * x) / size;
        im[p * n + i] = ((p === 0 ? 1 : 2) * y) / size;
      }
      from += size;
    }
    const out = new Float64Array(count);
    for (let at = 0; at < count; at++) {
      const ux = directions[2 * at];
      const uy = directions[2 * at + 1];
      let cp = 1;
      let sp = 0;
      let sum = 0;
      for (let p = 0; p < modes; p++) {
        const row = 2 * n * at + (p % 2 === 1 ? n : 0);
        let x = 0;
        let y = 0;
        for (let i = 0; i < n; i++) {
          x += cardinals[row + i] * re[p * n + i];
          y += cardinals[row + i] * im[p * n + i];
        }
        sum += cp * x + sp * y;
        const next = cp * ux - sp * uy;
        sp = cp * uy + sp * ux;
        cp = next;
      }
      out[at] = sum;
    }
    return out;
  };
}
