import { describe, expect, it } from 'vitest';
import { unitGeometry } from '../../support/impedance-case';
import { electrodeCounts, measurementKeys, patternKeys } from '../../../shared/domain/geometry/electrical-impedance';
import { channelNames, channels, currentPatterns, frameSize, measure, patternCount } from '../../../solvers/problems/electrical-impedance/patterns';

describe('current patterns and measurements', () => {
  it('has 208 values for 16 electrodes, adjacent without the driven ones (common practice, no source)', () => {
    expect(frameSize(unitGeometry())).toBe(208);
    expect(frameSize(unitGeometry({ electrodes: 8 }))).toBe(40);
    expect(frameSize(unitGeometry({ electrodes: 32 }))).toBe(928);
  });

  it.each(patternKeys.flatMap((pattern) => electrodeCounts.map((electrodes) => ({ pattern, electrodes }))))('$pattern currents of $electrodes electrodes sum to zero', ({ pattern, electrodes }) => {
    const geometry = unitGeometry({ pattern, electrodes, measurement: 'adjacent-all', current: 0.5 });
    const currents = currentPatterns(geometry);
    for (let k = 0; k < patternCount(geometry); k++) {
      const row = currents.subarray(k * electrodes, (k + 1) * electrodes);
      // Rounding of a sum of cosines.
      expect(Math.abs(row.reduce((s, v) => s + v, 0))).toBeLessThan(1e-14);
      expect(Math.max(...row.map(Math.abs))).toBeCloseTo(pattern === 'adjacent' ? 0.5 : Math.max(...row.map(Math.abs)), 15);
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

  it('reads differences from electrode voltages, and refuses another count', () => {
    const geometry = unitGeometry({ electrodes: 8 });
    const voltages = Float64Array.from({ length: 64 }, (_, i) => i * i);
    expect(measure(geometry, voltages)[0]).toBe(4 - 9);
    expect(() => measure(geometry, new Float64Array(63))).toThrow('63 electrode voltages');
  });
});
