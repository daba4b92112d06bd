/**
 * Float64 arrays on the wire: base64 of the little-endian bytes, with the shape and the SHA-256 elsewhere. Works in Node
 * and in browsers.
 */
import { z } from 'zod';

export const encodedArraySchema = z.object({
  dtype: z.literal('float64'),
  shape: z.array(z.int().min(0)).max(3),
  /** base64 of little-endian IEEE 754 doubles, last index fastest. */
  data: z.string(),
});
export type EncodedArray = z.infer<typeof encodedArraySchema>;

export function encodeArray(values: Float64Array, shape: readonly number[] = [values.length]): EncodedArray {
  const bytes = new Uint8Array(values.length * 8);
  const view = new DataView(bytes.buffer);
  for (let i = 0; i < values.length; i++) view.setFloat64(8 * i, values[i]!, true);
  let text = '';
  for (let start = 0; start < bytes.length; start += 0x8000) text += String.fromCharCode(...bytes.subarray(start, start + 0x8000));
  return { dtype: 'float64', shape: [...shape], data: btoa(text) };
}

/** @throws RangeError when the length does not fit the shape. */
export function decodeArray(encoded: EncodedArray): Float64Array {
  const text = atob(encoded.data);
  const count = encoded.shape.reduce((product, side) => product * side, 1);
  if (text.length !== count * 8) throw new RangeError(`The array has ${text.length} bytes; its shape ${encoded.shape.join(' x ')} needs ${count * 8}.`);
  const view = new DataView(new ArrayBuffer(text.length));
  for (let i = 0; i < text.length; i++) view.setUint8(i, text.charCodeAt(i));
  const values = new Float64Array(count);
  for (let i = 0; i < count; i++) values[i] = view.getFloat64(8 * i, true);
  return values;
}
