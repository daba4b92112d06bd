import { deflateSync } from 'node:zlib';
import { PNG } from 'pngjs';

/** A screenshot as a PNG of 256 colours: a fifth of the bytes, for pictures that live in the repository. */
export function toPalette(picture: Buffer): Buffer {
  const { width, height, data } = PNG.sync.read(picture);
  // Bins of 5 bits a channel, each with the mean of its pixels.
  const bins = new Map<number, { count: number; sum: [number, number, number] }>();
  const binAt = (i: number): number => ((data[4 * i]! >> 3) << 10) | ((data[4 * i + 1]! >> 3) << 5) | (data[4 * i + 2]! >> 3);
  for (let i = 0; i < width * height; i++) {
    const key = binAt(i);
    const bin = bins.get(key) ?? { count: 0, sum: [0, 0, 0] };
    bin.count++;
    for (let c = 0; c < 3; c++) bin.sum[c]! += data[4 * i + c]!;
    bins.set(key, bin);
  }
  const colours = [...bins].sort((a, b) => b[1].count - a[1].count).map(([key, { count, sum }]) => ({ key, rgb: sum.map((v) => Math.round(v / count)) }));
  const palette = colours.slice(0, 256).map(({ rgb }) => rgb);
  const distance = (a: readonly number[], b: readonly number[]): number => (a[0]! - b[0]!) ** 2 + (a[1]! - b[1]!) ** 2 + (a[2]! - b[2]!) ** 2;
  const indexOf = new Map(colours.map(({ key, rgb }, i) => [key, i < 256 ? i : palette.reduce((best, colour, j) => (distance(colour, rgb) < distance(palette[best]!, rgb) ? j : best), 0)]));
  const rows = Buffer.alloc(height * (width + 1));
  for (let y = 0; y < height; y++) for (let x = 0; x < width; x++) rows[y * (width + 1) + 1 + x] = indexOf.get(binAt(y * width + x))!;
  const head = Buffer.alloc(13);
  head.writeUInt32BE(width, 0);
  head.writeUInt32BE(height, 4);
  head.set([8, 3, 0, 0, 0], 8);
  return Buffer.concat([Buffer.from('89504e470d0a1a0a', 'hex'), chunk('IHDR', head), chunk('PLTE', Buffer.from(palette.flat())), chunk('IDAT', deflateSync(rows, { level: 9 })), chunk('IEND', Buffer.alloc(0))]);
}

function chunk(name: string, body: Buffer): Buffer {
  const named = Buffer.concat([Buffer.from(name, 'latin1'), body]);
  const frame = Buffer.alloc(8);
  frame.writeUInt32BE(body.length, 0);
  frame.writeUInt32BE(crc32(named), 4);
  return Buffer.concat([frame.subarray(0, 4), named, frame.subarray(4)]);
}

/** CRC-32 of ISO 3309, as the PNG specification asks for. */
function crc32(bytes: Buffer): number {
  let crc = 0xffffffff;
  for (const byte of bytes) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit++) crc = crc & 1 ? (crc >>> 1) ^ 0xedb88320 : crc >>> 1;
  }
  return (crc ^ 0xffffffff) >>> 0;
}
