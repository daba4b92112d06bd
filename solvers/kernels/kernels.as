export { multiply, packedBytes } from './product';
export { backwardFour, factorise, factorPanel, forwardFour } from './cholesky';
export { backwardEight, forwardEight } from './solve-eight';
export { addScaled, dot, rowsTimes, timesRows } from './vector';
export { pairSensitivities } from './sensitivity';

/** The first byte that no kernel keeps for itself. */
export function firstFree(): usize {
  return __heap_base;
}
