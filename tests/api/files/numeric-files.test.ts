import { deflateSync } from 'node:zlib';
import { PNG } from 'pngjs';
import { describe, expect, it } from 'vitest';
import { readArrayFile, readFramesFile } from '../../../api/services/files/read-upload.ts';
import { readNpy } from '../../../api/services/files/read-npy.ts';
import { readPng } from '../../../api/services/files/read-png.ts';
import { withComments, writeNpy } from '../../../api/services/files/write-files.ts';
import { AppError } from '../../../shared/errors.ts';

const utf8 = (text: string): Uint8Array => new TextEncoder().encode(text);
function refusal(work: () => unknown): AppError {
  try {
    work();
  } catch (error) {
    if (error instanceof AppError) return error;
    throw error;
  }
  throw new Error('the file was taken');
}

/** Bytes of a .npy file, written here from the format's description (numpy.lib.format), not by our writer. */
function npyBytes(header: string, data: Uint8Array, major = 1): Uint8Array {
  const text = utf8(`${header}\n`);
  const head = major === 1 ? [text.length & 255, text.length >> 8] : [text.length & 255, text.length >> 8, 0, 0];
  return Uint8Array.from([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, major, 0, ...head, ...text, ...data]);
}
const floats = (values: number[], little = true): Uint8Array => {
  const view = new DataView(new ArrayBuffer(values.length * 8));
  values.forEach((value, i) => view.setFloat64(8 * i, value, little));
  return new Uint8Array(view.buffer);
};

