import type { DeblurringGeometry } from '../../../shared/domain/geometry/deblurring';
import { evaluationGrid } from '../../core/grid';
import type { EvaluationGrid } from '../../core/types';
import type { TruthField } from '../../truth/truth-field';
import { pictureOf } from './picture';
import { pointSpreadOf, type PointSpread } from './point-spread';
import { sampleTruth } from './sample-truth';

/** Bounds on the work: samples a side of the field, and weights times pixels. */
const longestField = 768;
const mostProducts = 4e8;

/** The field on which a blur is simulated: the picture and all beyond it that the point-spread function brings in. */
export interface BlurField {
  /** Samples a side of each pixel; even, so that no sample lies at the centre of a pixel, where the inversion has its nodes. */
  readonly samples: number;
  /** Pixels added on each side. */
  readonly marginX: number;
  readonly marginY: number;
  /** Samples of the field, in place of the pixels of a grid. */
  readonly grid: EvaluationGrid;
}

/** @param coarser divides the number of samples a side */
export function blurField(geometry: DeblurringGeometry, coarser = 1): BlurField {
  const { nx, ny, dx, dy } = pictureOf(geometry);
  const spread = pointSpreadOf(geometry);
  const marginX = Math.ceil(spread.reachX / dx);
  const marginY = Math.ceil(spread.reachY / dy);
  const side = Math.max(nx + 2 * marginX, ny + 2 * marginY);
  const support = (2 * marginX + 1) * (2 * marginY + 1);
  const affordable = spread.separable ? Infinity : Math.sqrt(mostProducts / (nx * ny * support));
  const samples = (2 * Math.floor(Math.max(4, Math.min(16, longestField / side, affordable)) / 2)) / coarser;
  const width = (nx + 2 * marginX) * dx;
  const height = (ny + 2 * marginY) * dy;
  const grid = evaluationGrid({
    nx: (nx + 2 * marginX) * samples, ny: (ny + 2 * marginY) * samples, xMin: -width / 2, xMax: width / 2, yMin: -height / 2, yMax: height / 2,
    body: { kind: 'rectangle', width, height },
  });
  return { samples, marginX, marginY, grid };
}

/** Offsets, in samples from the first one of a pixel, at which a pixel receives light along one axis. */
const offsetsOf = (margin: number, samples: number): { readonly first: number; readonly count: number } => ({ first: -margin * samples, count: (2 * margin + 1) * samples });

const centre = (offset: number, samples: number, size: number): number => ((offset + 0.5) / samples - 0.5) * size;

/**
 * Averages over the picture's pixels of the blurred truth: the exact response of a pixel to each sample of a field that holds all the
 * point-spread function reaches.
 * @returns ny x nx, row 0 at the lowest y
 * @throws RangeError naming the place where an expression has no admissible value
 */
export function simulateBlur(truth: TruthField, geometry: DeblurringGeometry, field = blurField(geometry)): Float64Array {
  const values = sampleTruth(truth, field.grid);
  const spread = pointSpreadOf(geometry);
  return spread.separable ? blurByAxes(values, geometry, field, spread.separable.along) : blurByTable(values, geometry, field, spread);
}

function axisWeights(along: (offset: number, size: number) => number, margin: number, samples: number, size: number): Float64Array {
  const { first, count } = offsetsOf(margin, samples);
  const weights = Float64Array.from({ length: count }, (_, k) => along(centre(first + k, samples, size), size));
  let sum = 0;
  for (let k = 0; k < count; k++) sum += weights[k];
  return weights.map((weight) => weight / sum);
}

function blurByAxes(values: Float64Array, geometry: DeblurringGeometry, field: BlurField, along: (offset: number, size: number) => number): Float64Array {
  const { nx, ny, dx, dy } = pictureOf(geometry);
  const { samples, marginX, marginY, grid } = field;
  const wx = axisWeights(along, marginX, samples, dx);
  const wy = axisWeights(along, marginY, samples, dy);
  const half = new Float64Array(grid.ny * nx);
  for (let i = 0; i < grid.ny; i++)
    for (let j = 0; j < nx; j++) {
      const start = i * grid.nx + j * samples;
      let sum = 0;
      for (let k = 0; k < wx.length; k++) sum += wx[k] * values[start + k];
      half[i * nx + j] = sum;
    }
  const out = new Float64Array(nx * ny);
  for (let i = 0; i < ny; i++)
    for (let k = 0; k < wy.length; k++) for (let j = 0; j < nx; j++) out[i * nx + j] += wy[k] * half[(i * samples + k) * nx + j];
  return out;
}

function blurByTable(values: Float64Array, geometry: DeblurringGeometry, field: BlurField, spread: PointSpread): Float64Array {
  const { nx, ny, dx, dy } = pictureOf(geometry);
  const { samples, marginX, marginY, grid } = field;
  const { shift, weights } = responseTable(geometry, field, spread, dx, dy);
  const out = new Float64Array(nx * ny);
  for (let i = 0; i < ny; i++)
    for (let j = 0; j < nx; j++) {
      const start = (i + marginY) * samples * grid.nx + (j + marginX) * samples;
      let sum = 0;
      for (let k = 0; k < weights.length; k++) sum += weights[k] * values[start + shift[k]];
      out[i * nx + j] = sum;
    }
  return out;
}

/** Weights of unit sum and their places, in samples of the field from the first sample of a pixel. */
function responseTable(geometry: DeblurringGeometry, { samples, marginX, marginY, grid }: BlurField, spread: PointSpread, dx: number, dy: number): { shift: Int32Array; weights: Float64Array } {
  const x = offsetsOf(marginX, samples);
  const y = offsetsOf(marginY, samples);
  const shift: number[] = [];
  const weights: number[] = [];
  let sum = 0;
  for (let a = 0; a < y.count; a++)
    for (let b = 0; b < x.count; b++) {
      const weight = spread.response(centre(x.first + b, samples, dx), centre(y.first + a, samples, dy), dx, dy);
      if (weight === 0) continue;
      shift.push((y.first + a) * grid.nx + x.first + b);
      weights.push(weight);
      sum += weight;
    }
  return { shift: Int32Array.from(shift), weights: Float64Array.from(weights, (weight) => weight / sum) };
}
