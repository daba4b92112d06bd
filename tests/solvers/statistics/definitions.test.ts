import { describe, expect, it } from 'vitest';
import katex from 'katex';
import { statistics } from '../../../solvers/statistics/definitions';

describe('definitions of the statistics', () => {
  it.each(statistics.map((own) => [own.key, own] as const))('%s has a formula that can be set, a sentence and a source', (_, own) => {
    expect(own.key).toMatch(/^[a-z0-9-]+$/);
    expect(katex.renderToString(own.formula, { throwOnError: true, strict: 'error' })).toContain('katex');
    expect(own.summary).toMatch(/\.$/);
    expect(own.sources.length).toBeGreaterThan(0);
  });
  it('have keys of their own', () => expect(new Set(statistics.map((own) => own.key)).size).toBe(statistics.length));
});
