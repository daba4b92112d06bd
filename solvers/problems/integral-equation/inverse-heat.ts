import { erf, exp } from '../../core/math';
import type { EquationFactory } from './equation';

export const defaultDiffusivity = 1;
const rootPi = 1.7724538509055159;

/** Corners of the solution: time and temperature. */
const corners = [[0.1, 0], [0.25, 1], [0.35, 0.4], [0.6, 0]] as const;

function solution(t: number): number {
  for (let i = 1; i < corners.length; i++) {
    const [t0, f0] = corners[i - 1];
    const [t1, f1] = corners[i];
    if (t >= t0 && t < t1) return f0 + ((f1 - f0) * (t - t0)) / (t1 - t0);
  }
  return 0;
}

/** Temperature inside at time s for a surface temperature t (from 0 on). */
function ramp(s: number, kappa: number): number {
  if (s <= 0) return 0;
  const a = 1 / (2 * kappa * Math.sqrt(s));
  return s * ((1 + 2 * a * a) * (1 - erf(a)) - (2 * a * exp(-a * a)) / rootPi);
}

/**
 * Surface temperature of a half-space from the temperature inside (Volterra, a convolution in time). Carasso's kernel; the solution
 * is this registry's own, linear between corners, so that its data are sums of the half-space's answer to a ramp.
 */
export const inverseHeat: EquationFactory = ({ diffusivity: kappa = defaultDiffusivity }) => {
  const peak = 1 / (6 * kappa * kappa);
  const slopes = corners.slice(1).map(([t1, f1], i) => (f1 - corners[i][1]) / (t1 - corners[i][0]));
  return {
    key: 'inverse-heat',
    name: 'Inverse heat equation',
    line: 'temperature at the surface from the temperature inside',
    from: 0,
    to: 1,
    dataFrom: 0,
    dataTo: 1,
    kernel(s, t) {
      const d = s - t;
      return d > 0 ? exp(-1 / (4 * kappa * kappa * d)) / (2 * kappa * rootPi * d * Math.sqrt(d)) : 0;
    },
    // The kernel rises from 0 at t = s to its largest value at s - t = 1 / (6 kappa^2).
    breaks: (s) => [s - 16 * peak, s - 8 * peak, s - 4 * peak, s - 2 * peak, s - peak, s - peak / 2, s - peak / 4, s - peak / 8, s, ...corners.map(([t]) => t)],
    solution,
    data(s) {
      let sum = 0;
      let before = 0;
      for (let i = 0; i < corners.length; i++) {
        const after = i < slopes.length ? slopes[i] : 0;
        sum += (after - before) * ramp(s - corners[i][0], kappa);
        before = after;
      }
      return sum;
    },
    kernelFormula: 'K(s,t) = \\frac{(s - t)^{-3/2}}{2\\kappa\\sqrt{\\pi}} \\exp\\!\\left(-\\frac{1}{4\\kappa^2 (s - t)}\\right) \\text{ for } t < s, \\text{ else } 0',
    solutionFormula: 'f \\text{ linear between } f(0.1) = 0,\\; f(0.25) = 1,\\; f(0.35) = 0.4,\\; f(0.6) = 0; \\text{ else } 0',
    dataFormula: 'g(s) = \\sum_i c_i\\, r(s - t_i), \\quad r(s) = s\\left[(1 + 2a^2)\\operatorname{erfc} a - \\tfrac{2a}{\\sqrt\\pi} e^{-a^2}\\right], \\quad a = \\frac{1}{2\\kappa\\sqrt s}',
    sources: [
      { short: 'Carasso 1982', full: 'A. Carasso, Determining surface temperatures from interior observations, SIAM Journal on Applied Mathematics 42 (1982) 558-574 (the kernel).', fromMemory: true },
      { short: 'Carslaw and Jaeger 1959', full: 'H. S. Carslaw, J. C. Jaeger, Conduction of Heat in Solids, 2nd edition, Oxford University Press, 1959, section 2.5 (surface temperature that rises linearly).', fromMemory: true },
    ],
  };
};
