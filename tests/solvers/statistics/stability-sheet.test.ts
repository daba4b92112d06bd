import { describe, expect, it } from 'vitest';
import { defaultLadder } from '../../../shared/domain/ladder';
import { scattered } from '../../support/scattered-draws';
import { errorTable, levelStatistics } from '../../../solvers/statistics/error-table';
import { breakdownNoise, stabilitySheet } from '../../../solvers/statistics/stability-sheet';


describe('stability sheet', () => {
  it('finds the exponent and the floor it was made with, without scatter', () => {
    for (const [b, c, nu] of [[0.2, 2, 0.5], [0.05, 10, 1], [0, 1, 0.25]] as const) {
      const sheet = stabilitySheet({ ladder: defaultLadder, draws: scattered((d) => b + c * d ** nu, 0, 'exact'), trivial: 1, seed: 's' });
      expect(sheet.model).toBe('power');
      // The exponent is refined by one parabola on a grid of ratio 1.085: 1 %, and floor and constant with it.
      expect(Math.abs(sheet.exponent!.value / nu - 1)).toBeLessThan(0.01);
      expect(Math.abs(sheet.floor!.value - b)).toBeLessThan(0.01);
      expect(Math.abs(sheet.constant! / c - 1)).toBeLessThan(0.04);
    }
  });
  it('has intervals that hold the truth and do not depend on when they are computed', () => {
    const input = { ladder: defaultLadder, draws: scattered((d) => 0.2 + 4 * d ** 0.8, 0.1, 'scatter'), trivial: 1, seed: 'run 1' };
    const sheet = stabilitySheet(input);
    expect(sheet).toEqual(stabilitySheet(input));
    expect(sheet.exponent!.low).toBeLessThan(0.8);
    expect(sheet.exponent!.high).toBeGreaterThan(0.8);
    expect(sheet.floor!.low).toBeLessThan(0.2);
    expect(sheet.floor!.high).toBeGreaterThan(0.19);
    // 0.2 + 4 d^0.8 = 1 at d = 0.2^(1/0.8).
    const exact = 0.2 ** (1 / 0.8);
    expect(sheet.breakdown!.low).toBeLessThan(exact);
    expect(Math.abs(sheet.breakdown!.value / exact - 1)).toBeLessThan(0.15);
    expect(sheet.breakdown!.high).toBeGreaterThan(sheet.breakdown!.value);
  });
  it('prefers the logarithmic law for logarithmic data', () => {
    const sheet = stabilitySheet({ ladder: defaultLadder, draws: scattered((d) => 2 * Math.abs(Math.log(d)) ** -1.5, 0.002, 'log'), trivial: 1, seed: 's' });
    expect(sheet.model).toBe('logarithmic');
    expect(Math.abs(sheet.exponent!.value / 1.5 - 1)).toBeLessThan(0.02);
    expect(sheet.floor).toBeNull();
  });
  it('says why there is none', () => {
    const constant = stabilitySheet({ ladder: defaultLadder, draws: scattered(() => 1, 0, 'one'), trivial: 1, seed: 's' });
    expect(constant).toMatchObject({ model: 'none', breakdownNote: 'throughout', reason: 'The error does not change with the noise.' });
    // A rule that trusts the data too much at low noise: the error falls as the noise grows, then rises a little.
    const falling = stabilitySheet({ ladder: defaultLadder, draws: scattered((d) => 0.6 + 0.02 / Math.sqrt(d), 0.01, 'falling'), trivial: 1, seed: 's' });
    expect(falling).toMatchObject({ model: 'none', exponent: null, reason: expect.stringMatching(/does not grow/) });
    expect(stabilitySheet({ ladder: [0.1, 0.2], draws: [[0.1], [0.2]], trivial: null, seed: 's' })).toMatchObject({ model: 'none', breakdown: null, breakdownNote: null });
    expect(stabilitySheet({ ladder: [0.1], draws: [[null]], trivial: 1, seed: 's' }).reason).toMatch(/No level/);
    expect(stabilitySheet({ ladder: defaultLadder, draws: scattered((d) => d, 0, 'low'), trivial: 1, seed: 's' }).breakdownNote).toBe('beyond');
    expect(() => stabilitySheet({ ladder: [0.2, 0.1], draws: [[1], [1]], trivial: 1, seed: 's' })).toThrow(RangeError);
  });
  it('interpolates the breakdown in log-log', () => {
    // Medians 0.5 and 2 at 0.01 and 0.04: 1 lies half-way in the logarithm.
    expect(breakdownNoise([0.01, 0.04], [0.5, 2], 1)).toEqual({ at: expect.closeTo(0.02, 14) });
  });
  it('looks for the breakdown after the method was of use, and says when it never was', () => {
    expect(breakdownNoise([0.001, 0.01, 0.04], [3, 0.5, 2], 1)).toEqual({ at: expect.closeTo(0.02, 14) });
    expect(breakdownNoise([0.001, 0.01, 0.04], [3, 0.5, 0.6], 1)).toEqual({ note: 'beyond' });
    expect(breakdownNoise([0.001, 0.01, 0.04], [3, 2, 1], 1)).toEqual({ note: 'throughout' });
  });
});

describe('error table', () => {
  it('summarises draws, names the median and the worst, and keeps gaps', () => {
    const row = levelStatistics(0.01, [4, null, 1, 2, 3], 'lower', 'not defined');
    expect(row).toMatchObject({ count: 4, median: 2.5, mean: 2.5, worst: 4, worstDraw: 0, medianDraw: 3, reason: 'not defined', draws: [4, null, 1, 2, 3] });
    expect(row.sd).toBeCloseTo(Math.sqrt(5 / 3), 14);
    expect(levelStatistics(0.01, [0.2, 1.1, 3], 'one').worstDraw).toBe(2);
    expect(levelStatistics(0.01, [-5, 1, 2], 'zero').worst).toBe(-5);
    expect(levelStatistics(0.01, [5, 1, 2], 'higher').worst).toBe(1);
    expect(levelStatistics(0.01, [null, null], 'lower', 'why')).toMatchObject({ count: 0, median: null, worstDraw: null, reason: 'why' });
  });
  it('places trials by their index, also out of order and unfinished', () => {
    const trial = (levelIndex: number, drawIndex: number, value: number | null) => ({ levelIndex, drawIndex, metrics: { m: { value, reason: 'r' } } });
    const table = errorTable([trial(0, 2, 3), trial(0, 0, 1), trial(1, 0, null)], [0.01, 0.1], { key: 'm', better: 'lower' });
    expect(table[0]).toMatchObject({ draws: [1, null, 3], count: 2, median: 2 });
    expect(table[1]).toMatchObject({ count: 0, reason: 'r' });
  });
});
