import type { AxisKey } from '../../../shared/domain/axes';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { contentHash } from '../../core/hash';
import { deriveKey, RandomStream } from '../../core/random';
import { layoutSize } from '../../problems/problem-family';
import { dataLayout } from '../../problems/registry';

/**
 * Indices of the data that a level of an axis keeps, ascending; null where it keeps all. Lost views are those at the end of the arc; lost channels
 * come in one random order, so that a higher level loses those of a lower one too. At least one view, or two values, are kept.
 */
export function keptRows(definition: PhantomDefinition, axis: AxisKey, level: number): Int32Array | null {
  if (axis === 'missing-angles') {
    if (definition.family !== 'x-ray') throw new RangeError('Only X-ray data have views that can be missing.');
    const { valueNames } = dataLayout(definition);
    const views = Math.max(1, valueNames.length - Math.round(level * valueNames.length));
    let count = 0;
    for (let v = 0; v < views; v++) count += valueNames[v].length;
    return Int32Array.from({ length: count }, (_, i) => i);
  }
  if (axis === 'missing-channels') {
    const size = layoutSize(dataLayout(definition));
    const order = Int32Array.from({ length: size }, (_, i) => i);
    const random = new RandomStream(deriveKey('hadamark channels 1', contentHash(definition)));
    for (let i = size - 1; i > 0; i--) {
      const j = random.nextIndex(i + 1);
      const other = order[j];
      order[j] = order[i];
      order[i] = other;
    }
    const kept = Math.max(Math.min(2, size), size - Math.round(level * size));
    return order.slice(0, kept).sort();
  }
  return null;
}
