/** Orthonormal wavelets with periodic ends (Haar 1910; Daubechies 1988), one or two dimensions, sides a power of two. */

/** Low-pass filters with sum sqrt(2): Haar, and Daubechies with two vanishing moments. */
const root3 = Math.sqrt(3);
const scale = 4 * Math.sqrt(2);
export const waveletFilters = {
  haar: [Math.SQRT1_2, Math.SQRT1_2],
  daubechies: [(1 + root3) / scale, (3 + root3) / scale, (3 - root3) / scale, (1 - root3) / scale],
} as const;
export type WaveletKey = keyof typeof waveletFilters;

function forwardLine(line: Float64Array, length: number, low: readonly number[], scratch: Float64Array): void {
  const half = length >> 1;
  for (let i = 0; i < half; i++) {
    let a = 0;
    let d = 0;
    for (let k = 0; k < low.length; k++) {
      const value = line[(2 * i + k) % length];
      a += low[k] * value;
      d += (k % 2 === 0 ? 1 : -1) * low[low.length - 1 - k] * value;
    }
    scratch[i] = a;
    scratch[half + i] = d;
  }
  for (let i = 0; i < length; i++) line[i] = scratch[i];
}

function inverseLine(line: Float64Array, length: number, low: readonly number[], scratch: Float64Array): void {
  const half = length >> 1;
  for (let i = 0; i < length; i++) scratch[i] = 0;
  for (let i = 0; i < half; i++)
    for (let k = 0; k < low.length; k++)
      scratch[(2 * i + k) % length] += low[k] * line[i] + (k % 2 === 0 ? 1 : -1) * low[low.length - 1 - k] * line[half + i];
  for (let i = 0; i < length; i++) line[i] = scratch[i];
}

export interface WaveletTransform {
  readonly nx: number;
  readonly ny: number;
  /** Number of coefficients of the coarsest approximation: rows below `coarseY`, columns below `coarseX`. */
  readonly coarseX: number;
  readonly coarseY: number;
  /** In place, ny x nx row-major. */
  forward(image: Float64Array): void;
  inverse(image: Float64Array): void;
}

/** @throws RangeError for sides that are no powers of two (1 is one) */
export function waveletTransform(nx: number, ny: number, key: WaveletKey): WaveletTransform {
  for (const side of [nx, ny]) if (!(Number.isInteger(side) && side >= 1 && (side & (side - 1)) === 0)) throw new RangeError(`A wavelet transform needs sides that are powers of two, not ${side}.`);
  const low = waveletFilters[key];
  const smallest = 4;
  const line = new Float64Array(Math.max(nx, ny));
  const scratch = new Float64Array(Math.max(nx, ny));
  const levels: (readonly [number, number])[] = [];
  let width = nx;
  let height = ny;
  while (width > smallest || height > smallest) {
    levels.push([width, height]);
    if (width > smallest) width >>= 1;
    if (height > smallest) height >>= 1;
  }
  const pass = (image: Float64Array, w: number, h: number, transform: typeof forwardLine): void => {
    if (w > smallest)
      for (let i = 0; i < h; i++) {
        for (let j = 0; j < w; j++) line[j] = image[i * nx + j];
        transform(line, w, low, scratch);
        for (let j = 0; j < w; j++) image[i * nx + j] = line[j];
      }
    if (h > smallest)
      for (let j = 0; j < w; j++) {
        for (let i = 0; i < h; i++) line[i] = image[i * nx + j];
        transform(line, h, low, scratch);
        for (let i = 0; i < h; i++) image[i * nx + j] = line[i];
      }
  };
  return {
    nx, ny, coarseX: width, coarseY: height,
    forward(image) {
      for (const [w, h] of levels) pass(image, w, h, forwardLine);
    },
    inverse(image) {
      for (let k = levels.length - 1; k >= 0; k--) pass(image, levels[k][0], levels[k][1], inverseLine);
    },
  };
}
