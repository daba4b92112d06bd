import { describe, expect, it } from 'vitest';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import { currentRank, electrodeMatrixReader, trigonometricBasis } from '../../../../solvers/methods/direct/electrode-matrix';
import { symmetricEigen } from '../../../../solvers/linear-algebra/symmetric-eigen';
import { currentPatterns, measure, patternCount } from '../../../../solvers/problems/electrical-impedance/patterns';
import { unitGeometry } from '../../../support/impedance-case';

const L = 8;
const n = L - 1;
const basis = trigonometricBasis(L);
let state = 5;
const random = (): number => (state = (state * 16807) % 2147483647) / 2147483647 - 0.5;
const map = new Float64Array(n * n);
for (let a = 0; a < n; a++) for (let b = 0; b <= a; b++) map[a * n + b] = map[b * n + a] = random();

/** Frame of electrodes whose map is `map`: no model, only Ohm. */
function frameOf(geometry: EitGeometry): Float64Array {
  const currents = currentPatterns(geometry);
  const patterns = patternCount(geometry);
  const voltages = new Float64Array(patterns * L);
  for (let p = 0; p < patterns; p++)
    for (let l = 0; l < L; l++)
      for (let a = 0; a < n; a++)
        for (let b = 0; b < n; b++) {
          let current = 0;
          for (let k = 0; k < L; k++) current += basis[b * L + k] * currents[p * L + k];
          voltages[p * L + l] += basis[a * L + l] * map[a * n + b] * current;
        }
  return measure(geometry, voltages);
}

const served: [string, Partial<EitGeometry>][] = [
  ['adjacent, all pairs', { pattern: 'adjacent', measurement: 'adjacent-all' }],
  ['adjacent, all voltages', { pattern: 'adjacent', measurement: 'electrode-voltages' }],
  ['skip 2, all pairs', { pattern: 'skip', skip: 2, measurement: 'adjacent-all' }],
  ['trigonometric, all pairs', { pattern: 'trigonometric', measurement: 'adjacent-all' }],
  ['trigonometric, all voltages, 0.02 A/m', { pattern: 'trigonometric', measurement: 'electrode-voltages', current: 0.02 }],
];

describe('electrodeMatrixReader', () => {
  it('has an orthonormal basis of currents that sum to zero, for even and odd numbers', () => {
    for (const count of [7, 8]) {
      const rows = trigonometricBasis(count);
      for (let a = 0; a < count - 1; a++) {
        expect(Math.abs(rows.slice(a * count, (a + 1) * count).reduce((sum, value) => sum + value))).toBeLessThan(1e-14);
        for (let b = 0; b <= a; b++) {
          let product = 0;
          for (let l = 0; l < count; l++) product += rows[a * count + l] * rows[b * count + l];
          expect(Math.abs(product - (a === b ? 1 : 0))).toBeLessThan(1e-14);
        }
      }
    }
  });

  it.each(served)('reads the map back: %s', (_, overrides) => {
    const geometry = unitGeometry({ electrodes: L, ...overrides });
    expect(currentRank(geometry)).toBe(n);
    const out = electrodeMatrixReader(geometry).read(frameOf(geometry), 1);
    out.forEach((value, i) => expect(Math.abs(value - map[i])).toBeLessThan(1e-12));
  });

  it('reads a batch as its single frames', () => {
    const geometry = unitGeometry({ electrodes: L, ...served[0][1] });
    const frame = frameOf(geometry);
    const pair = Float64Array.from({ length: 2 * frame.length }, (_, i) => frame[i >> 1] * (i % 2 === 0 ? 1 : -3));
    const reader = electrodeMatrixReader(geometry);
    const single = reader.read(frame, 1);
    expect(reader.read(pair, 2).filter((_, i) => i % 2 === 0)).toEqual(single);
    expect(() => reader.read(frame, 2)).toThrow(/values/);
  });

  it('says how many independent currents there are, and refuses too few', () => {
    const opposite = unitGeometry({ electrodes: L, pattern: 'opposite', measurement: 'adjacent-all' });
    expect(currentRank(opposite)).toBe(L / 2);
    expect(() => electrodeMatrixReader(opposite)).toThrow(/determine/);
    // Skipping 1 of 8 electrodes drives odd and even ones apart: the currents between the two halves are missing.
    expect(currentRank(unitGeometry({ electrodes: L, pattern: 'skip', skip: 1, measurement: 'adjacent-all' }))).toBe(L - 2);
    expect(() => electrodeMatrixReader(unitGeometry({ electrodes: L }))).toThrow(/different channels/);
  });

  it.each([served[0], served[4]])('expects the spectral norm and the entries of noise that noise has: %s', (_, overrides) => {
    const geometry = unitGeometry({ electrodes: L, ...overrides });
    const reader = electrodeMatrixReader(geometry);
    const normal = (): number => Math.sqrt(-2 * Math.log(random() + 0.5 + 1e-12)) * Math.cos(2 * Math.PI * random());
    const draws = 300;
    let mean = 0;
    let entry = 0;
    for (let draw = 0; draw < draws; draw++) {
      const noise = reader.read(Float64Array.from({ length: reader.frameSize }, normal), 1);
      const { values } = symmetricEigen(noise, n);
      mean += Math.max(-values[0], values[n - 1]) / draws;
      entry += noise[1] ** 2 / draws;
    }
    // 2 ||sum B^2||^(1/2) is the edge of large matrices; small ones and unequal variances stay below it.
    expect(mean).toBeGreaterThan(0.6 * reader.noiseNorm);
    expect(mean).toBeLessThan(1.1 * reader.noiseNorm);
    const { currentVariances: c, voltageVariances: v } = reader;
    // The variance of a variance over 300 draws: 8 %; three of it.
    expect(Math.abs(entry / (0.25 * (c[0] * v[1] + c[1] * v[0])) - 1)).toBeLessThan(0.25);
  });
});
