import { cos, exp, sin } from '../../core/math';
import { noBreaks, type EquationFactory } from './equation';

export const shaw: EquationFactory = () => ({
  key: 'shaw',
  name: 'Shaw 1972',
  line: 'light through a slit: intensity of the source from that behind the slit',
  from: -Math.PI / 2,
  to: Math.PI / 2,
  dataFrom: -Math.PI / 2,
  dataTo: Math.PI / 2,
  kernel(s, t) {
    const u = Math.PI * (sin(s) + sin(t));
    const sinc = u === 0 ? 1 : sin(u) / u;
    const c = cos(s) + cos(t);
    return c * c * sinc * sinc;
  },
  breaks: noBreaks,
  solution: (t) => 2 * exp(-6 * (t - 0.8) * (t - 0.8)) + exp(-2 * (t + 0.5) * (t + 0.5)),
  kernelFormula: 'K(s,t) = (\\cos s + \\cos t)^2 \\left(\\frac{\\sin u}{u}\\right)^2, \\quad u = \\pi(\\sin s + \\sin t)',
  solutionFormula: 'f(t) = 2\\,e^{-6(t - 0.8)^2} + e^{-2(t + 0.5)^2}',
  dataFormula: null,
  sources: [{
    short: 'Shaw 1972',
    full: 'C. B. Shaw, Improvement of the resolution of an instrument by numerical solution of an integral equation, Journal of Mathematical Analysis and Applications 37 (1972) 83-112.',
    fromMemory: true,
  }],
});
