import type { PatternGeometry } from './patterns';
import { channels, currentPatterns, patternCount } from './patterns';

/**
 * Largest departure of a frame from reciprocity, |I_a . U_b - I_b . U_a| over the largest |I_a . U_b|, for all pairs of patterns whose
 * products the frame holds: drive a measured through b equals drive b measured through a.
 */
export function reciprocityGap(geometry: PatternGeometry, frame: Float64Array): number {
  const P = patternCount(geometry);
  const products = geometry.measurement === 'adjacent-undriven' ? undrivenProducts(geometry, frame) : fullProducts(geometry, frame);
  let largest = 0;
  let gap = 0;
  for (let a = 0; a < P; a++) {
    // The pairs a = b set the scale too: orthogonal patterns of a symmetric body leave zeros elsewhere.
    for (let b = 0; b <= a; b++) {
      const p = products[a * P + b];
      const q = products[b * P + a];
      if (Number.isNaN(p) || Number.isNaN(q)) continue;
      largest = Math.max(largest, Math.abs(p), Math.abs(q));
      gap = Math.max(gap, Math.abs(p - q));
    }
  }
  return largest > 0 ? gap / largest : 0;
}

/** Adjacent drive, adjacent measurement without driven electrodes: channel (k, m) is pattern m's own pair. */
function undrivenProducts(geometry: PatternGeometry, frame: Float64Array): Float64Array {
  const P = patternCount(geometry);
  const products = new Float64Array(P * P).fill(NaN);
  channels(geometry).forEach(({ pattern, plus }, i) => {
    products[plus * P + pattern] = frame[i];
  });
  return products;
}

/** Electrode voltages (measured, or summed up from adjacent differences) against every pattern of currents. */
function fullProducts(geometry: PatternGeometry, frame: Float64Array): Float64Array {
  const L = geometry.electrodes;
  const P = patternCount(geometry);
  const currents = currentPatterns(geometry);
  const products = new Float64Array(P * P);
  const voltages = new Float64Array(L);
  for (let b = 0; b < P; b++) {
    if (geometry.measurement === 'electrode-voltages') voltages.set(frame.subarray(b * L, (b + 1) * L));
    else for (let l = 1; l < L; l++) voltages[l] = voltages[l - 1] - frame[b * L + l - 1];
    for (let a = 0; a < P; a++) {
      let sum = 0;
      for (let l = 0; l < L; l++) sum += currents[a * L + l] * voltages[l];
      products[a * P + b] = sum;
    }
  }
  return products;
}
