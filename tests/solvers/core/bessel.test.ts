import { describe, expect, it } from 'vitest';
import { besselJ } from '../../../solvers/core/bessel';
import { gaussLegendre } from '../../../solvers/core/gauss-legendre';

/** scipy.special.jv (1.17.1), order, argument, value. */
const values: [number, number, number][] = [
  [0, 0.5, 0.938469807240813],
  [0, 2.404825557695773, 0.0],
  [1, 3.5, 0.13737752736232714],
  [2, 10.0, 0.2546303136851206],
  [5, 1.0, 0.00024975773021123466],
  [10, 12.0, 0.3004760352712692],
  [16, 8.0, 7.800639546730827e-05],
  [3, 40.0, -0.12614481550582082],
  [0, 100.0, 0.01998585030422312],
  [20, 0.1, 3.919437720858608e-45],
  [7, 0.001, 1.5500991579086105e-27],
  [12, 500.0, -0.0352604703966163],
];

describe('besselJ', () => {
  it.each(values)('J_%d(%d)', (n, x, value) => {
    const out = new Float64Array(n + 3);
    besselJ(n + 2, x, out);
    // Absolute rounding of the normalising sum.
    expect(Math.abs(out[n] - value)).toBeLessThan(2e-15);
  });
  it('has J_0 = 1 at 0, the rest 0', () => {
    const out = new Float64Array(4);
    besselJ(3, 0, out);
    expect([...out]).toEqual([1, 0, 0, 0]);
  });
  it('refuses arguments out of range', () => {
    for (const x of [-1, 1001, NaN]) expect(() => besselJ(2, x, new Float64Array(3))).toThrow(RangeError);
  });
});

describe('gaussLegendre', () => {
  it('has the published rule of five points', () => {
    // Abramowitz and Stegun 1964, table 25.4.
    const { nodes, weights } = gaussLegendre(5);
    [0, 0.538469310105683, 0.906179845938664].forEach((x, i) => expect(Math.abs(nodes[2 + i] - x)).toBeLessThan(1e-15));
    [0.568888888888889, 0.478628670499366, 0.236926885056189].forEach((w, i) => expect(Math.abs(weights[2 + i] - w)).toBeLessThan(1e-15));
  });
  it.each([1, 2, 7, 48, 200])('of %d points is exact up to degree 2n - 1', (n) => {
    const { nodes, weights } = gaussLegendre(n);
    for (const degree of [0, Math.min(2 * n - 2, 30), 2 * n - 1]) {
      let sum = 0;
      for (let i = 0; i < n; i++) sum += weights[i] * nodes[i] ** degree;
      expect(Math.abs(sum - (degree % 2 === 1 ? 0 : 2 / (degree + 1)))).toBeLessThan(1e-13);
    }
  });
  it('refuses a number of points that is none', () => {
    for (const n of [0, 2.5, 513, NaN]) expect(() => gaussLegendre(n)).toThrow(RangeError);
  });
});