describe('reading .npy', () => {
  const expected = [1, 2, 3, 4, 5, 6];
  it('reads little and big endian doubles, C and Fortran order, versions 1 and 2', () => {
    const c = "{'descr': '<f8', 'fortran_order': False, 'shape': (2, 3), }";
    expect([...readNpy(npyBytes(c, floats(expected)), 1024).values]).toEqual(expected);
    expect([...readNpy(npyBytes(c, floats(expected), 2), 1024).values]).toEqual(expected);
    expect([...readNpy(npyBytes(c.replace('<', '>'), floats(expected, false)), 1024).values]).toEqual(expected);
    // Fortran order stores columns one after another: 1 4, 2 5, 3 6.
    const read = readNpy(npyBytes(c.replace('False', 'True'), floats([1, 4, 2, 5, 3, 6])), 1024);
    expect([...read.values]).toEqual(expected);
    expect([read.rows, read.cols]).toEqual([2, 3]);
  });
  it.each([
    ['|u1', new Uint8Array([0, 255, 3, 4]), [0, 255, 3, 4]],
    ['|i1', new Uint8Array([0, 255, 3, 4]), [0, -1, 3, 4]],
    ['|b1', new Uint8Array([0, 1, 1, 0]), [0, 1, 1, 0]],
    ['<i2', new Uint8Array([1, 0, 255, 255, 2, 1, 0, 128]), [1, -1, 258, -32768]],
    ['>u2', new Uint8Array([0, 1, 255, 255, 2, 1, 0, 128]), [1, 65535, 513, 128]],
    ['<f4', new Uint8Array(new Float32Array([1.5, -2, 0.25, 8]).buffer), [1.5, -2, 0.25, 8]],
    ['<i8', new Uint8Array(new BigInt64Array([1n, -2n, 3n, 4n]).buffer), [1, -2, 3, 4]],
  ])('reads %s', (descr, data, values) => {
    expect([...readNpy(npyBytes(`{'descr': '${descr}', 'fortran_order': False, 'shape': (2, 2)}`, data), 1024).values]).toEqual(values);
  });
  it.each([
    ['code in the header', npyBytes("{'descr': __import__('os').system('true'), 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, 3, 4]))],
    ['pickled objects', npyBytes("{'descr': '|O', 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, 3, 4]))],
    ['structured records', npyBytes("{'descr': [('a', '<f8')], 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, 3, 4]))],
    ['complex numbers', npyBytes("{'descr': '<c16', 'fortran_order': False, 'shape': (2, 2)}", new Uint8Array(64))],
    ['one dimension', npyBytes("{'descr': '<f8', 'fortran_order': False, 'shape': (4,)}", floats([1, 2, 3, 4]))],
    ['a huge shape', npyBytes("{'descr': '<f8', 'fortran_order': False, 'shape': (999999999, 999999999)}", floats([1]))],
    ['too few bytes', npyBytes("{'descr': '<f8', 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, 3]))],
    ['bytes behind the data', npyBytes("{'descr': '<f8', 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, 3, 4, 5]))],
    ['a key twice', npyBytes("{'descr': '<f8', 'descr': '<f8', 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, 3, 4]))],
    ['a header length past the end', Uint8Array.from([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, 255, 255, 1])],
    ['version 9', npyBytes("{'descr': '<f8', 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, 3, 4]), 9)],
    ['only the magic', Uint8Array.from([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59])],
  ])('refuses %s', (_what, bytes) => {
    expect(refusal(() => readNpy(bytes, 1024)).code).toBe('file-rejected');
  });
  it('names the place of a value that is not finite', () => {
    const error = refusal(() => readNpy(npyBytes("{'descr': '<f8', 'fortran_order': False, 'shape': (2, 2)}", floats([1, 2, NaN, 4])), 1024));
    expect(error.issues).toEqual([expect.objectContaining({ row: 2, column: 1 })]);
  });
  it('reads back what the writer wrote', () => {
    const values = Float64Array.from([1, -0, 1e-300, Math.PI, 5, 6]);
    const bytes = writeNpy(values, [3, 2]);
    // The data of a .npy file begin at a multiple of 64 (numpy.lib.format).
    expect((bytes.length - 48) % 64).toBe(0);
    expect(readNpy(bytes, 1024)).toMatchObject({ rows: 3, cols: 2, values });
  });
});

describe('reading PNG', () => {
  /** Chunks written here after the PNG specification; the CRC is pngjs's own check, so pngjs makes the good files. */
  function png(options: { width: number; height: number; colorType: 0 | 2 | 4 | 6; bitDepth?: 8 | 16; pixels: (x: number, y: number) => [number, number, number, number] }): Uint8Array {
    const image = new PNG({ width: options.width, height: options.height });
    for (let y = 0; y < options.height; y++)
      for (let x = 0; x < options.width; x++) options.pixels(x, y).forEach((v, k) => (image.data[4 * (y * options.width + x) + k] = v));
    return new Uint8Array(PNG.sync.write(image, { colorType: options.colorType, inputHasAlpha: true }));
  }
  it('keeps grey values, weighs colours and lays transparent pixels over black', () => {
    const grey = readPng(png({ width: 3, height: 2, colorType: 0, pixels: (x, y) => [10 * x + y, 10 * x + y, 10 * x + y, 255] }), 1024);
    expect([grey.rows, grey.cols]).toEqual([2, 3]);
    expect([...grey.values]).toEqual([0, 10, 20, 1, 11, 21].map((v) => v / 255));
    const colour = readPng(png({ width: 2, height: 2, colorType: 6, pixels: (x, y) => (y === 0 ? [x === 0 ? 255 : 0, x === 1 ? 255 : 0, 0, 255] : [255, 255, 255, x === 0 ? 0 : 51]) }), 1024);
    // ITU-R BT.709 luma weights; 51 / 255 = 0.2. Rounding of two products only.
    expect(colour.values[0]).toBeCloseTo(0.2126, 12);
    expect(colour.values[1]).toBeCloseTo(0.7152, 12);
    expect(colour.values[2]).toBe(0);
    expect(colour.values[3]).toBeCloseTo(0.2, 12);
  });
  it('keeps all 16 bits', () => {
    const crcTable = Array.from({ length: 256 }, (_, n) => {
      let c = n;
      for (let k = 0; k < 8; k++) c = c & 1 ? 0xedb88320 ^ (c >>> 1) : c >>> 1;
      return c >>> 0;
    });
    const crc = (bytes: Uint8Array): number => (bytes.reduce((c, b) => crcTable[(c ^ b) & 255]! ^ (c >>> 8), 0xffffffff) ^ 0xffffffff) >>> 0;
    const chunk = (type: string, data: Uint8Array): Uint8Array => {
      const out = new Uint8Array(12 + data.length);
      const view = new DataView(out.buffer);
      view.setUint32(0, data.length);
      out.set(utf8(type), 4);
      out.set(data, 8);
      view.setUint32(8 + data.length, crc(out.subarray(4, 8 + data.length)));
      return out;
    };
    const rows = Uint8Array.from([0, 0x12, 0x34, 0xff, 0xff, 0, 0x00, 0x01, 0x80, 0x00]);
    const bytes = Uint8Array.from([
      0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a,
      ...chunk('IHDR', Uint8Array.from([0, 0, 0, 2, 0, 0, 0, 2, 16, 0, 0, 0, 0])), ...chunk('IDAT', deflateSync(rows)), ...chunk('IEND', new Uint8Array()),
    ]);
    expect([...readPng(bytes, 1024).values]).toEqual([0x1234 / 65535, 1, 1 / 65535, 0x8000 / 65535]);
  });
  const good = png({ width: 8, height: 8, colorType: 6, pixels: (x, y) => [x * y, x, y, 255] });
  const patched = (at: number, value: number[]): Uint8Array => Uint8Array.from(good, (byte, i) => value[i - at] ?? byte);
  it.each([
    ['a size above the limit', patched(16, [0, 1, 0, 0]), /65536 x 8 pixels/],
    ['a size that its data do not fill', patched(16, [0, 0, 0, 64]), /bytes of pixels|damaged/],
    ['a size smaller than its data', patched(20, [0, 0, 0, 2]), /more data|bytes of pixels|damaged/],
    ['a file cut off in the middle', good.subarray(0, good.length - 20), /cut off/],
    ['a bit flipped in the pixels', patched(50, [good[50]! ^ 255, good[51]! ^ 255]), /damaged|bytes of pixels/],
    ['a colour type that does not exist', patched(25, [5]), /no PNG/],
    ['nothing but the signature', good.subarray(0, 8), /cut off/],
    ['text', utf8('hello'), /no PNG/],
  ])('refuses %s', (_what, bytes, message) => {
    const error = refusal(() => readPng(bytes, 1024));
    expect(error.code).toBe('file-rejected');
    expect(error.detail).toMatch(message);
  });
  it('refuses a decompression bomb without unpacking it', () => {
    // 60 MB of zeros in 60 kB: the header says 8 x 8.
    const bomb = deflateSync(new Uint8Array(60_000_000));
    const end = good.subarray(good.length - 12);
    const idat = new Uint8Array(12 + bomb.length);
    new DataView(idat.buffer).setUint32(0, bomb.length);
    idat.set(utf8('IDAT'), 4);
    idat.set(bomb, 8);
    const before = process.memoryUsage().arrayBuffers;
    const error = refusal(() => readPng(Uint8Array.from([...good.subarray(0, 33), ...idat, ...end]), 1024));
    expect(error.detail).toMatch(/more data/);
    // Far under the 60 MB that the bomb would take; the buffers here are under 1 MB.
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(20_000_000);
  });
});

describe('reading CSV', () => {
  it('reads arrays with comments, a byte order mark, semicolons and either line end', () => {
    const read = readArrayFile('a.csv', utf8('\uFEFF# S/m\r\n1;2.5e-3\r\n-3;.5\r\n'));
    expect(read).toMatchObject({ format: 'csv', rows: 2, cols: 2 });
    expect([...read.values]).toEqual([1, 0.0025, -3, 0.5]);
  });
  it.each([
    ['text', '1,2,3\n4,volt,6\n7,8,9\n', 2, 2, /Row 2, column 2: 'volt' is not a number/],
    ['NaN', '1,2,3\n4,5,NaN\n', 2, 3, /Row 2, column 3: NaN is not a finite number/],
    ['an empty cell', '1,2,3\n,5,6\n', 2, 1, /Row 2, column 1: the cell is empty/],
    ['a short row', '1,2,3\n4,5\n', 2, 3, /Row 2 has 2 values, expected 3/],
    ['a long row', '1,2,3\n4,5,6,7\n', 2, 4, /Row 2 has 4 values, expected 3/],
    ['hexadecimal', '1,2,3\n0x10,5,6\n', 2, 1, /'0x10' is not a number/],
    ['overflow', '1,2,3\n4,5,1e999\n', 2, 3, /too large/],
    ['a header', 'a,b,c\n4,5,6\n', 1, 1, /'a' is not a number/],
  ])('names row and column of %s', (_what, text, row, column, message) => {
    const error = refusal(() => readFramesFile(utf8(text), 3));
    expect(error.code).toBe('file-rejected');
    expect(error.issues?.[0]).toMatchObject({ row, column });
    expect(error.detail).toMatch(message);
    expect(error.extra).toMatchObject({ row, column });
  });
  it('shows the neighbours of the bad cell as they stand in the file', () => {
    const rows = Array.from({ length: 7 }, (_, i) => Array.from({ length: 7 }, (_, j) => String(10 * i + j)));
    rows[3]![3] = 'x';
    const error = refusal(() => readFramesFile(utf8(rows.map((r) => r.join(',')).join('\n')), 7));
    expect(error.extra?.['neighbours']).toEqual({
      fromRow: 2, fromColumn: 2, cells: [['11', '12', '13', '14', '15'], ['21', '22', '23', '24', '25'], ['31', '32', 'x', '34', '35'], ['41', '42', '43', '44', '45'], ['51', '52', '53', '54', '55']],
    });
  });
  it.each([
    ['binary', Uint8Array.from([49, 44, 0, 10])],
    ['another encoding', Uint8Array.from([49, 44, 0xe9, 10])],
    ['an open quotation mark', utf8('1,"2\n3,4\n')],
    ['one endless line', utf8('1,'.repeat(500_000))],
    ['nothing', new Uint8Array()],
    ['comments only', utf8('# a\n# b\n')],
    ['one frame', utf8('1,2\n')],
  ])('refuses %s', (_what, bytes) => {
    expect(refusal(() => readFramesFile(bytes, 2)).code).toBe('file-rejected');
  });
  it('refuses more frames than the limit and keeps no more of them than that', () => {
    expect(refusal(() => readFramesFile(utf8('1,2\n'.repeat(10_050)), 2)).detail).toMatch(/at most 10000/);
  });
  it('reads numbers behind the comments of a download', () => {
    const text = withComments(['not for diagnosis\nno safety case'], '0.30000000000000004,1\r\n2,3\r\n');
    expect(text.split('\r\n').slice(0, 2)).toEqual(['# not for diagnosis', '# no safety case']);
    expect([...readFramesFile(utf8(text), 2).values]).toEqual([0.1 + 0.2, 1, 2, 3]);
  });
});
