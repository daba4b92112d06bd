import { concentricEigenvalue } from '../../solvers/problems/electrical-impedance/continuum';

/**
 * Relative Neumann-to-Dirichlet map of a concentric disc (radius rho, conductivity s in 1), in the orthonormal harmonics of orders 1 ... N:
 * exact, from the closed form of the eigenvalues. 2N x 2N.
 */
export function concentricMap(rho: number, s: number, N: number): Float64Array {
  const map = new Float64Array(4 * N * N);
  for (let a = 0; a < 2 * N; a++) {
    const n = Math.floor(a / 2) + 1;
    map[a * 2 * N + a] = concentricEigenvalue(rho, s, 1, n) - 1 / n;
  }
  return map;
}

/**
 * First-order exponential matrix of a disc of radius rho at (x, y) with the relative change a, T_mn = 2 m n a times the integral of
 * conj(z)^(m-1) z^(n-1) over it, by the binomial theorem: sum_j C(m-1, j) C(n-1, j) conj(c)^(m-1-j) c^(n-1-j) pi rho^(2j+2) / (j+1).
 */
export function firstOrderDisc(rho: number, x: number, y: number, a: number, N: number): Float64Array {
  const out = new Float64Array(2 * N * N);
  const r = Math.hypot(x, y);
  const angle = Math.atan2(y, x);
  const choose = (n: number, k: number): number => (k === 0 ? 1 : (choose(n - 1, k - 1) * n) / k);
  for (let m = 1; m <= N; m++)
    for (let n = 1; n <= N; n++) {
      let size = 0;
      for (let j = 0; j < Math.min(m, n); j++) size += (choose(m - 1, j) * choose(n - 1, j) * r ** (m + n - 2 - 2 * j) * Math.PI * rho ** (2 * j + 2)) / (j + 1);
      out[(m - 1) * N + n - 1] = 2 * m * n * a * size * Math.cos((n - m) * angle);
      out[N * N + (m - 1) * N + n - 1] = 2 * m * n * a * size * Math.sin((n - m) * angle);
    }
  return out;
}
