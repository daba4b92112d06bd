import { besselJ } from '../../core/bessel';
import { gaussLegendre } from '../../core/gauss-legendre';
import { atan2, cos, sin } from '../../core/math';

/** Harmonics beyond this one add less than rounding and noise leave within the radii that are used. */
const largestHarmonic = 16;

/** Independent real numbers of a Hermitian N x N matrix: the diagonal, then real and imaginary parts above it, row after row. */
export function hermitianCoefficients(matrix: Float64Array, N: number): Float64Array {
  const M = Math.min(N, largestHarmonic);
  const out = new Float64Array(M * M);
  for (let n = 0; n < M; n++) out[n] = matrix[n * N + n];
  let at = M;
  for (let m = 0; m < M; m++) {
    for (let n = m + 1; n < M; n++) {
      out[at++] = 0.5 * (matrix[m * N + n] + matrix[n * N + m]);
      out[at++] = 0.5 * (matrix[N * N + m * N + n] - matrix[N * N + n * N + m]);
    }
  }
  return out;
}

/**
 * Linear map from the coefficients of T to the relative change of conductivity at points of the unit disc,
 * h(x) = (2 pi)^{-2} integral over |k| < K of F(k) e^{-i Re(k x)}, F(k) = -(2 / |k|^2) t(k / 2),
 * t(k) = sum over m, n of (i conj k)^m (i k)^n T_mn / (m! n!): what `hermitianCoefficients` gives times row c is h at point c.
 * With x = r e^{i theta} the integral over the angle is closed:
 * h = sum T_mn e^{i (m - n) theta} c_mn(r), c_mn = -(-1)^{min(m,n)} / (pi m! n! 2^{m+n}) times the integral of
 * kappa^{m+n-1} J_{|m-n|}(kappa r) from 0 to K (Gauss-Legendre).
 * A. P. Calderon, On an inverse boundary value problem, Rio de Janeiro 1980 (from memory).
 * @param points x, y per point
 * @returns points x coefficients, row-major
 */
export function bornImage(points: Float64Array, N: number, K: number): Float64Array {
  const M = Math.min(N, largestHarmonic);
  const count = points.length / 2;
  // Within K r <= 60 the integrand is a polynomial of degree 2M times an oscillation of fewer than 10 periods.
  const { nodes, weights } = gaussLegendre(M + 8 + Math.ceil(K));
  const q = nodes.length;
  const J = new Float64Array(M + 1);
  const bessel = new Float64Array(q * M);
  const moments = new Float64Array(q * (2 * M + 1));
  const factorial = new Float64Array(M + 1).fill(1);
  for (let n = 1; n <= M; n++) factorial[n] = factorial[n - 1] * n * 2;
  for (let j = 0; j < q; j++) {
    const kappa = 0.5 * K * (nodes[j] + 1);
    moments[j * (2 * M + 1) + 1] = 0.5 * K * weights[j];
    for (let p = 2; p <= 2 * M; p++) moments[j * (2 * M + 1) + p] = moments[j * (2 * M + 1) + p - 1] * kappa;
  }
  const out = new Float64Array(count * M * M);
  for (let c = 0; c < count; c++) {
    const x = points[2 * c];
    const y = points[2 * c + 1];
    const r = Math.sqrt(x * x + y * y);
    const theta = atan2(y, x);
    for (let j = 0; j < q; j++) {
      besselJ(M, 0.5 * K * (nodes[j] + 1) * r, J);
      for (let p = 0; p < M; p++) bessel[j * M + p] = J[p];
    }
    const radial = (m: number, n: number): number => {
      let sum = 0;
      // moments: index p holds weight times kappa^{p - 1}.
      for (let j = 0; j < q; j++) sum += moments[j * (2 * M + 1) + m + n] * bessel[j * M + n - m];
      return ((m % 2 === 0 ? -1 : 1) * sum) / (Math.PI * factorial[m] * factorial[n]);
    };
    const row = c * M * M;
    for (let n = 1; n <= M; n++) out[row + n - 1] = radial(n, n);
    let at = row + M;
    for (let m = 1; m <= M; m++) {
      for (let n = m + 1; n <= M; n++) {
        const value = 2 * radial(m, n);
        out[at++] = value * cos((m - n) * theta);
        out[at++] = -value * sin((m - n) * theta);
      }
    }
  }
  return out;
}
