import { deriveKey, RandomStream } from '../core/random';
import type { ForwardProblem } from '../core/types';
import { dot, norm2 } from '../core/vector';
import { judge, type Check } from './check';

/** Pairs of vectors tried; the worst counts. */
const pairs = 5;

/** |<J x, y> - <x, J^T y>| over ||J x|| ||y|| for the derivative at the background. */
export const adjointCheck: Check<ForwardProblem> = {
  key: 'adjoint',
  name: 'Adjoint',
  unit: '',
  bound: 1e-10,
  comparison: 'at-most',
  formula: '|\\langle J x, y\\rangle - \\langle x, J^{\\mathsf T} y\\rangle| \\,/\\, (\\lVert J x\\rVert\\,\\lVert y\\rVert)',
  summary: 'The derivative and its adjoint belong together: the dot-product test with random vectors.',
  source: {
    short: 'Claerbout 1992',
    full: 'J. F. Claerbout, Earth Soundings Analysis: Processing versus Inversion, Blackwell, 1992, section 5.1.1 (dot-product test).',
    fromMemory: true,
  },
  evaluate(problem) {
    const operator = problem.linearise(problem.background());
    const random = new RandomStream(deriveKey('adjoint check'));
    const jx = new Float64Array(operator.rows);
    const jty = new Float64Array(operator.cols);
    let worst = 0;
    for (let pair = 0; pair < pairs; pair++) {
      const x = Float64Array.from({ length: operator.cols }, () => 2 * random.nextUniform() - 1);
      const y = Float64Array.from({ length: operator.rows }, () => 2 * random.nextUniform() - 1);
      operator.apply(x, jx);
      operator.applyAdjoint(y, jty);
      const figure = Math.abs(dot(jx, y) - dot(x, jty)) / (norm2(jx) * norm2(y));
      if (!(figure <= worst)) worst = figure;
    }
    return judge(this, worst, 'Largest mismatch of the derivative and its adjoint over five pairs of random vectors.');
  },
};
