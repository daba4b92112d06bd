import { cos, sin } from '../../core/math';

/**
 * Fourier transforms over the angle of `width` functions at once, in place on separate real and imaginary parts: entry
 * j * width + i is function i at angle 2 pi j / n. Coefficients stand in bit-reversed order, which saves the reordering both ways.
 */
export interface AngularFourier {
  /** Where the coefficient p stands, p = 0 ... n - 1 (p < 0 is p + n). */
  readonly place: Int32Array;
  /** c_p = sum f_j e^{-2 pi i p j / n}, not divided by n. */
  forward(re: Float64Array, im: Float64Array): void;
  /** f_j = sum c_p e^{2 pi i p j / n}. */
  backward(re: Float64Array, im: Float64Array): void;
}

/**
 * Radix 2: decimation in frequency forwards, in time backwards (Cooley and Tukey 1965; Gentleman and Sande 1966).
 * Cost: 5 n log2(n) operations a function and direction.
 * @throws RangeError unless n is a power of two from 2 to 4096
 */
export function angularFourier(n: number, width: number): AngularFourier {
  if (!(n >= 2 && n <= 4096 && (n & (n - 1)) === 0)) throw new RangeError(`The transform has a power of two from 2 to 4096 points, not ${n}.`);
  const place = new Int32Array(n);
  for (let i = 1; i < n; i++) place[i] = (place[i >> 1] >> 1) + (i % 2 === 1 ? n / 2 : 0);
  const wr = new Float64Array(n / 2);
  const wi = new Float64Array(n / 2);
  for (let i = 0; i < n / 2; i++) {
    wr[i] = cos((2 * Math.PI * i) / n);
    wi[i] = sin((2 * Math.PI * i) / n);
  }
  return {
    place,
    forward(re, im) {
      for (let half = n / 2, stride = 1; half >= 1; half /= 2, stride *= 2) {
        for (let block = 0; block < n; block += 2 * half) {
          for (let k = 0; k < half; k++) {
            const c = wr[k * stride];
            const s = -wi[k * stride];
            let p = (block + k) * width;
            let q = p + half * width;
            for (const end = p + width; p < end; p++, q++) {
              const xr = re[p] - re[q];
              const xi = im[p] - im[q];
              re[p] += re[q];
              im[p] += im[q];
              re[q] = c * xr - s * xi;
              im[q] = c * xi + s * xr;
            }
          }
        }
      }
    },
    backward(re, im) {
      for (let half = 1, stride = n / 2; half < n; half *= 2, stride /= 2) {
        for (let block = 0; block < n; block += 2 * half) {
          for (let k = 0; k < half; k++) {
            const c = wr[k * stride];
            const s = wi[k * stride];
            let p = (block + k) * width;
            let q = p + half * width;
            for (const end = p + width; p < end; p++, q++) {
              const xr = c * re[q] - s * im[q];
              const xi = c * im[q] + s * re[q];
              re[q] = re[p] - xr;
              im[q] = im[p] - xi;
              re[p] += xr;
              im[p] += xi;
            }
          }
        }
      }
    },
  };
}
