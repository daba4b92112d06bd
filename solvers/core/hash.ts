import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js';
import { sha256 } from './sha256';

const littleEndianHost = new Uint8Array(new Uint32Array([1]).buffer)[0] === 1;

/** Bytes of the values as little-endian IEEE 754 doubles, on every host. A view where the host is little-endian: do not write to it. */
export function littleEndianBytes(values: Float64Array): Uint8Array {
  if (littleEndianHost) return new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
  const bytes = new Uint8Array(values.length * 8);
  const view = new DataView(bytes.buffer);
  for (let i = 0; i < values.length; i++) view.setFloat64(8 * i, values[i], true);
  return bytes;
}

/** SHA-256 as 64 lower-case hexadecimal digits; of an array, over its little-endian bytes. */
export function sha256Hex(data: Uint8Array | Float64Array | string): string {
  return bytesToHex(sha256Bytes(data));
}

/** SHA-256 as 32 bytes. */
export function sha256Bytes(data: Uint8Array | Float64Array | string): Uint8Array {
  if (typeof data === 'string') return sha256(utf8ToBytes(data));
  return sha256(data instanceof Float64Array ? littleEndianBytes(data) : data);
}

/**
 * JSON with keys sorted by code unit, no spaces; undefined members are left out. Equal content gives equal text.
 * @throws RangeError for a number that is not finite, TypeError for what JSON cannot hold.
 */
export function canonicalJson(value: unknown): string {
  if (value === null || typeof value === 'boolean' || typeof value === 'string') return JSON.stringify(value);
  if (typeof value === 'number') {
    if (!Number.isFinite(value)) throw new RangeError(`Content with the number ${value} cannot be hashed.`);
    return JSON.stringify(value === 0 ? 0 : value);
  }
  if (Array.isArray(value)) return `[${value.map((item) => canonicalJson(item === undefined ? null : item)).join(',')}]`;
  if (typeof value === 'object') {
    const members: string[] = [];
    for (const [key, member] of Object.entries(value).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0)))
      if (member !== undefined) members.push(`${JSON.stringify(key)}:${canonicalJson(member)}`);
    return `{${members.join(',')}}`;
  }
  throw new TypeError(`Content of type ${typeof value} cannot be hashed.`);
}

/** SHA-256 over the canonical JSON. */
export function contentHash(value: unknown): string {
  return sha256Hex(canonicalJson(value));
}
