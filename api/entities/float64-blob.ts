/** Float64 arrays as blobs of little-endian bytes, the same on every host. */
import { littleEndianBytes } from '../../solvers/core/hash';

export function toBlob(values: Float64Array): Buffer {
  const bytes = littleEndianBytes(values);
  // A copy: the bytes may be a view of an array that its owner still writes to.
  return Buffer.from(bytes);
}

/** @throws RangeError when the bytes are no whole number of doubles. */
export function fromBlob(blob: Uint8Array): Float64Array {
  if (blob.byteLength % 8 !== 0) throw new RangeError(`A blob of ${blob.byteLength} bytes holds no whole number of doubles.`);
  const values = new Float64Array(blob.byteLength / 8);
  // Buffers come from a pool at offsets that are no multiple of 8, so the doubles are read one by one.
  const view = new DataView(blob.buffer, blob.byteOffset, blob.byteLength);
  for (let i = 0; i < values.length; i++) values[i] = view.getFloat64(8 * i, true);
  return values;
}
