import type { EquationFactory } from './equation';

export const foxGoodwin: EquationFactory = () => ({
  key: 'fox-goodwin',
  name: 'Fox and Goodwin 1953',
  line: 'an early example, severely ill-posed',
  from: 0,
  to: 1,
  dataFrom: 0,
  dataTo: 1,
  kernel: (s, t) => Math.sqrt(s * s + t * t),
  // Nearly a corner at t = 0 where s is small.
  breaks: (s) => [s / 2, s, 2 * s, 4 * s],
  solution: (t) => t,
  data(s) {
    const q = 1 + s * s;
    return (q * Math.sqrt(q) - s * s * s) / 3;
  },
  kernelFormula: 'K(s,t) = (s^2 + t^2)^{1/2}',
  solutionFormula: 'f(t) = t',
  dataFormula: 'g(s) = \\tfrac13 \\left((1 + s^2)^{3/2} - s^3\\right)',
  sources: [{
    short: 'Fox and Goodwin 1953',
    full: 'L. Fox, E. T. Goodwin, The numerical solution of non-singular linear integral equations, Philosophical Transactions of the Royal Society A 245 (1953) 501-534.',
    fromMemory: true,
  }],
});
