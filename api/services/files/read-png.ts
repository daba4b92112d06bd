import { inflateSync } from 'node:zlib';
import { PNG } from 'pngjs';
import { AppError } from '../../../shared/errors.ts';
import type { NumericTable } from './numeric-table.ts';

const rejected = (detail: string, cause?: unknown): AppError =>
  new AppError('file-rejected', detail, [{ path: ['file'], message: detail }], { cause });

const signature = [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a];
/** Samples a pixel by colour type, and the bit depths each allows (PNG specification, table 11.1). */
const colourTypes: Record<number, { samples: number; depths: readonly number[] }> = {
  0: { samples: 1, depths: [1, 2, 4, 8, 16] },
  2: { samples: 3, depths: [8, 16] },
  3: { samples: 1, depths: [1, 2, 4, 8] },
  4: { samples: 2, depths: [8, 16] },
  6: { samples: 4, depths: [8, 16] },
};

interface Header {
  readonly width: number;
  readonly height: number;
  readonly depth: number;
  readonly colourType: number;
  readonly interlaced: boolean;
}

/**
 * Reads a PNG as grey values 0 to 1, top row first: the stored sample over its largest value (no gamma is undone); colours
 * by the luma weights 0.2126, 0.7152, 0.0722 (ITU-R BT.709); transparent pixels lie over black.
 * The size is checked before anything is decompressed, and no more is decompressed than that size needs.
 * @throws AppError 'file-rejected'.
 */
export function readPng(bytes: Uint8Array, maxSide: number): NumericTable {
  const { header, compressed } = readChunks(bytes, maxSide);
  requirePixels(header, compressed);
  let image: { width: number; height: number; data: Buffer };
  try {
    image = PNG.sync.read(Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength), { skipRescale: true, checkCRC: true });
  } catch (cause) {
    throw rejected('The PNG is damaged: its pixels cannot be decoded.', cause);
  }
  const largest = header.colourType === 3 ? 255 : 2 ** header.depth - 1;
  // pngjs gives 16-bit samples in a Uint16Array although its types say Buffer.
  const samples: ArrayLike<number> = image.data;
  const values = new Float64Array(header.width * header.height);
  for (let i = 0; i < values.length; i++) {
    const red = samples[4 * i]!;
    const green = samples[4 * i + 1]!;
    const blue = samples[4 * i + 2]!;
    const alpha = samples[4 * i + 3]!;
    // Grey pixels keep their value to the last bit: the weights do not sum to 1 exactly.
    const luma = red === green && green === blue ? red : 0.2126 * red + 0.7152 * green + 0.0722 * blue;
    const opaque = alpha >= largest ? 1 : alpha / largest;
    values[i] = (luma / largest) * opaque;
  }
  return { rows: header.height, cols: header.width, values };
}

function readChunks(bytes: Uint8Array, maxSide: number): { header: Header; compressed: Uint8Array[] } {
  if (bytes.length < 8 || signature.some((byte, i) => bytes[i] !== byte)) throw rejected('This is no PNG file: its first bytes are not those of the format.');
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  let header: Header | undefined;
  const compressed: Uint8Array[] = [];
  let offset = 8;
  for (;;) {
    if (offset + 12 > bytes.length) throw rejected('The PNG is cut off: its end chunk is missing.');
    const length = view.getUint32(offset);
    if (offset + 12 + length > bytes.length) throw rejected('The PNG is cut off inside a chunk.');
    const type = String.fromCharCode(...bytes.subarray(offset + 4, offset + 8));
    if (!header) {
      if (type !== 'IHDR' || length !== 13) throw rejected('The PNG does not begin with its header chunk.');
      header = readHeader(view, offset + 8, maxSide);
    } else if (type === 'IHDR') throw rejected('The PNG has two header chunks.');
    if (type === 'IDAT') compressed.push(bytes.subarray(offset + 8, offset + 8 + length));
    offset += 12 + length;
    if (type === 'IEND') return { header, compressed };
  }
}

function readHeader(view: DataView, at: number, maxSide: number): Header {
  const width = view.getUint32(at);
  const height = view.getUint32(at + 4);
  const depth = view.getUint8(at + 8);
  const colourType = view.getUint8(at + 9);
  const interlace = view.getUint8(at + 12);
  if (width < 2 || height < 2 || width > maxSide || height > maxSide)
    throw rejected(`The image is ${width} x ${height} pixels; each side must have 2 to ${maxSide}.`);
  if (!colourTypes[colourType]?.depths.includes(depth)) throw rejected(`Colour type ${colourType} with ${depth} bits is no PNG.`);
  if (view.getUint8(at + 10) !== 0 || view.getUint8(at + 11) !== 0 || interlace > 1) throw rejected('The PNG uses a compression, filter or interlace method that does not exist.');
  return { width, height, depth, colourType, interlaced: interlace === 1 };
}

/** Bytes of the filtered scan lines of one pass. */
function passBytes(width: number, height: number, bitsPerPixel: number): number {
  return width === 0 || height === 0 ? 0 : height * (1 + Math.ceil((width * bitsPerPixel) / 8));
}

/** Decompresses up to one byte more than the pixels need: more, or less, means a damaged or hostile file. */
function requirePixels(header: Header, compressed: readonly Uint8Array[]): void {
  const bits = (colourTypes[header.colourType]?.samples ?? 0) * header.depth;
  let needed = 0;
  if (header.interlaced) {
    // Adam7: start and step of each pass.
    for (const [x0, y0, dx, dy] of [[0, 0, 8, 8], [4, 0, 8, 8], [0, 4, 4, 8], [2, 0, 4, 4], [0, 2, 2, 4], [1, 0, 2, 2], [0, 1, 1, 2]] as const)
      needed += passBytes(Math.ceil(Math.max(0, header.width - x0) / dx), Math.ceil(Math.max(0, header.height - y0) / dy), bits);
  } else needed = passBytes(header.width, header.height, bits);
  let found: number;
  try {
    found = inflateSync(Buffer.concat(compressed), { maxOutputLength: needed + 1 }).length;
  } catch (cause) {
    const tooLong = cause instanceof Error && 'code' in cause && cause.code === 'ERR_BUFFER_TOO_LARGE';
    throw rejected(tooLong ? 'The PNG holds more data than its size needs.' : 'The PNG is damaged: its data cannot be decompressed.', cause);
  }
  if (found !== needed) throw rejected(`The PNG holds ${found} bytes of pixels; its size needs ${needed}.`);
}
