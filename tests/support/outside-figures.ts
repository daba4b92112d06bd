/**
 * Figures and files that tests compute themselves, with no code of the product: an expected value that came out of the
 * product would prove nothing.
 */
import { PNG } from 'pngjs';

/** Doubles of an array on the wire (base64 of little-endian IEEE 754). */
export function doublesOf(encoded: { readonly data: string }): number[] {
  const bytes = Buffer.from(encoded.data, 'base64');
  return Array.from({ length: bytes.length / 8 }, (_, i) => bytes.readDoubleLE(8 * i));
}

export const norm = (values: readonly number[]): number => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0));
export const minus = (a: readonly number[], b: readonly number[]): number[] => a.map((v, i) => v - b[i]!);

/** ||x - t|| / ||t - b|| over the pixels of the body, which all have one size. */
export const relativeError = (image: readonly number[], truth: readonly number[], background: number): number => norm(minus(image, truth)) / norm(truth.map((v) => v - background));
/** Largest |x - t|, in the image's unit. */
export const supError = (image: readonly number[], truth: readonly number[]): number => Math.max(...minus(image, truth).map(Math.abs));

/** Sample quantile of type 7 (Hyndman and Fan 1996), the one of numpy's and R's defaults. */
export function quantile(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  const at = (sorted.length - 1) * share;
  const low = Math.floor(at);
  const next = sorted[Math.min(low + 1, sorted.length - 1)]!;
  return sorted[low]! + (at - low) * (next - sorted[low]!);
}
export const mean = (values: readonly number[]): number => values.reduce((sum, v) => sum + v, 0) / values.length;

/** An error as the pages print it: three decimals below 1, two below 10, then one. */
export const printedError = (value: number): string => value.toFixed(value < 0.9995 ? 3 : value < 9.995 ? 2 : 1);

/** A grey picture with a disc of another grey; lengths in pixels from the upper left corner. */
export function discPicture(side: number, disc: { readonly x: number; readonly y: number; readonly radius: number; readonly grey: number }, background: number): Buffer {
  const png = new PNG({ width: side, height: side, colorType: 0, inputColorType: 0, inputHasAlpha: false, bitDepth: 8 });
  png.data = Buffer.alloc(side * side, background);
  for (let row = 0; row < side; row++)
    for (let col = 0; col < side; col++)
      if ((col + 0.5 - disc.x) ** 2 + (row + 0.5 - disc.y) ** 2 < disc.radius ** 2) png.data[row * side + col] = disc.grey;
  return PNG.sync.write(png, { colorType: 0, inputColorType: 0, inputHasAlpha: false, bitDepth: 8 });
}

/**
 * One frame of a homogeneous disc with point electrodes at equal spacing, adjacent drive, adjacent pairs without the
 * driven electrodes: U(x) = I / (pi sigma) ln(|x - sink| / |x - source|) on the rim, the Neumann function of the disc.
 */
export function pointElectrodeFrame(electrodes: number, currentPerHeight: number, conductivity: number): number[] {
  const rim = Array.from({ length: electrodes }, (_, k) => {
    const angle = Math.PI / 2 - (2 * Math.PI * k) / electrodes;
    return [Math.cos(angle), Math.sin(angle)] as const;
  });
  const at = (k: number) => rim[k % electrodes]!;
  const distance = (k: number, l: number): number => Math.hypot(at(k)[0] - at(l)[0], at(k)[1] - at(l)[1]);
  const frame: number[] = [];
  for (let drive = 0; drive < electrodes; drive++) {
    const potential = (k: number): number => (currentPerHeight / (Math.PI * conductivity)) * Math.log(distance(k, drive + 1) / distance(k, drive));
    for (let k = 2; k <= electrodes - 2; k++) frame.push(potential(drive + k) - potential(drive + k + 1));
  }
  return frame;
}

export const csvOf = (rows: readonly (readonly (number | string)[])[]): Buffer => Buffer.from(`${rows.map((row) => row.join(',')).join('\n')}\n`);

/** Rows of a CSV file without quoted commas, comment lines left out, as objects by the names of its first row. */
export function recordsOf(text: string): Record<string, string>[] {
  const [head = '', ...lines] = text.split(/\r?\n/).filter((line) => line !== '' && !line.startsWith('#'));
  const names = head.split(',');
  return lines.map((line) => Object.fromEntries(line.split(',').map((cell, i) => [names[i] ?? String(i), cell])));
}
