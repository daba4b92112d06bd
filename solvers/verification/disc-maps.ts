import { cos, sin } from '../core/math';
import { semidefiniteFactors, type SemidefiniteFactors } from '../methods/direct/semidefinite-factors';
import { concentricEigenvalue } from '../problems/electrical-impedance/continuum';

/**
 * Relative Neumann-to-Dirichlet map of a concentric disc (radius rho, conductivity s in 1), in the orthonormal harmonics cos, sin of
 * orders 1 ... N: exact, from the closed form of the eigenvalues. 2N x 2N.
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
 * First-order exponential matrix (`exponentialMatrix`) of a disc of radius rho at distance r and angle alpha with the relative change a:
 * T_mn = 2 m n a times the integral of conj(z)^(m-1) z^(n-1) over it, by the binomial theorem
 * sum_j C(m-1, j) C(n-1, j) conj(c)^(m-1-j) c^(n-1-j) pi rho^(2j+2) / (j+1), c = r e^{i alpha}.
 */
export function firstOrderDisc(rho: number, r: number, alpha: number, a: number, N: number): Float64Array {
  const out = new Float64Array(2 * N * N);
  const choose = (n: number, k: number): number => (k === 0 ? 1 : (choose(n - 1, k - 1) * n) / k);
  const powers = (base: number): number[] => {
    const list = [1];
    for (let k = 0; k < 2 * N; k++) list.push(list[k] * base);
    return list;
  };
  const ofR = powers(r);
  const ofRho = powers(rho);
  for (let m = 1; m <= N; m++) {
    for (let n = 1; n <= N; n++) {
      let size = 0;
      for (let j = 0; j < Math.min(m, n); j++) size += (choose(m - 1, j) * choose(n - 1, j) * ofR[m + n - 2 - 2 * j] * Math.PI * ofRho[2 * j + 2]) / (j + 1);
      out[(m - 1) * N + n - 1] = 2 * m * n * a * size * cos((n - m) * alpha);
      out[N * N + (m - 1) * N + n - 1] = 2 * m * n * a * size * sin((n - m) * alpha);
    }
  }
  return out;
}

/** Dipole functions of points (distance, angle) in the continuum: sum over n of r^(n-1) cos n(theta - alpha) and of the sine, n = 1 ... N. */
export function dipoleFunctions(places: readonly (readonly [number, number])[], N: number): SemidefiniteFactors {
  const size = 2 * N;
  return semidefiniteFactors(places.length, size, (c, matrix) => {
    const [r, alpha] = places[c];
    let row = 1;
    for (let a = 0; a < size; a++) {
      if (a > 0 && a % 2 === 0) row *= r;
      let value = row;
      for (let b = 0; b < size; b++) {
        if (b > 0 && b % 2 === 0) value *= r;
        const angle = (Math.floor(a / 2) - Math.floor(b / 2)) * alpha;
        matrix[a * size + b] = value * (a % 2 === b % 2 ? cos(angle) : a % 2 === 0 ? -sin(angle) : sin(angle));
      }
    }
  });
}

/** Sensitivity matrices of concentric discs, r^(2n) / n on harmonic n; nothing is left out. */
export function concentricSensitivities(radii: readonly number[], N: number): SemidefiniteFactors {
  const size = 2 * N;
  return semidefiniteFactors(radii.length, size, (c, matrix) => {
    matrix.fill(0);
    let power = 1;
    for (let a = 0; a < size; a++) {
      if (a % 2 === 0) power *= radii[c] * radii[c];
      matrix[a * size + a] = power / (Math.floor(a / 2) + 1);
    }
  }, 0);
}
