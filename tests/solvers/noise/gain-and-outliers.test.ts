import { describe, expect, it } from 'vitest';
import { deriveDrawKey } from '../../../solvers/core/random';
import { norm2 } from '../../../solvers/core/vector';
import { gainNoise } from '../../../solvers/noise/gain';
import { outlierNoise } from '../../../solvers/noise/outliers';

/** Checks follow from the definitions: common practice, no source. */
const clean = Float64Array.from({ length: 208 }, (_, i) => (i % 13 === 0 ? 0 : 3 * Math.cos(i)));
const key = (draw: number) => deriveDrawKey(5, 'phantom', 0, draw);

describe.each([gainNoise, outlierNoise])('$key', (model) => {
  it('has exactly the norm asked for, the same bits for the same key, others for another', () => {
    const { data, noiseNorm } = model.draw(clean, 0.1, 7, key(0));
    // Rounding of data + noise: 1e-16 of the data against the noise.
    expect(Math.abs(norm2(data.map((v, i) => v - clean[i])) / (0.1 * 7) - 1)).toBeLessThan(1e-12);
    expect(noiseNorm).toBe(0.1 * 7);
    expect(model.draw(clean, 0.1, 7, key(0)).data).toEqual(data);
    expect(model.draw(clean, 0.1, 7, key(1)).data).not.toEqual(data);
  });
});

describe('gain', () => {
  it('leaves zero channels clean, and its factors are independent of the size of the data', () => {
    const sums = { small: 0, large: 0 };
    const size = Math.sqrt(clean.reduce((sum, v) => sum + v * v, 0));
    let count = 0;
    for (let draw = 0; draw < 200; draw++) {
      const { data } = gainNoise.draw(clean, 0.1, size, key(draw));
      for (let i = 0; i < 208; i++) {
        if (clean[i] === 0) expect(data[i]).toBe(0);
        else if (Math.abs(clean[i]) < 1.5) {
          sums.small += (data[i] / clean[i] - 1) ** 2;
          count++;
        } else sums.large += (data[i] / clean[i] - 1) ** 2;
      }
    }
    const nonzero = 200 * clean.reduce((n, v) => n + (v === 0 ? 0 : 1), 0);
    // Deviation 0.1 in both halves; five standard errors of a variance over more than 10,000 values are about 7 %.
    expect(Math.abs(Math.sqrt(sums.small / count) / 0.1 - 1)).toBeLessThan(0.05);
    expect(Math.abs(Math.sqrt(sums.large / (nonzero - count)) / 0.1 - 1)).toBeLessThan(0.05);
  });
  it('refuses data that are all zero', () => {
    expect(() => gainNoise.draw(new Float64Array(4), 0.1, 1, key(0))).toThrow(/all data are zero/);
  });
});

describe('outliers', () => {
  it('touches one channel in twenty, each as often as any other', () => {
    const hits = new Float64Array(208);
    const draws = 2000;
    for (let draw = 0; draw < draws; draw++) {
      const { data } = outlierNoise.draw(clean, 0.1, 7, key(draw));
      let changed = 0;
      for (let i = 0; i < 208; i++)
        if (data[i] !== clean[i]) {
          hits[i]++;
          changed++;
        }
      expect(changed).toBe(11);
    }
    const p = 11 / 208;
    // Five standard errors of a binomial share.
    for (const hit of hits) expect(Math.abs(hit / draws - p)).toBeLessThan(5 * Math.sqrt((p * (1 - p)) / draws));
  });
  it('replaces the only channel there is', () => {
    expect(outlierNoise.draw(Float64Array.of(2), 0.5, 2, key(0)).noiseNorm).toBe(1);
  });
});
