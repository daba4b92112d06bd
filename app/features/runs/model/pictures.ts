import { difference, differenceLimit, insidePixels, largest, rangeOf, toPicture, valueScale, type Picture, type PixelGrid } from '../../../components/images/pixels';

export interface RunPictures {
  image: Picture;
  truth: Picture | null;
  difference: Picture | null;
  /** Shared scale of truth and reconstruction. */
  low: number;
  high: number;
  /** Limit of the symmetric difference scale. */
  limit: number;
  /** Largest error and its place; null while the truth is sealed. */
  spot: { value: number; x: number; y: number } | null;
}

/**
 * The three pictures on their scales. Truth sets the common scale, so that it stays put while the noise moves; without a truth
 * the image does. `lockedLimit` keeps the difference scale across noise levels.
 */
export function runPictures(imageValues: ArrayLike<number>, truthValues: ArrayLike<number> | null, grid: PixelGrid, background: number, lockedLimit: number | null): RunPictures {
  const inside = insidePixels(grid);
  const image = toPicture(imageValues, grid, inside);
  const truth = truthValues ? toPicture(truthValues, grid, inside) : null;
  const [low, high] = valueScale(rangeOf([truth ?? image]), background);
  const delta = truth ? difference(image, truth) : null;
  const spot = delta ? largest(delta) : null;
  return {
    image, truth, difference: delta, low, high,
    limit: lockedLimit ?? differenceLimit(spot?.value ?? 1), spot,
  };
}
