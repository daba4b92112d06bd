import type { DeblurringGeometry } from '../../../shared/domain/geometry/deblurring';
import { evaluationGrid } from '../../core/grid';
import type { EvaluationGrid } from '../../core/types';
import type { TruthField } from '../../truth/truth-field';
import { truthOnGrid } from '../../truth/truth-on-grid';
import { pictureGrid } from './picture';

/** Averages of the truth over the pixels of a fine grid. An expression, which names no interfaces, is averaged over 2 x 2 points. */
export function sampleTruth(truth: TruthField, grid: EvaluationGrid): Float64Array {
  if (truth.piecewiseConstant || truth.interfaces.length > 0) return truthOnGrid(truth, grid);
  const { nx, ny, xMin, yMin } = grid;
  const stepX = (grid.xMax - xMin) / nx;
  const stepY = (grid.yMax - yMin) / ny;
  const out = new Float64Array(nx * ny);
  for (let i = 0; i < ny; i++)
    for (let j = 0; j < nx; j++) {
      let sum = 0;
      for (let q = 0; q < 4; q++) sum += truth.valueAt(xMin + (j + 0.25 + 0.5 * (q & 1)) * stepX, yMin + (i + 0.25 + 0.5 * (q >> 1)) * stepY);
      out[i * nx + j] = sum / 4;
    }
  return out;
}

/** Parts a side of each pixel in a projection: what a blur leaves of the error of an average is then below the noise. */
const parts = 8;

/** Averages of the truth over the picture's pixels, ten times more accurate than an image for the eye. */
export function projectOnPicture(truth: TruthField, geometry: Pick<DeblurringGeometry, 'body' | 'cells'>): Float64Array {
  const { nx, ny, xMin, xMax, yMin, yMax, body } = pictureGrid(geometry);
  const fine = sampleTruth(truth, evaluationGrid({ nx: nx * parts, ny: ny * parts, xMin, xMax, yMin, yMax, body }));
  const out = new Float64Array(nx * ny);
  for (let i = 0; i < ny * parts; i++) for (let j = 0; j < nx * parts; j++) out[Math.floor(i / parts) * nx + Math.floor(j / parts)] += fine[i * nx * parts + j];
  return out.map((sum) => sum / (parts * parts));
}
