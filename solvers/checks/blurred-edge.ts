import type { DeblurringGeometry } from '../../shared/domain/geometry/deblurring';
import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { pictureOf } from '../problems/deblurring/picture';
import { pointSpreadOf } from '../problems/deblurring/point-spread';
import { blurField, simulateBlur } from '../problems/deblurring/simulation';
import { createTruthField } from '../truth/truth-field';
import { judge, type Check } from './check';
import type { PhantomCheckContext } from './phantom-check';

/** Where the edge stands, in pixels to the right of the middle: no multiple of a sample. */
const place = 0.317;

/** A row of the simulated picture of a vertical edge (1 to the left of it, 0 to the right), and the same in closed form. */
export function blurredEdge(geometry: DeblurringGeometry): { readonly simulated: Float64Array; readonly exact: Float64Array } {
  const { nx, ny, dx } = pictureOf(geometry);
  const field = blurField(geometry);
  const { xMin, yMin, yMax } = field.grid;
  const x = place * dx;
  const edge = createTruthField({
    kind: 'shapes', background: 0,
    shapes: [{ kind: 'polygon', label: 'edge', value: 1, target: false, vertices: [[2 * xMin, 2 * yMin], [x, 2 * yMin], [x, 2 * yMax], [2 * xMin, 2 * yMax]] }],
  });
  const row = ny >> 1;
  const simulated = simulateBlur(edge, geometry, field).slice(row * nx, (row + 1) * nx);
  const { edgeIntegral } = pointSpreadOf(geometry);
  const exact = Float64Array.from({ length: nx }, (_, j) => {
    const left = (j - nx / 2) * dx;
    return 1 - (edgeIntegral(left + dx - x) - edgeIntegral(left - x)) / dx;
  });
  return { simulated, exact };
}

export const blurredEdgeCheck: Check<PhantomCheckContext<DefinitionOf<'deblurring'>>> = {
  key: 'blurred-edge',
  name: 'Closed form of a blurred edge',
  unit: '',
  // Of the height of the edge. What matters is the share of a whole picture, which is smaller.
  bound: 1e-3,
  comparison: 'at-most',
  formula: '\\max_j \\left| b_j - \\frac{1}{\\Delta x} \\int_{\\text{pixel } j} \\int_{u > x - x_0} p(u, v)\\, \\mathrm{d}u\\, \\mathrm{d}v\\, \\mathrm{d}x \\right|',
  summary: 'The simulation of a vertical edge against what the point-spread function makes of it: the error function of a Gaussian, the segment of a disc, the ramp of a motion.',
  source: { short: 'closed form', full: 'The integral of the point-spread function over a half-plane, averaged over a pixel. Textbook result.', fromMemory: true },
  evaluate({ definition: { geometry } }) {
    const { simulated, exact } = blurredEdge(geometry);
    let worst = 0;
    for (let j = 0; j < exact.length; j++) worst = Math.max(worst, Math.abs(simulated[j] - exact[j]));
    return judge(this, worst, 'Largest difference along a row, in heights of the edge.');
  },
};
