import { sin } from '../core/math';
import { thinSvd } from '../linear-algebra/thin-svd';
import { getMethod } from '../methods/registry';
import { digestOf, largestGap, type VerificationCheck } from './check';
import { matrixProblem } from './matrix-problem';

const order = 60;

const secondDifferences: VerificationCheck = {
  key: 'singular-values-closed-form',
  group: 'Methods',
  name: 'Singular values, second differences',
  line: `largest of ${order}, matrix (-1, 2, -1); the gap is over all`,
  published: '3.997348',
  unit: '',
  bound: 1e-13,
  reason: 'A backward-stable decomposition is off by a modest multiple of the rounding unit times the largest singular value (Weyl).',
  source: { short: 'closed form', full: '4 sin²(kπ / (2(n + 1))), k = 1 .. n: eigenvalues of the second-difference matrix with fixed ends, n = 60. Textbook result.', fromMemory: true },
  cost: 'light',
  run() {
    const values = new Float64Array(order * order);
    for (let i = 0; i < order; i++) {
      values[i * order + i] = 2;
      if (i > 0) values[i * order + i - 1] = -1;
      if (i < order - 1) values[i * order + i + 1] = -1;
    }
    const { s } = thinSvd(values, order, order);
    const exact = Float64Array.from({ length: order }, (_, i) => {
      const half = sin(((order - i) * Math.PI) / (2 * (order + 1)));
      return 4 * half * half;
    });
    return { measured: s[0], gap: largestGap(s, exact), digest: digestOf(s) };
  },
};

const low = 8;
const high = 12;
const lambda = 0.4;

const step: VerificationCheck = {
  key: 'total-variation-step',
  group: 'Methods',
  name: 'Total variation of a step',
  line: 'a step of height 1 after 8 of 20 values, lambda = 0.4: height of what is left',
  published: '0.916667',
  unit: '',
  bound: 1e-2,
  reason: 'The primal-dual iteration ends when a step changes the image by less than 2e-5 of it; it converges slowly, so that some hundred such steps may be missing.',
  source: {
    short: 'Strong and Chan 2003',
    full: 'D. Strong, T. Chan, Edge-preserving and scale-dependent properties of total variation regularization, Inverse Problems 19 (2003) S165-S187: min ½|h - y|² + lambda TV(h) for a step between two plateaus of 8 and 12 values that end at the rim has the step shrunk by lambda (1/8 + 1/12).',
    fromMemory: true,
  },
  cost: 'light',
  run() {
    const n = low + high;
    const values = new Float64Array(n * n);
    for (let i = 0; i < n; i++) values[i * n + i] = 1;
    const problem = matrixProblem(values, n);
    const data = Float64Array.from({ length: n }, (_, i) => (i < low ? 0 : 1));
    const { x } = getMethod('total-variation').prepare(problem, { largestIteration: 5000 }, { key: 'fixed', value: lambda }).reconstruct(data, { norm: 0, level: 0 });
    const change = x.map((v) => v - 1);
    const exact = data.map((v) => (v === 0 ? lambda / low : 1 - lambda / high));
    return { measured: change[n - 1] - change[0], gap: largestGap(change, exact), digest: digestOf(change) };
  },
};

export const closedFormChecks: readonly VerificationCheck[] = [secondDifferences, step];
