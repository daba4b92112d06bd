import { describe, expect, it } from 'vitest';
import { deriveDrawKey, deriveKey, RandomStream } from '../../../solvers/core/random';
import { norm2 } from '../../../solvers/core/vector';
import { prepareRun } from '../../../solvers/campaign/run';
import { levelOfPhotons, photonsOfLevel, poissonCount, poissonNoise } from '../../../solvers/noise/poisson';
import { rayProblem } from '../../support/ray-problem';
import { syntheticProblem } from '../../support/synthetic-problem';

const clean = Float64Array.from({ length: 300 }, (_, i) => 1.5 * Math.abs(Math.sin(i / 20)));
const size = norm2(clean);
const key = (draw: number) => deriveDrawKey(5, 'phantom', 0, draw);

describe('Poisson counts', () => {
  // All three ways of drawing, and both sides of their borders.
  it.each([0.3, 4, 9.9, 10.1, 50, 3000, 9e5, 1.1e6, 1e12])('have mean and variance %s, and the third moment of the law', (mean) => {
    const stream = new RandomStream(deriveKey('poisson', mean));
    const n = 20000;
    let sum = 0;
    let square = 0;
    let cube = 0;
    for (let i = 0; i < n; i++) {
      const count = poissonCount(stream, mean);
      expect(Number.isInteger(count) && count >= 0).toBe(true);
      const x = (count - mean) / Math.sqrt(mean);
      sum += x;
      square += x * x;
      cube += x * x * x;
    }
    // Five standard errors; central moments of the law over the deviation: 0, 1, lambda^(-1/2), fourth 3 + 1 / lambda, sixth 15 + 25 / lambda + 1 / lambda^2.
    expect(Math.abs(sum / n)).toBeLessThan(5 / Math.sqrt(n));
    expect(Math.abs(square / n - 1)).toBeLessThan(5 * Math.sqrt((2 + 1 / mean) / n));
    expect(Math.abs(cube / n - 1 / Math.sqrt(mean))).toBeLessThan(5 * Math.sqrt((15 + 25 / mean + 1 / mean ** 2) / n));
  });

  it('have the probabilities of the law at the border of the two exact ways (chi-square, by hand)', () => {
    for (const mean of [6, 14]) {
      const stream = new RandomStream(deriveKey('poisson law', mean));
      const n = 40000;
      const counts = new Map<number, number>();
      for (let i = 0; i < n; i++) {
        const count = poissonCount(stream, mean);
        counts.set(count, (counts.get(count) ?? 0) + 1);
      }
      let probability = Math.exp(-mean);
      let statistic = 0;
      let cells = 0;
      for (let k = 0; k < 40; k++) {
        if (probability * n > 20) {
          statistic += ((counts.get(k) ?? 0) - probability * n) ** 2 / (probability * n);
          cells++;
        }
        probability *= mean / (k + 1);
      }
      // Mean `cells`, deviation sqrt(2 cells).
      expect(statistic).toBeLessThan(cells + 5 * Math.sqrt(2 * cells));
    }
  });
});

describe('Photon noise', () => {
  it('has the level asked for on average, from 0.01 to 30 %', () => {
    for (const level of [1e-4, 1e-2, 0.1, 0.3]) {
      let squares = 0;
      for (let draw = 0; draw < 60; draw++) {
        const { data, noiseNorm } = poissonNoise.draw(clean, level, size, key(draw));
        expect(noiseNorm).toBe(norm2(data.map((v, i) => v - clean[i])));
        squares += noiseNorm ** 2;
      }
      // Five standard errors of a root mean square over 18,000 values are about 2 %; at 30 % some ten counts a ray leave terms of third order.
      expect(Math.abs(Math.sqrt(squares / 60) / (level * size) - 1)).toBeLessThan(0.05);
    }
  });

  it('says how many photons a level takes, and back', () => {
    for (const level of [1e-3, 0.05, 0.3]) expect(levelOfPhotons(clean, photonsOfLevel(clean, level, size), size)).toBeCloseTo(level, 12);
    // One ray of no attenuation: delta^2 y^2 = 1 / N + 7 / (4 N^2).
    expect(levelOfPhotons(Float64Array.of(0), 100, 1)).toBeCloseTo(Math.sqrt(0.01 + 1.75e-4), 12);
    expect(photonsOfLevel(clean, 0, size)).toBe(Infinity);
    expect(() => levelOfPhotons(clean, 0, size)).toThrow(RangeError);
  });

  it('is larger in the shadow: the variance grows as exp(y)', () => {
    const two = Float64Array.from({ length: 2000 }, (_, i) => (i < 1000 ? 0 : 2));
    const { data } = poissonNoise.draw(two, 0.01, norm2(two), key(0));
    const spread = (from: number): number => data.subarray(from, from + 1000).reduce((sum, v, i) => sum + (v - two[from + i]) ** 2, 0);
    expect(Math.abs(spread(1000) / spread(0) / Math.exp(2) - 1)).toBeLessThan(0.3);
  });

  it('gives the same bits for the same key, none at level 0, and never a value that is not finite', () => {
    expect(poissonNoise.draw(clean, 0.1, size, key(0)).data).toEqual(poissonNoise.draw(clean, 0.1, size, key(0)).data);
    expect(poissonNoise.draw(clean, 0.1, size, key(1)).data).not.toEqual(poissonNoise.draw(clean, 0.1, size, key(0)).data);
    expect(poissonNoise.draw(clean, 0, size, key(0))).toEqual({ data: clean, noiseNorm: 0 });
    // Hardly a photon: most counts are 0.
    const dark = poissonNoise.draw(Float64Array.of(8, 8, 9), 3, 1, key(0));
    expect(dark.data.every(Number.isFinite)).toBe(true);
    expect(() => poissonNoise.draw(Float64Array.of(800), 0.1, 800, key(0))).toThrow(/no photon passes/);
  });

  it('is refused outside X-ray tomography', () => {
    expect(() => prepareRun({ problem: syntheticProblem({ side: 4, data: 8 }), method: 'trivial', parameters: {}, rule: null, noiseModel: 'poisson' })).toThrow(/does not occur in the family 'electrical-impedance'/);
    expect(prepareRun({ problem: rayProblem('parallel'), method: 'trivial', parameters: {}, rule: null, noiseModel: 'poisson' }).noiseModel).toBe(poissonNoise);
  });
});
