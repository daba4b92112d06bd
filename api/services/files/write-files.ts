import { littleEndianBytes } from '../../../solvers/core/hash';

/** An array as .npy version 1.0, little-endian float64, C order (numpy.lib.format). */
export function writeNpy(values: Float64Array, shape: readonly number[]): Uint8Array {
  const count = shape.reduce((product, side) => product * side, 1);
  if (count !== values.length) throw new RangeError(`The array has ${values.length} values; its shape ${shape.join(' x ')} needs ${count}.`);
  const tuple = shape.length === 1 ? `(${shape[0]},)` : `(${shape.join(', ')})`;
  const literal = `{'descr': '<f8', 'fortran_order': False, 'shape': ${tuple}, }`;
  // The data begin at a multiple of 64 bytes; the header ends with a line feed.
  const padding = (64 - ((10 + literal.length + 1) % 64)) % 64;
  const header = `${literal}${' '.repeat(padding)}\n`;
  const bytes = new Uint8Array(10 + header.length + values.length * 8);
  bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, header.length & 255, header.length >> 8]);
  for (let i = 0; i < header.length; i++) bytes[10 + i] = header.charCodeAt(i);
  bytes.set(littleEndianBytes(values), 10 + header.length);
  return bytes;
}

/** CSV with comment lines in front; the readers here and `comments='#'` elsewhere skip them. */
export function withComments(comments: readonly string[], csv: string): string {
  return [...comments.flatMap((comment) => comment.split('\n')).map((line) => `# ${line}`.trimEnd()), csv].join('\r\n');
}
