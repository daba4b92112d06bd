/**
 * Counter-based randomness: Philox4x32-10 (Salmon, Moraes, Dror, Shaw 2011, 'Parallel random numbers: as easy as 1, 2, 3').
 * A draw is a pure function of its key, so it can be recomputed alone, in any order, on any engine.
 */
import { sha256Bytes } from './hash';
import { normalQuantile } from './normal';

const M0 = 0xd2511f53 | 0;
const M1 = 0xcd9e8d57 | 0;
const W0 = 0x9e3779b9 | 0;
const W1 = 0xbb67ae85 | 0;

/** High word of the unsigned 64-bit product of two words, by 16-bit halves; no partial sum exceeds 32 bits. */
function multiplyHigh(a: number, b: number): number {
  const aLow = a & 0xffff;
  const aHigh = a >>> 16;
  const bLow = b & 0xffff;
  const bHigh = b >>> 16;
  const middle = (Math.imul(aHigh, bLow) + (Math.imul(aLow, bLow) >>> 16)) | 0;
  const carry = (Math.imul(aLow, bHigh) + (middle & 0xffff)) | 0;
  return (Math.imul(aHigh, bHigh) + (middle >>> 16) + (carry >>> 16)) | 0;
}

/**
 * One block of Philox4x32 with ten rounds. Words are 32-bit patterns kept as signed integers (`>>> 0` reads them unsigned).
 * @param counter four words; not changed
 * @param key two words; not changed
 * @param out overwritten with four words
 */
export function philox4x32(counter: Int32Array, key: Int32Array, out: Int32Array): void {
  let c0 = counter[0];
  let c1 = counter[1];
  let c2 = counter[2];
  let c3 = counter[3];
  let k0 = key[0];
  let k1 = key[1];
  for (let round = 0; round < 10; round++) {
    const high0 = multiplyHigh(M0, c0);
    const low0 = Math.imul(M0, c0);
    const high1 = multiplyHigh(M1, c2);
    const low1 = Math.imul(M1, c2);
    c0 = high1 ^ c1 ^ k0;
    c1 = low1;
    c2 = high0 ^ c3 ^ k1;
    c3 = low0;
    k0 = (k0 + W0) | 0;
    k1 = (k1 + W1) | 0;
  }
  out[0] = c0;
  out[1] = c1;
  out[2] = c2;
  out[3] = c3;
}

/** Names one stream: two key words and the two upper counter words. */
export interface DrawKey {
  readonly key: readonly [number, number];
  readonly stream: readonly [number, number];
}

/** First 128 bits of SHA-256 over the parts, one a line, read as big-endian words. */
export function deriveKey(...parts: readonly (string | number)[]): DrawKey {
  const digest = sha256Bytes(parts.join('\n'));
  const view = new DataView(digest.buffer, digest.byteOffset, digest.byteLength);
  return { key: [view.getInt32(0), view.getInt32(4)], stream: [view.getInt32(8), view.getInt32(12)] };
}

/**
 * The key of one noise draw. It depends on the bench seed, the phantom version, the level and the draw only: every solver
 * sees the same noise, and one draw can be recomputed alone.
 */
export function deriveDrawKey(benchSeed: string | number, phantomHash: string, levelIndex: number, drawIndex: number): DrawKey {
  for (const index of [levelIndex, drawIndex])
    if (!Number.isInteger(index) || index < 0) throw new RangeError(`A level or draw index must be a whole number from 0, not ${index}.`);
  return deriveKey('hadamark draw 1', benchSeed, phantomHash, levelIndex, drawIndex);
}

/** A reader of one stream. */
export class RandomStream {
  private readonly counter = new Int32Array(4);
  private readonly key: Int32Array;
  private readonly block = new Int32Array(4);
  private used = 4;

  constructor(drawKey: DrawKey) {
    this.key = Int32Array.from(drawKey.key);
    this.counter[2] = drawKey.stream[0];
    this.counter[3] = drawKey.stream[1];
  }

  private nextWord(): number {
    if (this.used === 4) {
      philox4x32(this.counter, this.key, this.block);
      this.counter[0]++;
      if (this.counter[0] === 0) this.counter[1]++;
      this.used = 0;
    }
    return this.block[this.used++];
  }

  /** 32 random bits as an unsigned integer. */
  nextUint32(): number {
    return this.nextWord() >>> 0;
  }

  /** Uniform on the open interval (0, 1): the centre of one of 2^52 equal cells, so that 0 and 1 never come and 1 - u is exact. */
  nextUniform(): number {
    const high = this.nextWord() >>> 6;
    const low = this.nextWord() >>> 6;
    return (high * 67108864 + low + 0.5) / 4503599627370496;
  }

  /** Uniform whole number in [0, count), 1 <= count <= 2^32, without bias (rejection). */
  nextIndex(count: number): number {
    const limit = 4294967296 - (4294967296 % count);
    for (;;) {
      const word = this.nextUint32();
      if (word < limit) return word % count;
    }
  }

  /** Standard normal: the quantile of one uniform. */
  nextNormal(): number {
    return normalQuantile(this.nextUniform());
  }

  /** Fills `out` with standard normals. */
  fillNormal(out: Float64Array): void {
    for (let i = 0; i < out.length; i++) out[i] = this.nextNormal();
  }
}
