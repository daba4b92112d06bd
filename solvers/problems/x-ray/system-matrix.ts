import type { XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import type { SparseMatrix } from '../../core/types';
import { evaluationSide, pixelGrid, type PixelGrid } from '../pixel-grid/pixel-grid';
import { detectorCentre, viewAngles, viewRays } from './rays';
import { siddon, type Projector } from './siddon';

/** Lines over the width of a detector cell in the model that inverts, at the middles of equal parts. */
export const inversionRays = 2;

/** Entries of the matrix, at most: 480 MB. */
const largestMatrix = 40_000_000;

/** The cells of the unknowns: those of the square around the disc that touch it. */
export function xrayCells({ body, cells }: XrayGeometry): PixelGrid {
  const { radius } = body;
  return pixelGrid({ nx: cells, ny: cells, xMin: -radius, xMax: radius, yMin: -radius, yMax: radius, body });
}

/** Pixels a side of the evaluation grid. */
export const xrayEvaluationSide = (geometry: XrayGeometry): number => evaluationSide(geometry.cells);

/**
 * Mean line integral over each detector cell (rows, view after view) of an attenuation that is constant on the cells within the disc and 0
 * outside it. Entries in m, columns ascending.
 * @throws RangeError where the matrix would be too large
 */
export function systemMatrix(geometry: XrayGeometry, grid: PixelGrid, projector: Projector = siddon, lines = inversionRays): SparseMatrix {
  const { views, detectors, detectorSpacing, body } = geometry;
  const rows = views * detectors;
  const rowStart = new Int32Array(rows + 1);
  let columns = new Int32Array(1 << 16);
  let values = new Float64Array(1 << 16);
  let count = 0;
  const sum = new Float64Array(grid.inside.length);
  const mark = new Int32Array(grid.inside.length).fill(-1);
  let row = 0;
  const found: number[] = [];
  const add = (cell: number, weight: number): void => {
    const unknown = grid.numberOf[cell];
    if (unknown < 0) return;
    if (mark[unknown] !== row) {
      mark[unknown] = row;
      sum[unknown] = 0;
      found.push(unknown);
    }
    sum[unknown] += weight / lines;
  };
  for (const angle of viewAngles(geometry)) {
    const rayAt = viewRays(geometry, angle);
    for (let cell = 0; cell < detectors; cell++) {
      found.length = 0;
      const centre = detectorCentre(geometry, cell);
      for (let k = 0; k < lines; k++) projector(grid, body.radius, rayAt(centre + ((k + 0.5) / lines - 0.5) * detectorSpacing), add);
      found.sort((a, b) => a - b);
      if (count + found.length > largestMatrix) throw new RangeError(`The projection matrix of ${rows} rays through ${grid.inside.length} cells is too large: use fewer views, detector cells or cells.`);
      if (count + found.length > columns.length) {
        const longer = new Int32Array(2 * columns.length);
        longer.set(columns);
        columns = longer;
        const wider = new Float64Array(2 * values.length);
        wider.set(values);
        values = wider;
      }
      for (const unknown of found) {
        columns[count] = unknown;
        values[count] = sum[unknown];
        count++;
      }
      row++;
      rowStart[row] = count;
    }
  }
  return { rows, cols: grid.inside.length, rowStart, columns: columns.slice(0, count), values: values.slice(0, count) };
}
