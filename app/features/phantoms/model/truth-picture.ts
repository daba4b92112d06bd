import { bodyHalfSize } from '../../../components/images/body-outline';
import { valueScale, type Picture, type PixelGrid } from '../../../components/images/pixels';
import type { RoundOrRectangle } from './draft-shape';
import { rasterFunction } from './raster';

/** Pixels a side of the pictures in the form. */
export const pictureSide = 144;

/** Square pixels over the body, `side` along its longer side. */
export function bodyGrid(body: RoundOrRectangle, side = pictureSide): PixelGrid {
  const [a, b] = bodyHalfSize(body);
  const longer = Math.max(a, b);
  return { nx: Math.max(1, Math.round((side * a) / longer)), ny: Math.max(1, Math.round((side * b) / longer)), xMin: -a, xMax: a, yMin: -b, yMax: b, bodyRadius: longer, body };
}

/** Ends of the colour scale of a truth that may not be known yet. */
export const colourRange = (range: readonly [number, number] | null, background: number): [number, number] => valueScale(range ?? [background, background], background);

/** Steepest change between neighbouring pixels, per body radius (half the longer side of a picture). */
export function steepestSlope(picture: Picture): number {
  const { grid, values } = picture;
  const step = (grid.xMax - grid.xMin) / grid.nx;
  let steepest = 0;
  for (let j = 0; j < grid.ny - 1; j++) {
    for (let i = 0; i < grid.nx - 1; i++) {
      const at = values[j * grid.nx + i]!;
      const right = values[j * grid.nx + i + 1]!;
      const above = values[(j + 1) * grid.nx + i]!;
      const slope = Math.hypot(right - at, above - at);
      if (slope > steepest) steepest = slope;
    }
  }
  return (steepest / step) * grid.bodyRadius;
}

interface Extent {
  readonly xMin: number;
  readonly xMax: number;
  readonly yMin: number;
  readonly yMax: number;
}

/** An uploaded array in its place on the body; rows run from the largest y down, outside its extent is the background. */
export function arrayPicture(values: Float64Array, rows: number, cols: number, extent: Extent, body: RoundOrRectangle, background: number, scale: number, offset: number): Picture {
  const grid = bodyGrid(body);
  const at = (x: number, y: number): number => {
    const col = Math.floor(((x - extent.xMin) / (extent.xMax - extent.xMin)) * cols);
    const row = Math.floor(((extent.yMax - y) / (extent.yMax - extent.yMin)) * rows);
    if (col < 0 || row < 0 || col >= cols || row >= rows) return background;
    return offset + scale * values[row * cols + col]!;
  };
  return { grid, values: rasterFunction(at, body, grid) };
}

/** A function of one variable on its interval. */
export function linePicture([from, to]: readonly [number, number], at: (x: number) => number, points = 240): Picture {
  const grid: PixelGrid = { nx: points, ny: 1, xMin: from, xMax: to, yMin: 0, yMax: 1, bodyRadius: (to - from) / 2, body: { kind: 'interval', from, to } };
  return { grid, values: Float64Array.from({ length: points }, (_, i) => at(from + ((i + 0.5) * (to - from)) / points)) };
}
