import type { EquationFactory } from './equation';

/** Green's function of the second derivative with zero ends; its eigenvalues are -1 / (k pi)^2. */
export const secondDerivative: EquationFactory = () => ({
  key: 'second-derivative',
  name: 'Second derivative',
  line: 'the second derivative of a function with zero ends',
  from: 0,
  to: 1,
  dataFrom: 0,
  dataTo: 1,
  kernel: (s, t) => (s < t ? s * (t - 1) : t * (s - 1)),
  breaks: (s) => [s],
  solution: (t) => t,
  data: (s) => (s * s * s - s) / 6,
  kernelFormula: 'K(s,t) = s(t - 1) \\text{ for } s < t, \\quad t(s - 1) \\text{ for } s \\ge t',
  solutionFormula: 'f(t) = t',
  dataFormula: 'g(s) = \\tfrac16 (s^3 - s)',
  sources: [{
    short: 'Delves and Mohamed 1985',
    full: 'L. M. Delves, J. L. Mohamed, Computational Methods for Integral Equations, Cambridge University Press, 1985.',
    fromMemory: true,
  }],
});
