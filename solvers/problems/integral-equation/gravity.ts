import { sin } from '../../core/math';
import { noBreaks, type EquationFactory } from './equation';

export const defaultDepth = 0.25;

export const gravity: EquationFactory = ({ depth = defaultDepth }) => ({
  key: 'gravity',
  name: 'Gravity surveying',
  line: 'mass along a buried line from the vertical pull at the surface',
  from: 0,
  to: 1,
  dataFrom: 0,
  dataTo: 1,
  kernel(s, t) {
    const q = depth * depth + (s - t) * (s - t);
    return depth / (q * Math.sqrt(q));
  },
  // The kernel is a peak of width `depth`: panels within it are fine enough for depths of a few panels.
  breaks: (s) => (depth < 0.1 ? [s - depth, s, s + depth] : noBreaks()),
  solution: (t) => sin(Math.PI * t) + 0.5 * sin(2 * Math.PI * t),
  kernelFormula: 'K(s,t) = d\\,\\left(d^2 + (s - t)^2\\right)^{-3/2}',
  solutionFormula: 'f(t) = \\sin \\pi t + \\tfrac12 \\sin 2\\pi t',
  dataFormula: null,
  sources: [{
    short: 'Wing and Zahrt 1991',
    full: 'G. M. Wing, J. D. Zahrt, A Primer on Integral Equations of the First Kind, SIAM, Philadelphia, 1991.',
    fromMemory: true,
  }],
});
