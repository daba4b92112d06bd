import type { DeblurringGeometry } from '../../../shared/domain/geometry/deblurring';
import { evaluationGrid } from '../../core/grid';
import type { EvaluationGrid } from '../../core/types';
import { pixelGrid, type PixelGrid } from '../pixel-grid/pixel-grid';

/** Pixels of the picture: `cells` along the longer side, nearly square, centred at the origin; dx, dy in m. */
export interface Picture {
  readonly nx: number;
  readonly ny: number;
  readonly dx: number;
  readonly dy: number;
}

/** A short side has this many pixels at least. */
const fewest = 4;

export function pictureOf({ body, cells }: Pick<DeblurringGeometry, 'body' | 'cells'>): Picture {
  const side = Math.max(body.width, body.height) / cells;
  const nx = Math.max(fewest, Math.round(body.width / side));
  const ny = Math.max(fewest, Math.round(body.height / side));
  return { nx, ny, dx: body.width / nx, dy: body.height / ny };
}

const extentOf = (geometry: Pick<DeblurringGeometry, 'body' | 'cells'>) => {
  const { nx, ny } = pictureOf(geometry);
  const { width, height } = geometry.body;
  return { nx, ny, xMin: -width / 2, xMax: width / 2, yMin: -height / 2, yMax: height / 2, body: geometry.body };
};

/** Data, unknowns and errors live on the same pixels. */
export const pictureGrid = (geometry: Pick<DeblurringGeometry, 'body' | 'cells'>): EvaluationGrid => evaluationGrid(extentOf(geometry));
export const pictureCells = (geometry: Pick<DeblurringGeometry, 'body' | 'cells'>): PixelGrid => pixelGrid(extentOf(geometry));
