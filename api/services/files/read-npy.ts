import { AppError } from '../../../shared/errors.ts';
import { largestNumber, type NumericTable } from './numeric-table.ts';

const rejected = (detail: string): AppError => new AppError('file-rejected', detail, [{ path: ['file'], message: detail }]);

type Read = (view: DataView, offset: number, little: boolean) => number;
/** By kind and size of the type descriptor. 64-bit integers are read where a double holds them exactly. */
const readers: Record<string, { size: number; read: Read }> = {
  f4: { size: 4, read: (v, o, l) => v.getFloat32(o, l) },
  f8: { size: 8, read: (v, o, l) => v.getFloat64(o, l) },
  i1: { size: 1, read: (v, o) => v.getInt8(o) },
  i2: { size: 2, read: (v, o, l) => v.getInt16(o, l) },
  i4: { size: 4, read: (v, o, l) => v.getInt32(o, l) },
  i8: { size: 8, read: (v, o, l) => exactInteger(v.getBigInt64(o, l)) },
  u1: { size: 1, read: (v, o) => v.getUint8(o) },
  u2: { size: 2, read: (v, o, l) => v.getUint16(o, l) },
  u4: { size: 4, read: (v, o, l) => v.getUint32(o, l) },
  u8: { size: 8, read: (v, o, l) => exactInteger(v.getBigUint64(o, l)) },
  b1: { size: 1, read: (v, o) => truthValue(v.getUint8(o)) },
};

function exactInteger(value: bigint): number {
  const number = Number(value);
  if (!Number.isSafeInteger(number)) throw rejected(`The integer ${value} is too large for a double. Save the array as float64.`);
  return number;
}
function truthValue(byte: number): number {
  if (byte > 1) throw rejected(`A truth value is ${byte}, expected 0 or 1.`);
  return byte;
}

/**
 * Reads a two-dimensional numeric array of NumPy's .npy format, versions 1.0 and 2.0 (numpy.lib.format). The header is a
 * literal that is parsed, never evaluated; pickled objects are refused.
 * @throws AppError 'file-rejected'.
 */
export function readNpy(bytes: Uint8Array, maxSide: number): NumericTable {
  const magic = [0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59];
  if (bytes.length < 10 || magic.some((byte, i) => bytes[i] !== byte)) throw rejected('This is no .npy file: its first bytes are not those of the format.');
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const major = view.getUint8(6);
  const minor = view.getUint8(7);
  if ((major !== 1 && major !== 2) || minor !== 0) throw rejected(`Version ${major}.${minor} of the .npy format is not read. Save with numpy.save (version 1.0 or 2.0).`);
  const start = major === 1 ? 10 : 12;
  if (bytes.length < start) throw rejected('The file ends inside its header.');
  const headerLength = major === 1 ? view.getUint16(8, true) : view.getUint32(8, true);
  if (headerLength > 10_000) throw rejected(`The header has ${headerLength} bytes; at most 10000 are read.`);
  if (start + headerLength > bytes.length) throw rejected('The file ends inside its header.');
  const header = parseHeader(new TextDecoder('latin1').decode(bytes.subarray(start, start + headerLength)));
  const { descr, fortran, shape } = header;
  const type = /^([<>|=])([fiub])([1248])$/.exec(descr);
  const reader = type ? readers[`${type[2]}${type[3]}`] : undefined;
  if (!type || !reader || (type[1] === '|' && reader.size > 1) || type[1] === '=')
    throw rejected(`The element type '${descr}' is not read. Save the array as float64, float32, an integer type or bool.`);
  if (shape.length !== 2) throw rejected(`The array has ${shape.length} dimensions, expected 2 (rows, columns).`);
  const [rows, cols] = shape as [number, number];
  if (rows < 2 || cols < 2 || rows > maxSide || cols > maxSide)
    throw rejected(`The array is ${rows} x ${cols}; each side must have 2 to ${maxSide} values.`);
  const expected = rows * cols * reader.size;
  const data = start + headerLength;
  const found = bytes.length - data;
  if (found !== expected) throw rejected(`The file holds ${found} bytes of data; a ${rows} x ${cols} array of '${descr}' needs ${expected}.`);
  const little = type[1] !== '>';
  const values = new Float64Array(rows * cols);
  for (let row = 0; row < rows; row++)
    for (let col = 0; col < cols; col++) {
      const position = fortran ? col * rows + row : row * cols + col;
      const value = reader.read(view, data + position * reader.size, little);
      if (!(Math.abs(value) <= largestNumber)) throw badValue(row + 1, col + 1, value);
      values[row * cols + col] = value;
    }
  return { rows, cols, values };
}

function badValue(row: number, column: number, value: number): AppError {
  const message = `Row ${row}, column ${column}: ${value} ${Number.isFinite(value) ? `is too large, the limit is ${largestNumber}` : 'is not a finite number'}.`;
  return new AppError('file-rejected', message, [{ path: ['file'], message, row, column }], { extra: { row, column } });
}

/** A Python dictionary literal with exactly the keys descr, fortran_order and shape, in any order. */
function parseHeader(text: string): { descr: string; fortran: boolean; shape: number[] } {
  const bad = (): AppError => rejected('The header of the .npy file is not the dictionary of the format.');
  const body = /^\{\s*([\s\S]*?)\s*,?\s*\}\s*$/.exec(text)?.[1];
  if (body === undefined) throw bad();
  const entry = /\s*(?:'(\w+)'|"(\w+)")\s*:\s*(?:'([^'\\]*)'|"([^"\\]*)"|(True|False)|\(\s*((?:\d{1,9}L?\s*,?\s*){0,8})\))\s*(?:,|$)/y;
  const found = new Map<string, string | boolean | number[]>();
  while (entry.lastIndex < body.length) {
    const match = entry.exec(body);
    if (!match) throw bad();
    const key = match[1] ?? match[2] ?? '';
    if (found.has(key)) throw bad();
    if (match[5] !== undefined) found.set(key, match[5] === 'True');
    else if (match[6] !== undefined) found.set(key, (match[6].match(/\d+/g) ?? []).map(Number));
    else found.set(key, match[3] ?? match[4] ?? '');
  }
  const descr = found.get('descr');
  const fortran = found.get('fortran_order');
  const shape = found.get('shape');
  if (found.size !== 3 || typeof descr !== 'string' || typeof fortran !== 'boolean' || !Array.isArray(shape)) {
    if (Array.isArray(descr) || /'descr'\s*:\s*\[/.test(body)) throw rejected('Structured arrays are not read. Save one two-dimensional numeric array.');
    throw bad();
  }
  return { descr, fortran, shape };
}
