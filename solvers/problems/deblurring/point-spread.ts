/**
 * Point-spread functions, each with unit integral and the same seen from both sides, so that a convolution is a correlation.
 *
 * Data are averages over pixels of the blurred image. The inversion convolves pixel averages with `taps`; the simulation works from finer
 * samples with `response`, so that the two share neither sampling nor rule.
 */
import type { DeblurringGeometry, PointSpreadKey } from '../../../shared/domain/geometry/deblurring';
import { discSpread } from './disc-spread';
import { gaussianSpread } from './gaussian-spread';
import { motionSpread } from './motion-spread';

/** Weights at offsets in pixels: pixel (i + rows[k], j + columns[k]) has weight values[k]. */
export interface Taps {
  readonly rows: Int32Array;
  readonly columns: Int32Array;
  readonly values: Float64Array;
}

export interface PointSpread {
  /** Half the sides of the rectangle that holds the support (a Gaussian: all but 1e-8 of it), m. */
  readonly reachX: number;
  readonly reachY: number;
  /** Weights of the inversion on pixels of dx x dy (m), of unit sum. */
  taps(dx: number, dy: number): Taps;
  /**
   * Share of a unit of intensity at (x, y), relative to the centre of a pixel of dx x dy, that the pixel receives, up to a constant
   * factor: the exact integral of the point-spread function over the pixel. m.
   */
  response(x: number, y: number, dx: number, dy: number): number;
  /** Factors of `response` along x and y, where it is a product. */
  readonly separable?: { along(offset: number, size: number): number };
  /** Integral from -infinity to x of the share of the function to the left of a vertical line, m: differences of it are what an edge is blurred to. */
  edgeIntegral(x: number): number;
  /** LaTeX. */
  readonly formula: string;
}

const factories: Record<PointSpreadKey, (geometry: DeblurringGeometry) => PointSpread> = {
  gaussian: ({ spread }) => gaussianSpread(spread),
  disc: ({ spread }) => discSpread(spread),
  motion: ({ spread, motionDeg }) => motionSpread(spread, motionDeg ?? 0),
};

/** For the reference page. */
export const pointSpreadWords: Record<PointSpreadKey, { readonly name: string; readonly line: string; readonly inverted: string }> = {
  gaussian: { name: 'Gaussian point-spread function', line: 'turbulence, or many small blurs one after another; its spread is the standard deviation', inverted: 'samples at the centres of pixels, out to five deviations' },
  disc: { name: 'Disc point-spread function', line: 'a lens out of focus; its spread is the radius', inverted: 'share of 64 points of each pixel inside the disc' },
  motion: { name: 'Motion point-spread function', line: 'a straight motion at even speed while the picture was taken; its spread is half the length', inverted: 'evenly spaced points of the path, counted by pixel' },
};

export const pointSpreadOf = (geometry: DeblurringGeometry): PointSpread => factories[geometry.pointSpread](geometry);
