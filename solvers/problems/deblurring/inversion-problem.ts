import type { DeblurringGeometry } from '../../../shared/domain/geometry/deblurring';
import { limits } from '../../../shared/domain/limits';
import { requireVector } from '../../core/vector';
import { pixelJumps, pixelPenalty } from '../pixel-grid/pixel-penalty';
import type { InversionProblem } from '../problem-family';
import { blurOperator } from './blur-operator';
import { pictureCells, pictureGrid } from './picture';
import { projectOnPicture } from './sample-truth';

/**
 * The model that inverts: pixel averages of the sharp picture convolved with the point-spread function on pixels, and what the phantom's
 * `edge` assumes beyond the picture (Hansen, Nagy, O'Leary 2006, from memory).
 * @param background intensity
 */
export function createDeblurringInversion(geometry: DeblurringGeometry, background: number): InversionProblem {
  if (!(Math.abs(background) <= limits.plainValueMax)) throw new RangeError(`The background must lie between ${-limits.plainValueMax} and ${limits.plainValueMax}, not be ${background}.`);
  const cells = pictureCells(geometry);
  const grid = pictureGrid(geometry);
  const n = cells.inside.length;
  const operator = blurOperator(geometry);
  const evaluate = (x: Float64Array): Float64Array => {
    requireVector(x, n, 'The vector of intensities');
    const data = new Float64Array(n);
    operator.apply(x, data);
    return data;
  };
  return {
    family: 'deblurring',
    geometry,
    dataKind: 'absolute',
    dataSize: n,
    unknowns: n,
    unknownWeights: cells.weights,
    grid,
    unit: '',
    lowerBound: -Infinity,
    nodes: n,
    linear: true,
    background: () => new Float64Array(n).fill(background),
    frameOf: evaluate,
    evaluate,
    linearise: () => operator,
    toImage: (x, out) => out.set(x),
    penalty: (kind) => pixelPenalty(cells, kind),
    jumps: () => pixelJumps(cells),
    project: (truth) => projectOnPicture(truth, geometry),
  };
}
