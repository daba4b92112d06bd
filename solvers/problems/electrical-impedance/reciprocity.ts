import type { PatternGeometry } from './patterns';
import { channels, currentPatterns, frameSize, patternCount } from './patterns';

/**
 * Largest departure of a frame from reciprocity, |I_a . U_b - I_b . U_a| over the largest |I_a . U_b|, for all pairs of patterns whose
 * products the frame holds: drive a measured through b equals drive b measured through a.
 */
export function reciprocityGap(geometry: PatternGeometry, frame: Float64Array): number {
  const P = patternCount(geometry);
  const products = productsOf(geometry, frame);
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

/** Whether a frame holds two voltages that must be equal, other than of one pattern with itself. */
export function hasReciprocalPairs(geometry: PatternGeometry): boolean {
  const P = patternCount(geometry);
  const products = productsOf(geometry, new Float64Array(frameSize(geometry)));
  for (let a = 1; a < P; a++) for (let b = 0; b < a; b++) if (!Number.isNaN(products[a * P + b]) && !Number.isNaN(products[b * P + a])) return true;
  return false;
}

/** I_a . U_b at a P + b; NaN where the frame does not hold it. */
function productsOf(geometry: PatternGeometry, frame: Float64Array): Float64Array {
  if (geometry.measurement !== 'adjacent-undriven') return fullProducts(geometry, frame);
  return geometry.pattern === 'adjacent' ? undrivenProducts(geometry, frame) : arcProducts(geometry, frame);
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

/**
 * Any drive, adjacent measurement without driven electrodes: along each arc of undriven electrodes the voltages are known up to a
 * constant, so the product is known where the currents of the other pattern sum to zero on every arc.
 */
function arcProducts(geometry: PatternGeometry, frame: Float64Array): Float64Array {
  const L = geometry.electrodes;
  const P = patternCount(geometry);
  const currents = currentPatterns(geometry);
  const products = new Float64Array(P * P).fill(NaN);
  const drops = new Float64Array(P * L).fill(NaN);
  channels(geometry).forEach(({ pattern, plus }, i) => {
    drops[pattern * L + plus] = frame[i];
  });
  const voltages = new Float64Array(L);
  const arcOf = new Int32Array(L);
  for (let b = 0; b < P; b++) {
    arcOf.fill(-1);
    let arcs = 0;
    for (let start = 0; start < L; start++) {
      // An arc starts where a pair is measured and the pair before it is not.
      if (Number.isNaN(drops[b * L + start]) || !Number.isNaN(drops[b * L + ((start + L - 1) % L)])) continue;
      let l = start;
      voltages[l] = 0;
      arcOf[l] = arcs;
      while (!Number.isNaN(drops[b * L + l])) {
        const next = (l + 1) % L;
        voltages[next] = voltages[l] - drops[b * L + l];
        arcOf[next] = arcs;
        l = next;
      }
      arcs++;
    }
    const sums = new Float64Array(arcs);
    for (let a = 0; a < P; a++) {
      sums.fill(0);
      let known = true;
      let largest = 0;
      let product = 0;
      for (let l = 0; l < L; l++) {
        const current = currents[a * L + l];
        if (current === 0) continue;
        if (arcOf[l] < 0) known = false;
        else sums[arcOf[l]] += current;
        largest = Math.max(largest, Math.abs(current));
        product += current * voltages[l];
      }
      for (const sum of sums) if (Math.abs(sum) > 1e-12 * largest) known = false;
      if (known) products[a * P + b] = product;
    }
  }
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
