import { kernelsBinary } from './kernels-binary';

/** What the compiled kernels export; addresses are bytes. The .as sources describe each. */
export interface Kernels {
  readonly memory: WebAssembly.Memory;
  firstFree(): number;
  packedBytes(cols: number): number;
  multiply(
    a: number, rowA: number, stepA: number, b: number, stepB: number, colB: number, c: number, rowC: number,
    rows: number, inner: number, cols: number, pack: number, keep: number,
  ): void;
  dot(a: number, b: number, count: number): number;
  addScaled(alpha: number, x: number, y: number, count: number): void;
  rowsTimes(a: number, stride: number, rows: number, cols: number, x: number, out: number): void;
  timesRows(a: number, stride: number, rows: number, cols: number, x: number, out: number): void;
  sparseRows(rows: number, rowStart: number, columns: number, values: number, x: number, out: number): void;
  factorPanel(panel: number, width: number, height: number): number;
  factorise(
    panels: number, supernodes: number, first: number, rowStart: number, rowIndex: number, panelStart: number, supernodeOf: number,
    localRow: number, head: number, next: number, reached: number, places: number,
  ): number;
  forwardFour(panels: number, supernodes: number, first: number, rowStart: number, rowIndex: number, panelStart: number, x: number): void;
  backwardFour(panels: number, supernodes: number, first: number, rowStart: number, rowIndex: number, panelStart: number, x: number, below: number): void;
  forwardEight(panels: number, supernodes: number, first: number, rowStart: number, rowIndex: number, panelStart: number, x: number): void;
  backwardEight(panels: number, supernodes: number, first: number, rowStart: number, rowIndex: number, panelStart: number, x: number): void;
  sha256Blocks(data: number, blocks: number, state: number, constants: number, schedule: number): void;
  windowSums(v: number, t: number, nx: number, ny: number, weights: number, scratch: number, sums: number): void;
  pairSensitivities(
    elements: number, stiffness: number, start: number, list: number, cells: number, fields: number, fieldCount: number,
    f: number, g: number, matrix: number, out: number,
  ): void;
}

let loaded: Kernels | null | undefined;

/** The compiled kernels of this thread, or null where WebAssembly with 128-bit vectors, or compiling without waiting, is refused. */
export function loadKernels(): Kernels | null {
  if (loaded === undefined) loaded = load();
  return loaded;
}

function load(): Kernels | null {
  try {
    const instance = new WebAssembly.Instance(new WebAssembly.Module(decodeBase64(kernelsBinary)));
    return instance.exports as unknown as Kernels;
  } catch {
    return null;
  }
}

const alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';

/** Base64 without atob, which is not part of the language. */
function decodeBase64(text: string): Uint8Array<ArrayBuffer> {
  const length = text.replace(/=+$/, '').length;
  const bytes = new Uint8Array((length * 3) >> 2);
  let bits = 0;
  let held = 0;
  let at = 0;
  for (let k = 0; k < length; k++) {
    bits = (bits << 6) | alphabet.indexOf(text[k]);
    held += 6;
    if (held >= 8) {
      held -= 8;
      bytes[at++] = (bits >> held) & 255;
    }
  }
  return bytes;
}
