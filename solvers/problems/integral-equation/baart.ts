import { cos, exp, sin, sinh } from '../../core/math';
import { noBreaks, type EquationFactory } from './equation';

export const baart: EquationFactory = () => ({
  key: 'baart',
  name: 'Baart 1982',
  line: 'an analytic kernel: severely ill-posed',
  from: 0,
  to: Math.PI,
  dataFrom: 0,
  dataTo: Math.PI / 2,
  kernel: (s, t) => exp(s * cos(t)),
  breaks: noBreaks,
  solution: sin,
  data: (s) => (s === 0 ? 2 : (2 * sinh(s)) / s),
  kernelFormula: 'K(s,t) = e^{s \\cos t}, \\quad 0 \\le s \\le \\tfrac{\\pi}{2},\\; 0 \\le t \\le \\pi',
  solutionFormula: 'f(t) = \\sin t',
  dataFormula: 'g(s) = \\frac{2 \\sinh s}{s}',
  sources: [{
    short: 'Baart 1982',
    full: 'M. L. Baart, The use of auto-correlation for pseudo-rank determination in noisy ill-conditioned linear least-squares problems, IMA Journal of Numerical Analysis 2 (1982) 241-247.',
    fromMemory: true,
  }],
});
