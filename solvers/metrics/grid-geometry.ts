import type { EvaluationGrid } from '../core/types';

/** Positions of the pixels inside the body, computed once a grid. */
export interface GridGeometry {
  /** Pixel centres in metres, one an inside pixel. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Pixel area in m^2. */
  readonly pixelArea: number;
  /** Centre of the body (middle of the extent) in metres. */
  readonly centreX: number;
  readonly centreY: number;
  /** Inside index of every pixel of the grid, -1 outside. */
  readonly insideIndex: Int32Array;
}

const cache = new WeakMap<EvaluationGrid, GridGeometry>();

export function gridGeometry(grid: EvaluationGrid): GridGeometry {
  let geometry = cache.get(grid);
  if (!geometry) cache.set(grid, (geometry = compute(grid)));
  return geometry;
}

function compute(grid: EvaluationGrid): GridGeometry {
  const { nx, ny, xMin, xMax, yMin, yMax, inside } = grid;
  const stepX = (xMax - xMin) / nx;
  const stepY = (yMax - yMin) / ny;
  const x = new Float64Array(inside.length);
  const y = new Float64Array(inside.length);
  const insideIndex = new Int32Array(nx * ny).fill(-1);
  for (let k = 0; k < inside.length; k++) {
    const pixel = inside[k];
    const column = pixel % nx;
    x[k] = xMin + (column + 0.5) * stepX;
    y[k] = yMin + ((pixel - column) / nx + 0.5) * stepY;
    insideIndex[pixel] = k;
  }
  return { x, y, pixelArea: stepX * stepY, centreX: 0.5 * (xMin + xMax), centreY: 0.5 * (yMin + yMax), insideIndex };
}
