import { describe, expect, it } from 'vitest';
import { electrodeResponse } from '../../../../solvers/problems/electrical-impedance/boundary-integrals/electrode-response';
import { gaussRule, interpolationWeights, legendre, logarithmWeights } from '../../../../solvers/problems/electrical-impedance/boundary-integrals/legendre';

const dot = (a: Float64Array, b: ArrayLike<number>): number => a.reduce((sum, v, i) => sum + v * b[i], 0);

describe('Gauss-Legendre rule', () => {
  it('has the points and weights of the tables', () => {
    // Abramowitz and Stegun 1964, table 25.4, n = 8.
    const rule = gaussRule(8);
    [0.183434642495650, 0.525532409916329, 0.796666477413627, 0.960289856497536].forEach((x, k) => expect(rule.points[4 + k]).toBeCloseTo(x, 14));
    [0.362683783378362, 0.313706645877887, 0.222381034453374, 0.101228536290376].forEach((w, k) => expect(rule.weights[4 + k]).toBeCloseTo(w, 14));
    expect(rule.points[3]).toBe(-rule.points[4]);
  });

  it.each([8, 12, 32])('integrates and interpolates polynomials exactly: %i points', (n) => {
    const { points, weights } = gaussRule(n);
    for (const k of [0, 2, 2 * n - 2]) expect(dot(weights, points.map((x) => x ** k))).toBeCloseTo(2 / (k + 1), 13);
    const at = new Float64Array(n);
    interpolationWeights(gaussRule(n), 0.37, at);
    expect(dot(at, points.map((x) => x ** (n - 1) + 3 * x))).toBeCloseTo(0.37 ** (n - 1) + 1.11, 12);
  });
});

describe('product integration of the logarithm', () => {
  const n = 12;
  const rule = gaussRule(n);
  const weights = new Float64Array(n);

  it('has the closed forms at an end and in the middle', () => {
    // The Legendre series of ln(1 - s): integral of ln(1 - s) P_k(s) = -2 / (k (k + 1)); integral of ln|s| s^2k = -2 / (2k + 1)^2.
    const values = new Float64Array(n);
    for (let k = 1; k < n; k++) {
      const p = rule.points.map((s) => {
        legendre(s, n, values);
        return values[k];
      });
      logarithmWeights(rule, 1, weights);
      expect(dot(weights, p)).toBeCloseTo(-2 / (k * (k + 1)), 12);
      logarithmWeights(rule, -1, weights);
      expect(dot(weights, p)).toBeCloseTo((k % 2 ? 2 : -2) / (k * (k + 1)), 12);
    }
    logarithmWeights(rule, 0, weights);
    for (const k of [0, 1, 4]) expect(dot(weights, rule.points.map((s) => s ** (2 * k)))).toBeCloseTo(-2 / (2 * k + 1) ** 2, 13);
  });

  it.each([0.3, -0.9999, 1.0001, 1.04, 1.06, -1.3, 2, 2.99, 3.01, 7])('has the integral of ln|t - s| and of s ln|t - s| at t = %d', (t) => {
    logarithmWeights(rule, t, weights);
    const xlnx = (x: number, p: number): number => (x === 0 ? 0 : x ** p * Math.log(Math.abs(x)));
    const plain = xlnx(1 + t, 1) + xlnx(1 - t, 1) - 2;
    // By parts: ((1 - t^2) / 2) ln|(1 - t) / (1 + t)| - t.
    const linear = ((1 - t * t) / 2) * Math.log(Math.abs((1 - t) / (1 + t))) - t;
    expect(dot(weights, new Float64Array(n).fill(1))).toBeCloseTo(plain, 12);
    expect(dot(weights, rule.points)).toBeCloseTo(linear, 12);
  });
});

describe('answer of an electrode', () => {
  const whole = { breaks: [-1, 1], orders: [12] };
  const total = (matrix: Float64Array): number => matrix.reduce((sum, v) => sum + v, 0);

  it('tends to that of a perfect conductor as the contact improves', () => {
    // Density 1 / (ln 2 sqrt(1 - t^2)), total pi / ln 2: the logarithmic capacity of a segment is a quarter of its length (from memory).
    expect(total(electrodeResponse(whole, 1e-6))).toBeCloseTo(Math.PI / Math.log(2), 4);
    expect(Math.abs(total(electrodeResponse(whole, 1e-4)) - Math.PI / Math.log(2))).toBeGreaterThan(1e-3);
  });

  it('tends to that of the contact alone as the contact worsens', () => {
    // q = 1 / contact + O(contact^-2).
    expect(total(electrodeResponse(whole, 1e6)) * 1e6).toBeCloseTo(2, 5);
  });

  it.each([1e-6, 1e-3, 1])('is symmetric, and does not depend on the pieces or the grading: contact %d', (contact) => {
    const matrix = electrodeResponse(whole, contact);
    for (let i = 0; i < 12; i++) for (let j = 0; j < i; j++) expect(Math.abs(matrix[12 * i + j] - matrix[12 * j + i])).toBeLessThan(1e-10);
    const fine = electrodeResponse({ breaks: [-1, -0.5, 0.5, 1], orders: [8, 12, 8] }, contact, { order: 16, tipShare: 0.002, tipLargest: 0.001 });
    expect(Math.abs(total(fine) / total(matrix) - 1)).toBeLessThan(1e-8);
  });
});
