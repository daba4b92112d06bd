/** Hands a file made in the browser to the reader. */
export function downloadFile(name: string, content: BlobPart, type: string): void {
  const url = URL.createObjectURL(new Blob([content], { type }));
  const link = document.createElement('a');
  link.href = url;
  link.download = name;
  document.body.append(link);
  link.click();
  link.remove();
  // The browser reads the address after the click has been handled.
  window.setTimeout(() => URL.revokeObjectURL(url), 10_000);
}

/** A NumPy array file, format 1.0: little-endian Float64, row-major. */
export function npyBytes(values: Float64Array, shape: readonly number[]): ArrayBuffer {
  const header = `{'descr': '<f8', 'fortran_order': False, 'shape': (${shape.join(', ')}${shape.length === 1 ? ',' : ''}), }`;
  const prefix = 10;
  // The header ends in a newline and the data start at a multiple of 64 bytes.
  const padded = header.padEnd(Math.ceil((prefix + header.length + 1) / 64) * 64 - prefix - 1, ' ') + '\n';
  const buffer = new ArrayBuffer(prefix + padded.length + 8 * values.length);
  const view = new DataView(buffer);
  [0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0].forEach((byte, i) => view.setUint8(i, byte));
  view.setUint16(8, padded.length, true);
  for (let i = 0; i < padded.length; i++) view.setUint8(prefix + i, padded.charCodeAt(i));
  values.forEach((v, i) => view.setFloat64(prefix + padded.length + 8 * i, v, true));
  return buffer;
}
