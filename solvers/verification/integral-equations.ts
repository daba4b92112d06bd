import { equationOf } from '../problems/integral-equation/equations';
import { dataPoints, equationMatrix } from '../problems/integral-equation/inversion-problem';
import { fitPanels, integrate } from '../problems/integral-equation/quadrature';
import type { EquationKey } from '../../shared/domain/geometry/integral-equation';
import { thinSvd } from '../linear-algebra/thin-svd';
import { digestOf, largestEntry, largestGap, type VerificationCheck } from './check';

const points = 40;
const panels = 200;

/** A right-hand side by quadrature against its closed form; the value shown is the largest of the closed form. */
function rightHandSide(equation: EquationKey, published: string): VerificationCheck {
  const model = equationOf({ equation });
  return {
    key: `right-hand-side-${equation}`,
    group: 'Forward models',
    name: `Right-hand side, ${model.name}`,
    line: `largest of ${points} values by quadrature, published solution; the gap is over all`,
    published,
    unit: '',
    bound: 1e-12,
    reason: 'Eight Gauss-Legendre nodes a panel leave nothing but rounding on functions that are smooth between the ends of panels.',
    source: model.sources[0],
    cost: 'light',
    run() {
      const rule = fitPanels(model.solution, model.from, model.to, panels);
      const places = dataPoints(model, points);
      const data = places.map((s) => integrate(rule, (t) => model.kernel(s, t), model.breaks(s)));
      return { measured: data[largestEntry(data)], gap: largestGap(data, places.map((s) => model.data!(s))), digest: digestOf(data) };
    },
  };
}

const cells = 80;
const modes = 5;

const decay: VerificationCheck = {
  key: 'singular-values-second-derivative',
  group: 'Forward models',
  name: 'Singular values, second derivative',
  line: `largest of the matrix that inverts, ${cells} cells; the gap is over the first ${modes}`,
  published: '0.101321',
  unit: '',
  bound: 4e-3,
  reason: 'Boxes and points each weaken the k-th sine by (k pi / n)^2 / 24, which is 1.6e-3 for the fifth at n = 80.',
  source: {
    short: 'Courant and Hilbert 1953',
    full: "R. Courant, D. Hilbert, Methods of Mathematical Physics, volume I, Interscience, 1953, chapter V: eigenvalues 1 / (k pi)^2 of Green's function of the string with fixed ends.",
    fromMemory: true,
  },
  cost: 'light',
  run() {
    const { s } = thinSvd(equationMatrix(equationOf({ equation: 'second-derivative' }), cells, cells), cells, cells);
    let gap = 0;
    for (let k = 1; k <= modes; k++) gap = Math.max(gap, Math.abs(s[k - 1] * (k * Math.PI) * (k * Math.PI) - 1));
    return { measured: s[0], gap, digest: digestOf(s) };
  },
};

export const integralEquationChecks: readonly VerificationCheck[] = [
  rightHandSide('phillips', '8.963064'), rightHandSide('baart', '2.904239'), rightHandSide('fox-goodwin', '0.604308'), rightHandSide('inverse-heat', '0.141495'), decay,
];
