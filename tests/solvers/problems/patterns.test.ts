import { describe, expect, it } from 'vitest';
import { unitGeometry } from '../../support/impedance-case';
import { electrodeCounts, measurementKeys, patternKeys } from '../../../shared/domain/geometry/electrical-impedance';
import { channelNames, channels, currentPatterns, frameSize, measure, patternCount, patternWords, type PatternGeometry } from '../../../solvers/problems/electrical-impedance/patterns';

/** Fields that a pattern needs beyond its key. */
function patternFields(pattern: PatternGeometry['pattern'], electrodes: number): Partial<PatternGeometry> {
  if (pattern === 'skip') return { skip: 1 };
  if (pattern === 'listed') return { currents: [1, 3].map((k) => Array.from({ length: electrodes }, (_, l) => (l === 0 ? k : l === k ? -k : 0))) };
  return {};
}

describe('current patterns and measurements', () => {
  it('has 208 values for 16 electrodes, adjacent without the driven ones (common practice, no source)', () => {
    expect(frameSize(unitGeometry())).toBe(208);
    expect(frameSize(unitGeometry({ electrodes: 8 }))).toBe(40);
    expect(frameSize(unitGeometry({ electrodes: 32 }))).toBe(928);
  });

  it.each(patternKeys.flatMap((pattern) => electrodeCounts.map((electrodes) => ({ pattern, electrodes }))))('$pattern currents of $electrodes electrodes sum to zero', ({ pattern, electrodes }) => {
    const geometry = unitGeometry({ pattern, electrodes, measurement: 'adjacent-all', current: 0.5, ...patternFields(pattern, electrodes) });
    const currents = currentPatterns(geometry);
    for (let k = 0; k < patternCount(geometry); k++) {
      const row = currents.subarray(k * electrodes, (k + 1) * electrodes);
      // Rounding of a sum of cosines.
      expect(Math.abs(row.reduce((s, v) => s + v, 0))).toBeLessThan(1e-14);
      expect(Math.max(...row.map(Math.abs))).toBeCloseTo(pattern === 'trigonometric' ? Math.max(...row.map(Math.abs)) : pattern === 'listed' ? [0.5, 1.5][k] : 0.5, 15);
    }
  });

  it('makes trigonometric patterns orthogonal (Isaacson 1986)', () => {
    const geometry = unitGeometry({ pattern: 'trigonometric', measurement: 'electrode-voltages' });
    const currents = currentPatterns(geometry);
    for (let a = 0; a < 15; a++)
      for (let b = 0; b < a; b++) {
        let sum = 0;
        for (let l = 0; l < 16; l++) sum += currents[a * 16 + l] * currents[b * 16 + l];
        expect(Math.abs(sum)).toBeLessThan(1e-13);
      }
  });

  it.each(measurementKeys)('lists as many channels and names as the frame has values: %s', (measurement) => {
    const geometry = unitGeometry({ measurement });
    expect(channels(geometry)).toHaveLength(frameSize(geometry));
    expect(channelNames(geometry)).toHaveLength(frameSize(geometry));
  });

  it('names drive and measurement from electrode 1 on', () => {
    const names = channelNames(unitGeometry());
    expect(names[0]).toEqual({ drive: '1–2', measure: '3–4' });
    expect(names[207]).toEqual({ drive: '16–1', measure: '14–15' });
    expect(channelNames(unitGeometry({ pattern: 'trigonometric', measurement: 'electrode-voltages' })).at(-1)).toEqual({ drive: 'sin 7θ', measure: '16' });
  });

  it('drives pairs with electrodes left out, opposite pairs, and listed currents less their rounding', () => {
    const skip = unitGeometry({ electrodes: 8, pattern: 'skip', skip: 2, measurement: 'adjacent-all' });
    expect([...currentPatterns(skip).subarray(6 * 8, 7 * 8)]).toEqual([0, -1, 0, 0, 0, 0, 1, 0]);
    expect(channelNames(skip)[6 * 8].drive).toBe('7–2');
    const opposite = unitGeometry({ electrodes: 8, pattern: 'opposite', measurement: 'electrode-voltages' });
    expect(patternCount(opposite)).toBe(4);
    expect([...currentPatterns(opposite).subarray(3 * 8)]).toEqual([0, 0, 0, 1, 0, 0, 0, -1]);
    const rounded = unitGeometry({ electrodes: 8, pattern: 'listed', currents: [[0.1, 0.2, -0.3, 0, 0, 0, 0, 0]], current: 2, measurement: 'adjacent-all' });
    const row = currentPatterns(rounded);
    expect(row.reduce((sum, value) => sum + value, 0)).toBeCloseTo(0, 16);
    expect(row[1]).toBeCloseTo(0.4, 15);
    expect(channelNames(rounded)[0]).toEqual({ drive: 'pattern 1', measure: '1–2' });
    expect([skip, opposite, rounded, unitGeometry()].map(patternWords)).toEqual(['pairs with 2 skipped', 'opposite pairs', '1 listed pattern', 'adjacent pairs']);
  });

  it('leaves out every pair that touches a driven electrode, from the first driven one on', () => {
    const skip = unitGeometry({ electrodes: 8, pattern: 'skip', skip: 1 });
    // Electrodes 8 and 2 are driven in the last pattern: 3-4 to 6-7 are left.
    expect(channelNames(skip).slice(-4).map(({ measure: name }) => name)).toEqual(['3–4', '4–5', '5–6', '6–7']);
    expect(frameSize(skip)).toBe(8 * 4);
    const opposite = unitGeometry({ electrodes: 8, pattern: 'opposite' });
    expect(channelNames(opposite).slice(0, 4).map(({ measure: name }) => name)).toEqual(['2–3', '3–4', '6–7', '7–8']);
    // Rows of a list may leave different numbers of pairs.
    const listed = unitGeometry({ electrodes: 8, pattern: 'listed', currents: [[1, -1, 0, 0, 0, 0, 0, 0], [1, 0, -1, 0, 1, 0, -1, 0], [0, 0, 1, 0, 0, -1, 0, 0]] });
    expect(channels(listed).map(({ pattern }) => pattern)).toEqual([0, 0, 0, 0, 0, 2, 2, 2, 2]);
    expect(frameSize(listed)).toBe(9);
  });

  it('reads differences from electrode voltages, and refuses another count', () => {
    const geometry = unitGeometry({ electrodes: 8 });
    const voltages = Float64Array.from({ length: 64 }, (_, i) => i * i);
    expect(measure(geometry, voltages)[0]).toBe(4 - 9);
    expect(() => measure(geometry, new Float64Array(63))).toThrow('63 electrode voltages');
  });
});
