/**
 * A number in [0, 1) from a counter and a seed: an integer mix (shift and multiply), the same on every engine.
 */
export function unitHash(counter: number, seed: number): number {
  let h = Math.imul((counter + 0x9e3779b9) | 0, 0x85ebca6b) ^ Math.imul((seed + 0x7f4a7c15) | 0, 0xc2b2ae35);
  h = Math.imul(h ^ (h >>> 16), 0x7feb352d);
  h = Math.imul(h ^ (h >>> 15), 0x846ca68b);
  return ((h ^ (h >>> 16)) >>> 0) / 4294967296;
}
