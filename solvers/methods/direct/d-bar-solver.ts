import { cos, sin } from '../../core/math';
import { dBarEquation } from './d-bar-equation';
import { radialNodes } from './polar-grid';
import { ringInterpolation, type Ring } from './ring-interpolation';

/** Solves the d-bar equation of the truncated scattering transform for one truncation radius. */
export interface DBarSolver {
  /** Points z at which the equation is solved. */
  readonly solves: number;
  /**
   * The real part of mu(z, 0)^2 at the points given to `dBarSolver`.
   * @param exponentials T, 2 x N x N, as `exponentialMatrix` gives it
   * @returns values, one a point; the most steps of the iteration that a point took; whether every point converged
   */
  solve(exponentials: Float64Array, N: number): { values: Float64Array; iterations: number; converged: boolean };
}

/**
 * d-bar_k mu(z, k) = t(k) e_{-z}(k) conj mu(z, k) / (4 pi conj k) in |k| < R, e_{-z}(k) = exp(-i (k z + conj(k z))), one equation for
 * each z (`d-bar-equation.ts`); t(k) = sum over m, n of (i conj k)^m (i k)^n T_mn / (m! n!). t(k) / conj k is a polynomial, so the
 * coefficient is smooth.
 * K. Knudsen, M. Lassas, J. L. Mueller, S. Siltanen, Regularized D-bar method for the inverse conductivity problem, Inverse Problems
 * and Imaging 3 (2009) 599-624 (from memory; the discretisation is this library's own).
 *
 * z runs over rings of the unit disc, with fewer angles towards the centre; the values between are the interpolating polynomial's.
 * @param points x, y per point of the unit disc
 * @param R truncation radius, over one body radius, at most 12
 */
export function dBarSolver(points: Float64Array, R: number): DBarSolver {
  const equation = dBarEquation(R);
  const { angles, radii: n, kr, ki } = equation;
  const size = kr.length;
  const rings = zRings(R, angles);
  const solves = rings.reduce((sum, { count }) => sum + count, 0);
  const interpolation = ringInterpolation(points, rings);
  // e_{-z} for z = r > 0; turning z by a step of the angles turns k with it.
  const phaseRe = rings.map(({ radius }) => Float64Array.from(kr, (value) => cos(2 * radius * value)));
  const phaseIm = rings.map(({ radius }) => Float64Array.from(kr, (value) => -sin(2 * radius * value)));
  const qr = new Float64Array(size);
  const qi = new Float64Array(size);
  return {
    solves,
    solve(exponentials, N) {
      const potential = scatteringOver(exponentials, N, kr, ki);
      const values = new Float64Array(solves);
      let iterations = 0;
      let converged = true;
      let at = 0;
      for (let ring = 0; ring < rings.length; ring++) {
        const step = angles / rings[ring].count;
        const pr = phaseRe[ring];
        const pi = phaseIm[ring];
        for (let j = 0; j < rings[ring].count; j++) {
          let from = j * step * n;
          for (let a = 0; a < size; a++, from++) {
            if (from === size) from = 0;
            qr[a] = potential.re[a] * pr[from] - potential.im[a] * pi[from];
            qi[a] = potential.re[a] * pi[from] + potential.im[a] * pr[from];
          }
          const solution = equation.solve(qr, qi);
          values[at++] = solution.re * solution.re - solution.im * solution.im - 1;
          iterations = Math.max(iterations, solution.iterations);
          converged = converged && solution.converged;
        }
      }
      // The change is what is interpolated, so that none stays none to the last bit.
      return { values: interpolation(values).map((change) => 1 + change), iterations, converged };
    },
  };
}

/** t(k) / (4 pi conj k) at points k. */
function scatteringOver(exponentials: Float64Array, N: number, kr: Float64Array, ki: Float64Array): { re: Float64Array; im: Float64Array } {
  const re = new Float64Array(kr.length);
  const im = new Float64Array(kr.length);
  for (let a = 0; a < kr.length; a++) {
    const x = kr[a];
    const y = ki[a];
    let sumRe = 0;
    let sumIm = 0;
    for (let m = N; m >= 1; m--) {
      // sum over n of (i k)^n T_mn / n!, i k = (-y, x), by Horner's rule.
      let innerRe = 0;
      let innerIm = 0;
      for (let n = N; n >= 1; n--) {
        const hr = innerRe + exponentials[(m - 1) * N + n - 1];
        const hi = innerIm + exponentials[N * N + (m - 1) * N + n - 1];
        innerRe = (-y * hr - x * hi) / n;
        innerIm = (-y * hi + x * hr) / n;
      }
      // sum over m of (i conj k)^{m - 1} inner_m / m!, i conj k = (y, x), the same way.
      const hr = sumRe + innerRe;
      const hi = sumIm + innerIm;
      sumRe = m > 1 ? (y * hr - x * hi) / m : hr;
      sumIm = m > 1 ? (y * hi + x * hr) / m : hi;
    }
    re[a] = -sumIm / (4 * Math.PI);
    im[a] = sumRe / (4 * Math.PI);
  }
  return { re, im };
}

/** Rings of points z: radial nodes of the disc, on each a power of two of angles for the modes up to 2 R r + 4 that reach it. */
function zRings(R: number, angles: number): Ring[] {
  return Array.from(radialNodes(5 + Math.ceil(R)), (radius) => {
    let count = 8;
    while (count < angles && count < 2 * (2 * R * radius + 4)) count *= 2;
    return { radius, count };
  });
}
