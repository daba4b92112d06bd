import { cos, sin } from '../../core/math';
import type { EquationFactory } from './equation';

/** phi(x) = 1 + cos(pi x / 3) for |x| < 3, else 0. */
const phi = (x: number): number => (Math.abs(x) < 3 ? 1 + cos((Math.PI * x) / 3) : 0);

export const phillips: EquationFactory = () => ({
  key: 'phillips',
  name: 'Phillips 1962',
  line: 'a bump seen through a window of its own form',
  from: -6,
  to: 6,
  dataFrom: -6,
  dataTo: 6,
  kernel: (s, t) => phi(s - t),
  breaks: (s) => [s - 3, s + 3, -3, 3],
  solution: phi,
  data(s) {
    const a = Math.abs(s);
    return (6 - a) * (1 + 0.5 * cos((Math.PI * a) / 3)) + (9 / (2 * Math.PI)) * sin((Math.PI * a) / 3);
  },
  kernelFormula: 'K(s,t) = \\varphi(s - t), \\quad \\varphi(x) = 1 + \\cos\\tfrac{\\pi x}{3} \\text{ for } |x| < 3, \\text{ else } 0',
  solutionFormula: 'f(t) = \\varphi(t)',
  dataFormula: 'g(s) = (6 - |s|)\\left(1 + \\tfrac12 \\cos\\tfrac{\\pi s}{3}\\right) + \\tfrac{9}{2\\pi} \\sin\\tfrac{\\pi |s|}{3}',
  sources: [{
    short: 'Phillips 1962',
    full: 'D. L. Phillips, A technique for the numerical solution of certain integral equations of the first kind, Journal of the ACM 9 (1962) 84-97.',
    fromMemory: true,
  }],
});
