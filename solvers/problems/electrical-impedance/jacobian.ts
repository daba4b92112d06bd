import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { matmulTransposed } from '../../linear-algebra/matrix-product';
import { channels, currentPatterns, frameSize, patternCount } from './patterns';

/**
 * Currents of the patterns as sums of unit currents through adjacent pairs (into electrode j, out of the next):
 * `patternCount` x L, row-major. The last pair is minus the sum of the others, so a pattern other than an adjacent one does
 * without it.
 */
export function pairWeights(geometry: EitGeometry): Float64Array {
  const L = geometry.electrodes;
  const patterns = patternCount(geometry);
  const weights = new Float64Array(patterns * L);
  if (geometry.pattern === 'adjacent') {
    for (let k = 0; k < patterns; k++) weights[k * L + k] = geometry.current;
    return weights;
  }
  const currents = currentPatterns(geometry);
  for (let k = 0; k < patterns; k++) {
    let sum = 0;
    for (let l = 0; l < L - 1; l++) {
      sum += currents[k * L + l];
      weights[k * L + l] = sum;
    }
  }
  return weights;
}

/** What electrode l reads against the mean of all, as sums of differences of adjacent voltages: L x L, row-major. */
function voltageWeights(L: number): Float64Array {
  const weights = new Float64Array(L * L);
  for (let l = 0; l < L; l++) for (let j = 0; j < L - 1; j++) weights[l * L + j] = (l <= j ? 1 : 0) - (j + 1) / L;
  return weights;
}

/**
 * Derivative of a frame, dataSize x cells, from the sensitivities of pairs of adjacent unit currents.
 * @param pairs cells x L x L, integrals of grad u_j . grad u_k over each cell
 */
export function frameJacobian(geometry: EitGeometry, pairs: Float64Array, cells: number): Float64Array {
  const L = geometry.electrodes;
  const dataSize = frameSize(geometry);
  const values = new Float64Array(dataSize * cells);
  const list = channels(geometry);
  if (geometry.pattern === 'adjacent' && geometry.measurement !== 'electrode-voltages') {
    // A channel is one pair of fields.
    for (let c = 0; c < cells; c++) {
      const base = c * L * L;
      for (let i = 0; i < dataSize; i++) values[i * cells + c] = -geometry.current * pairs[base + list[i].pattern * L + list[i].plus];
    }
    return values;
  }
  const patterns = patternCount(geometry);
  // T[pattern, cell, k] = sum_j weights[pattern, j] pairs[cell, k, j]: the pairs are symmetric.
  const driven = matmulTransposed(pairWeights(geometry), pairs, patterns, L, cells * L);
  if (geometry.measurement === 'adjacent-undriven') {
    // A channel is one pair of electrodes, another set of them for each pattern.
    for (let i = 0; i < dataSize; i++) {
      const { pattern, plus } = list[i];
      for (let c = 0; c < cells; c++) values[i * cells + c] = -driven[(pattern * cells + c) * L + plus];
    }
    return values;
  }
  const perPattern = dataSize / patterns;
  const measurement = measurementWeights(geometry, perPattern);
  for (let i = 0; i < measurement.length; i++) measurement[i] = -measurement[i];
  for (let p = 0; p < patterns; p++)
    matmulTransposed(
      measurement, driven.subarray(p * cells * L, (p + 1) * cells * L), perPattern, L, cells,
      values.subarray(p * perPattern * cells, (p + 1) * perPattern * cells),
    );
  return values;
}

/** The measurements of one pattern (the same for all where every pair is measured) as sums of adjacent differences. */
function measurementWeights(geometry: EitGeometry, perPattern: number): Float64Array {
  const L = geometry.electrodes;
  if (geometry.measurement === 'electrode-voltages') return voltageWeights(L);
  const weights = new Float64Array(perPattern * L);
  const list = channels(geometry);
  for (let i = 0; i < perPattern; i++) weights[i * L + list[i].plus] = 1;
  return weights;
}
