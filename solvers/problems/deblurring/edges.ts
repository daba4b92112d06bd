import type { EdgeKey } from '../../../shared/domain/geometry/deblurring';

/** Pixel that stands in for pixel k of a row of n: k itself inside; beyond, -1 for none, the picture again, or its mirror image at the edge. */
export function edgeIndex(edge: EdgeKey, k: number, n: number): number {
  if (k >= 0 && k < n) return k;
  if (edge === 'zero') return -1;
  const period = edge === 'periodic' ? n : 2 * n;
  const m = k - period * Math.floor(k / period);
  return m < n ? m : 2 * n - 1 - m;
}
