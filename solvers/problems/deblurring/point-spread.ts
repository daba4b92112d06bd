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
  /** Share of the function to the left of a vertical line at x (m), and its integral from -infinity to x: what an edge is blurred to. */
  edge(x: number): number;
  edgeIntegral(x: number): number;
  /** LaTeX. */
  readonly formula: string;
}

const factories: Record<PointSpreadKey, (geometry: DeblurringGeometry) => PointSpread> = {
  gaussian: ({ spread }) => gaussianSpread(spread),
  disc: ({ spread }) => discSpread(spread),
  motion: ({ spread, motionDeg }) => motionSpread(spread, motionDeg ?? 0),
};

export const pointSpreadOf = (geometry: DeblurringGeometry): PointSpread => factories[geometry.pointSpread](geometry);
