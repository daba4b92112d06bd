import { describe, expect, it } from 'vitest';
import { deriveDrawKey } from '../../../solvers/core/random';
import { norm2 } from '../../../solvers/core/vector';
import { gaussianExpectedNoise, gaussianNoise } from '../../../solvers/noise/gaussian';
import { noiseModels } from '../../../solvers/noise/registry';

const clean = Float64Array.from({ length: 208 }, (_, i) => Math.cos(i));
const key = (draw: number) => deriveDrawKey(3, 'phantom', 0, draw);
const noiseOf = (data: Float64Array): Float64Array => data.map((value, i) => value - clean[i]);

describe('gaussian noise', () => {
  it('has exactly the norm asked for, relative to the reference and not to the data', () => {
    for (const level of [1e-4, 0.01, 0.3]) {
      const { data, noiseNorm } = gaussianNoise.draw(clean, level, 7, key(0));
      expect(noiseNorm).toBe(level * 7);
      // Rounding of data + noise: 1e-16 of the data against the noise.
      expect(Math.abs(norm2(noiseOf(data)) / (level * 7) - 1)).toBeLessThan(1e-11);
    }
  });
  it('in expectation: the mean square is right, single draws scatter', () => {
    let mean = 0;
    const draws = 400;
    for (let draw = 0; draw < draws; draw++) {
      const { noiseNorm } = gaussianExpectedNoise.draw(clean, 0.1, 2, key(draw));
      mean += (noiseNorm / 0.2) ** 2 / draws;
    }
    // Five standard errors: the variance of a mean of `draws` chi-square(208)/208 is 2 / (208 draws).
    expect(Math.abs(mean - 1)).toBeLessThan(5 * Math.sqrt(2 / (208 * draws)));
    expect(gaussianExpectedNoise.draw(clean, 0.1, 2, key(1)).noiseNorm).not.toBe(0.2);
  });
  it('points in the same direction at every level of the same draw key', () => {
    const a = noiseOf(gaussianNoise.draw(clean, 0.1, 1, key(4)).data);
    const b = noiseOf(gaussianNoise.draw(clean, 0.2, 1, key(4)).data);
    for (let i = 0; i < a.length; i++) expect(b[i]).toBeCloseTo(2 * a[i], 14);
  });
  it.each(noiseModels.map((model) => [model.key, model] as const))('%s refuses bad input and leaves the data alone', (_, model) => {
    const before = Float64Array.from(clean);
    model.draw(clean, 0.1, 1, key(0));
    expect(clean).toEqual(before);
    for (const level of [-0.1, NaN, Infinity]) expect(() => model.draw(clean, level, 1, key(0))).toThrow(RangeError);
    expect(() => model.draw(clean, 0.1, 0, key(0))).toThrow(/no signal/);
    expect(() => model.draw(Float64Array.from([1, NaN]), 0.1, 1, key(0))).toThrow(/index 1/);
    expect(model.draw(clean, 0, 1, key(0)).data).toEqual(clean);
  });
});
