import { describe, expect, it } from 'vitest';
import { digestOf, largestGap, marginOf, verificationGroups, withinBound } from '../../../solvers/verification/check';
import { getVerificationCheck, verificationChecks } from '../../../solvers/verification/registry';

describe('published values', () => {
  it('have keys of their own, a reason, a source and a known group', () => {
    expect(new Set(verificationChecks.map((check) => check.key)).size).toBe(verificationChecks.length);
    for (const check of verificationChecks) {
      expect(check.reason).toMatch(/\.$/);
      expect(check.source.full.length).toBeGreaterThan(10);
      expect(verificationGroups).toContain(check.group);
    }
    expect(() => getVerificationCheck('none')).toThrow(RangeError);
  });

  it.each(verificationChecks.map((check) => [check.key, check] as const))('%s', { timeout: 120_000 }, (_, check) => {
    const outcome = check.run();
    expect(outcome.gap).toBeGreaterThanOrEqual(0);
    expect(outcome.gap).toBeLessThanOrEqual(check.bound);
    expect(outcome.digest).toMatch(/^[0-9a-f]{64}$/);
    // The value shown as published is the one that is compared, to its printed digits.
    if (typeof outcome.measured === 'number') expect(Math.abs(outcome.measured - Number(check.published))).toBeLessThanOrEqual(Math.max(check.bound, 1e-3 * Math.abs(outcome.measured)));
    if (check.cost === 'light') expect(check.run()).toEqual(outcome);
  });
});

describe('gap against bound', () => {
  it('fails beyond the bound, and where the gap is no number', () => {
    expect(withinBound(1e-5, 1e-5)).toBe(true);
    expect(withinBound(1.0001e-5, 1e-5)).toBe(false);
    expect(withinBound(0, 0)).toBe(true);
    expect(withinBound(1, 0)).toBe(false);
    expect(withinBound(NaN, 1)).toBe(false);
  });
  it('gives how many times the gap fits into the bound', () => {
    expect(marginOf(2, 8)).toBe(4);
    expect(marginOf(0, 1)).toBe(Infinity);
    expect(marginOf(1, 0)).toBe(0);
  });
  it('sees one wrong value among many, and a value that is not finite', () => {
    expect(largestGap([1, 2, 4.5], [1, 2, 4])).toBe(0.125);
    expect(withinBound(largestGap([1, NaN], [1, 2]), 1)).toBe(false);
  });
  it('digests the bits: one unit in the last place, the sign of zero and the order all count', () => {
    expect(digestOf(0.1 + 0.2)).not.toBe(digestOf(0.3));
    expect(digestOf(0)).not.toBe(digestOf(-0));
    expect(digestOf(1, 2)).not.toBe(digestOf(2, 1));
    expect(digestOf('a', 'b')).not.toBe(digestOf('ab'));
    expect(digestOf(Float64Array.of(1, 2))).toBe(digestOf(Float64Array.of(1, 2)));
  });
});
