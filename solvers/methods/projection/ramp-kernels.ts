/** Ramp filters of back-projection, band-limited and windowed, in closed form in space. */
import { sin } from '../../core/math';

export const windowKeys = ['ram-lak', 'shepp-logan', 'hann'] as const;
export type WindowKey = (typeof windowKeys)[number];

/** sin(pi x) / (pi x). */
function sinc(x: number): number {
  const u = Math.PI * x;
  return x === 0 ? 1 : sin(u) / u;
}

/** Inverse Fourier transform of |w| up to the cut-off (Ramachandran and Lakshminarayanan 1971; Kak and Slaney 1988, equation 3.61). */
function ramp(t: number, cutoff: number): number {
  const s = sinc(cutoff * t);
  return cutoff * cutoff * (2 * sinc(2 * cutoff * t) - s * s);
}

/** Of |w| sinc(w / (2 cutoff)), which is a sine up to the cut-off (Shepp and Logan 1974). */
function rampTimesSinc(t: number, cutoff: number): number {
  const a = Math.PI / (2 * cutoff);
  const b = 2 * Math.PI * t;
  const s = sin(b * cutoff);
  // Integral of sin(a w) cos(b w) over [0, cutoff]; either fraction tends to 0 at its pole.
  const plus = Math.abs(a + b) < 1e-9 * a ? 0 : (1 + s) / (2 * (a + b));
  const minus = Math.abs(a - b) < 1e-9 * a ? 0 : (1 - s) / (2 * (a - b));
  return ((4 * cutoff) / Math.PI) * (plus + minus);
}

/**
 * Samples h(0), h(step), ..., h((count - 1) step) of the inverse Fourier transform of |w| times a window that ends at `cutoff` (a share of the
 * highest frequency that the step resolves, 1 / (2 step)). Even in t. Unit 1/m^2 for a step in m.
 * The Hann window (1 + cos(pi w / cutoff)) / 2 is a mean of three shifted ramps.
 */
export function rampKernel(window: WindowKey, step: number, count: number, cutoff: number): Float64Array {
  const limit = cutoff / (2 * step);
  const shift = 1 / (2 * limit);
  return Float64Array.from({ length: count }, (_, k) => {
    const t = k * step;
    switch (window) {
      case 'ram-lak':
        return ramp(t, limit);
      case 'shepp-logan':
        return rampTimesSinc(t, limit);
      case 'hann':
        return 0.5 * ramp(t, limit) + 0.25 * (ramp(t - shift, limit) + ramp(t + shift, limit));
    }
  });
}
