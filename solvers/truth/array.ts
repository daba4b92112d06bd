import { polygonInterface } from './polygon';
import { TruthError } from './truth-error';
import type { TruthField } from './truth-field';
import { conductivityRange, type ValueRange } from './value-range';

export interface ArrayTruth {
  readonly background: number;
  readonly rows: number;
  readonly cols: number;
  readonly extent: { readonly xMin: number; readonly xMax: number; readonly yMin: number; readonly yMax: number };
  readonly scale: number;
  readonly offset: number;
}

/**
 * Ground truth from an array: row 0 at the largest y. Stored values belong to the pixel centres; between them the
 * truth is bilinear, in the outer half pixel it is that of the rim, and outside the extent it is the background.
 * Where a rim value differs from the background the outline of the extent is an interface.
 * @param values rows x cols, row-major
 * @throws TruthError naming the row and column of a value outside the range
 */
export function arrayField(truth: ArrayTruth, values: Float64Array, range: ValueRange = conductivityRange): TruthField {
  const { rows, cols, extent, scale, offset, background } = truth;
  if (values.length !== rows * cols) throw new RangeError(`The array has ${values.length} values, not rows x cols = ${rows} x ${cols}.`);
  const sigma = new Float64Array(values.length);
  let jumps = false;
  for (let i = 0; i < rows; i++)
    for (let j = 0; j < cols; j++) {
      const value = offset + scale * values[i * cols + j];
      if (!(value >= range.min && value <= range.max))
        throw new TruthError(
          `Row ${i + 1}, column ${j + 1} of the array gives ${value}${range.unit} (offset + scale x ${values[i * cols + j]}): ${range.rule}.`,
          ['truth', 'scale'],
        );
      sigma[i * cols + j] = value;
      if ((i === 0 || j === 0 || i === rows - 1 || j === cols - 1) && value !== background) jumps = true;
    }
  const { xMin, xMax, yMin, yMax } = extent;
  const perX = cols / (xMax - xMin);
  const perY = rows / (yMax - yMin);
  return {
    background,
    piecewiseConstant: false,
    targets: [],
    interfaces: jumps ? [polygonInterface([[xMin, yMin], [xMax, yMin], [xMax, yMax], [xMin, yMax]])] : [],
    valueAt(x, y) {
      if (x < xMin || x > xMax || y < yMin || y > yMax) return background;
      const u = Math.max(0, Math.min(cols - 1, (x - xMin) * perX - 0.5));
      const v = Math.max(0, Math.min(rows - 1, (yMax - y) * perY - 0.5));
      const j = Math.min(cols - 2, Math.floor(u));
      const i = Math.min(rows - 2, Math.floor(v));
      const fu = u - j;
      const fv = v - i;
      const at = i * cols + j;
      const upper = sigma[at] + fu * (sigma[at + 1] - sigma[at]);
      const lower = sigma[at + cols] + fu * (sigma[at + cols + 1] - sigma[at + cols]);
      return upper + fv * (lower - upper);
    },
  };
}
