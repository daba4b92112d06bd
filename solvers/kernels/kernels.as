export { multiply, packedBytes } from './product';
export { backwardFour, factorise, factorPanel, forwardFour } from './cholesky';
export { backwardEight, forwardEight } from './solve-eight';
export { addScaled, dot, rowsTimes, sparseRows, timesRows } from './vector';
export { pairSensitivities } from './sensitivity';
export { sha256Blocks } from './sha256';
export { windowSums } from './smoothing';

/** The first byte that no kernel keeps for itself. */
export function firstFree(): usize {
  return __heap_base;
}
