import { ln } from '../core/math';
import { deriveKey, RandomStream } from '../core/random';
import type { ForwardProblem } from '../core/types';
import { norm2 } from '../core/vector';
import { judge, type Check } from './check';

/** Steps, as shares of the conductivity: halving from where the remainder is quadratic to well above rounding. */
const steps = [0.08, 0.04, 0.02, 0.01, 0.005];

/** Slope of the first-order Taylor remainder of the forward map around a varied conductivity. */
export const taylorCheck: Check<ForwardProblem> = {
  key: 'derivative',
  name: 'Derivative',
  unit: '',
  bound: 1.9,
  comparison: 'at-least',
  formula: '\\lVert F(\\sigma + h\\,\\delta) - F(\\sigma) - h\\,F\'(\\sigma)\\,\\delta\\rVert = O(h^2)',
  summary: 'The derivative is the derivative of the forward map: the Taylor remainder falls with the square of the step.',
  source: { short: 'common practice', full: 'Taylor remainder test: the remainder of a first-order expansion is of second order. Common practice, no source.' },
  evaluate(problem) {
    const random = new RandomStream(deriveKey('derivative check'));
    const x = problem.background();
    const direction = new Float64Array(x.length);
    for (let i = 0; i < x.length; i++) {
      // A background of zero has no scale: any will do.
      x[i] = (x[i] === 0 ? 1 : x[i]) * (0.8 + 0.4 * random.nextUniform());
      direction[i] = x[i] * (2 * random.nextUniform() - 1);
    }
    const data = problem.evaluate(x);
    const derivative = new Float64Array(data.length);
    problem.linearise(x).apply(direction, derivative);
    const remainders = steps.map((h) => {
      const moved = problem.evaluate(x.map((value, i) => value + h * direction[i]));
      return norm2(moved.map((value, i) => value - data[i] - h * derivative[i]));
    });
    // A linear map leaves rounding only: its remainder has no slope and is right as it is.
    if (remainders[0] <= 1e-12 * norm2(derivative)) return { ...judge(this, 2, 'The forward map is linear: the remainder is rounding.') };
    let smallest = Infinity;
    for (let k = 1; k < steps.length; k++) smallest = Math.min(smallest, ln(remainders[k - 1] / remainders[k]) / ln(steps[k - 1] / steps[k]));
    return judge(this, smallest, `Smallest slope over ${steps.length} steps from ${steps[0]} to ${steps[steps.length - 1]} of the conductivity.`);
  },
};
