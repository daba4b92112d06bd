import type { Body } from '../../shared/domain/body';
import type { EvaluationGrid, GridExtent } from './types';

/**
 * The evaluation grid of a disc: n x n equal pixels over the square that encloses it; the mask holds the pixels whose centre
 * lies inside.
 * @param radius of the body, m
 * @param n pixels a side
 * @throws RangeError when the radius is not positive or n is not a positive whole number
 */
export function createEvaluationGrid(radius: number, n = 64): EvaluationGrid {
  if (!(radius > 0 && radius < Infinity)) throw new RangeError(`The radius of the body must be positive, not ${radius} m.`);
  return evaluationGrid({ nx: n, ny: n, xMin: -radius, xMax: radius, yMin: -radius, yMax: radius, body: { kind: 'disc', radius } });
}

/**
 * The grid of any body: the mask holds the pixels whose centre lies inside.
 * @throws RangeError when the extent is empty or the counts are not whole numbers from 1 to 4096
 */
export function evaluationGrid({ nx, ny, xMin, xMax, yMin, yMax, body }: GridExtent): EvaluationGrid {
  for (const n of [nx, ny]) if (!(Number.isInteger(n) && n > 0 && n <= 4096)) throw new RangeError(`The grid must have 1 to 4096 pixels a side, not ${n}.`);
  if (!(xMax > xMin && yMax > yMin && xMax - xMin < Infinity && yMax - yMin < Infinity)) throw new RangeError(`The extent of the grid is empty: x from ${xMin} to ${xMax}, y from ${yMin} to ${yMax}.`);
  const contains = bodyContains(body);
  // Half the smaller side as the unit, so that bodies of one form have one mask whatever their size.
  const a = (xMax - xMin) / 2;
  const b = (yMax - yMin) / 2;
  const mask = new Uint8Array(nx * ny);
  const inside: number[] = [];
  for (let i = 0; i < ny; i++) {
    const y = ((2 * i + 1 - ny) / ny) * b;
    for (let j = 0; j < nx; j++) {
      const x = ((2 * j + 1 - nx) / nx) * a;
      if (contains(x, y)) {
        mask[i * nx + j] = 1;
        inside.push(i * nx + j);
      }
    }
  }
  const bodyRadius = body.kind === 'interval' ? a : Math.max(a, b);
  return { nx, ny, xMin, xMax, yMin, yMax, body, mask, inside: Int32Array.from(inside), bodyRadius };
}

/** Whether a point, in metres from the middle of the grid, lies inside the body. */
export function bodyContains(body: Body): (x: number, y: number) => boolean {
  switch (body.kind) {
    case 'disc': {
      const { radius } = body;
      return (x, y) => (x / radius) * (x / radius) + (y / radius) * (y / radius) < 1;
    }
    case 'star':
      return (x, y) => {
        const r = Math.sqrt(x * x + y * y);
        return r === 0 || r < starRadius(body, x / r, y / r);
      };
    case 'rectangle':
      return (x, y) => 2 * Math.abs(x) <= body.width && 2 * Math.abs(y) <= body.height;
    case 'interval':
      return () => true;
  }
}

/** r(theta) of a star-shaped body, m, from the cosine and sine of theta (by the recurrence of multiple angles). */
export function starRadius(body: { readonly radius: number; readonly cosine: readonly number[]; readonly sine: readonly number[] }, c: number, s: number): number {
  let sum = 1;
  let ck = 1;
  let sk = 0;
  const order = Math.max(body.cosine.length, body.sine.length);
  for (let k = 0; k < order; k++) {
    const next = ck * c - sk * s;
    sk = sk * c + ck * s;
    ck = next;
    sum += (body.cosine[k] ?? 0) * ck + (body.sine[k] ?? 0) * sk;
  }
  return body.radius * sum;
}
