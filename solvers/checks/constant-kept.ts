import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { pictureOf } from '../problems/deblurring/picture';
import { pointSpreadOf } from '../problems/deblurring/point-spread';
import { simulateBlur } from '../problems/deblurring/simulation';
import { createTruthField } from '../truth/truth-field';
import { judge, type Check } from './check';
import { commonPractice, type PhantomCheckContext } from './phantom-check';

export const constantKeptCheck: Check<PhantomCheckContext<DefinitionOf<'deblurring'>>> = {
  key: 'constant-kept',
  name: 'Point-spread function of unit sum',
  unit: '',
  bound: 1e-12,
  comparison: 'at-most',
  formula: '\\max_i |(A \\mathbf 1)_i - 1|',
  summary: 'A picture of ones stays one, in the simulation everywhere and in the inversion wherever it assumes the picture to go on.',
  source: commonPractice,
  evaluate({ definition: { geometry }, problem }) {
    const { nx, ny, dx, dy } = pictureOf(geometry);
    const blurred = problem.evaluate(new Float64Array(nx * ny).fill(1));
    const taps = pointSpreadOf(geometry).taps(dx, dy);
    // A zero edge takes light from the pixels whose weights reach beyond the frame.
    const zero = geometry.edge === 'zero';
    const reachX = zero ? Math.max(...taps.columns) : 0;
    const reachY = zero ? Math.max(...taps.rows) : 0;
    let worst = 0;
    for (const value of simulateBlur(createTruthField({ kind: 'shapes', background: 1, shapes: [] }), geometry)) worst = Math.max(worst, Math.abs(value - 1));
    let seen = 0;
    for (let i = reachY; i < ny - reachY; i++)
      for (let j = reachX; j < nx - reachX; j++) {
        worst = Math.max(worst, Math.abs(blurred[i * nx + j] - 1));
        seen++;
      }
    return judge(this, worst, `Largest deviation from 1, in the simulation and at ${seen} pixels of the inversion.`);
  },
};
