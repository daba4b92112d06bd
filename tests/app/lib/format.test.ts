import { describe, expect, it } from 'vitest';
import { formatCount, formatDate, formatDecibel, formatError, formatHash, formatNumber, formatPercent, formatQuantity, formatSeconds, formatSigned, plural } from '../../../app/lib/format';

const nb = '\u202f';

describe('noise levels', () => {
  // The ladder as the noise rule prints it.
  it.each([[1e-4, '0.01'], [3e-4, '0.03'], [1e-3, '0.1'], [2e-3, '0.2'], [5e-3, '0.5'], [1e-2, '1'], [2e-2, '2'], [5e-2, '5'], [0.1, '10'], [0.3, '30']])('prints %f as %s %%', (fraction, text) => {
    expect(formatPercent(fraction)).toBe(`${text}${nb}%`);
  });
  it('keeps two digits between levels', () => {
    expect(formatPercent(0.074)).toBe(`7.4${nb}%`);
    expect(formatPercent(0.00125)).toBe(`0.13${nb}%`);
    expect(formatPercent(0.000034)).toBe(`0.0034${nb}%`);
  });
  it('reads 1 % as 40 dB', () => {
    // 20 log10(1 / 0.01) = 40, by definition of the decibel.
    expect(formatDecibel(0.01)).toBe(`40.0${nb}dB`);
  });
});

describe('readings', () => {
  it('prints errors with three digits after or around the point', () => {
    expect([0.14649, 1.2345, 12.34, null, Number.NaN].map(formatError)).toEqual(['0.146', '1.23', '12.3', '\u2013', '\u2013']);
  });
  it('prints small and large numbers with a power of ten', () => {
    expect(formatNumber(3.1e-13, 2)).toBe('3.1\u00a0\u00d7\u00a010\u207b\u00b9\u00b3');
    expect(formatNumber(0.0012)).toBe('0.00120');
    expect(formatNumber(-2)).toBe('\u22122.00');
    expect(formatNumber(0)).toBe('0');
  });
  it('chooses SI prefixes', () => {
    expect(formatQuantity(0.0012, 'V', 2)).toBe(`1.2${nb}mV`);
    expect(formatQuantity(-4.5e-6, 'A', 2)).toBe(`\u22124.5${nb}\u00b5A`);
  });
  it('prints times as they are spoken', () => {
    expect([0.00001, 0.012, 3.8, 112, 7200].map(formatSeconds)).toEqual([`10${nb}\u00b5s`, `12${nb}ms`, `3.8${nb}s`, `1${nb}min 52${nb}s`, `2.0${nb}h`]);
  });
  it('signs differences with a real minus', () => {
    expect([0.93, -0.031, 0.001].map((v) => formatSigned(v))).toEqual(['+0.93', '\u22120.03', '0.00']);
  });
  it('groups long counts and counts things', () => {
    expect(formatCount(41280)).toBe(`41${nb}280`);
    expect(formatCount(1614)).toBe('1614');
    expect([plural(1, 'draw'), plural(24, 'draw')]).toEqual(['1 draw', '24 draws']);
  });
  it('writes dates out and cuts hashes into fours', () => {
    expect(formatDate(new Date(2026, 10, 30))).toBe('30 November 2026');
    expect(formatHash('7c1e40b9d2a6ffff')).toBe('7c1e 40b9 d2a6');
  });
});
