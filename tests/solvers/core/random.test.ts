import { describe, expect, it } from 'vitest';
import { erfinv } from '../../../solvers/core/math';
import { normalCdf, normalQuantile } from '../../../solvers/core/normal';
import { deriveDrawKey, philox4x32, RandomStream } from '../../../solvers/core/random';

const hex = (words: Int32Array): string => Array.from(words, (word) => (word >>> 0).toString(16).padStart(8, '0')).join(' ');

describe('Philox4x32-10', () => {
  // Known answers published with the Random123 library (file kat_vectors; Salmon et al. 2011); counter, key, result.
  it.each([
    [[0, 0, 0, 0], [0, 0], '6627e8d5 e169c58d bc57ac4c 9b00dbd8'],
    [[-1, -1, -1, -1], [-1, -1], '408f276d 41c83b0e a20bc7c6 6d5451fd'],
    [[0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344], [0xa4093822, 0x299f31d0], 'd16cfe09 94fdcceb 5001e420 24126ea1'],
  ])('gives the published answer for counter %j', (counter, key, expected) => {
    const out = new Int32Array(4);
    philox4x32(Int32Array.from(counter), Int32Array.from(key), out);
    expect(hex(out)).toBe(expected);
  });
});

describe('normal quantile', () => {
  it('equals sqrt(2) erfinv(2 p - 1) of @stdlib', () => {
    // Tolerance: erfinv loses digits where 2 p - 1 is rounded near p = 0 and 1; both are good to a few units in the last place elsewhere.
    for (let i = 1; i < 2000; i++) {
      const p = i / 2000;
      expect(Math.abs(normalQuantile(p) - Math.SQRT2 * erfinv(2 * p - 1))).toBeLessThan(1e-13);
    }
  });
  it('gives the tail values of scipy 1.10.1 (scipy.stats.norm.ppf)', () => {
    expect(normalQuantile(1e-12)).toBeCloseTo(-7.034483825301131, 12);
    expect(normalQuantile(0.975)).toBeCloseTo(1.959963984540054, 14);
    expect(normalCdf(1.959963984540054)).toBeCloseTo(0.975, 14);
  });
  it('refuses what is no probability', () => {
    for (const p of [0, 1, -1, NaN]) expect(() => normalQuantile(p)).toThrow(RangeError);
  });
});

describe('draws', () => {
  it('are a function of seed, phantom, level and draw alone', () => {
    const read = (...args: Parameters<typeof deriveDrawKey>): string => {
      const stream = new RandomStream(deriveDrawKey(...args));
      return [stream.nextNormal(), stream.nextNormal(), stream.nextNormal()].join();
    };
    const base = read(7, 'hash', 2, 5);
    expect(read(7, 'hash', 2, 5)).toBe(base);
    const others = [read(8, 'hash', 2, 5), read(7, 'other', 2, 5), read(7, 'hash', 3, 5), read(7, 'hash', 2, 6)];
    expect(new Set([base, ...others]).size).toBe(5);
    expect(() => deriveDrawKey(7, 'hash', -1, 0)).toThrow(RangeError);
  });
  it('have the moments of a normal distribution', () => {
    const count = 200_000;
    const stream = new RandomStream(deriveDrawKey(1, 'moments', 0, 0));
    let mean = 0;
    let square = 0;
    let fourth = 0;
    for (let i = 0; i < count; i++) {
      const g = stream.nextNormal();
      mean += g / count;
      square += (g * g) / count;
      fourth += (g * g * g * g) / count;
    }
    // Five standard errors of each moment: 1, sqrt(2), sqrt(96) over sqrt(n).
    expect(Math.abs(mean)).toBeLessThan(5 / Math.sqrt(count));
    expect(Math.abs(square - 1)).toBeLessThan((5 * Math.SQRT2) / Math.sqrt(count));
    expect(Math.abs(fourth - 3)).toBeLessThan((5 * Math.sqrt(96)) / Math.sqrt(count));
  });
  it('gives whole numbers without bias', () => {
    const stream = new RandomStream(deriveDrawKey(1, 'indices', 0, 0));
    const seen = new Array<number>(6).fill(0);
    for (let i = 0; i < 60_000; i++) seen[stream.nextIndex(6)]++;
    // Five standard deviations of a binomial count with n = 60,000, p = 1/6.
    for (const count of seen) expect(Math.abs(count - 10_000)).toBeLessThan(5 * Math.sqrt(60_000 * (1 / 6) * (5 / 6)));
  });
});
