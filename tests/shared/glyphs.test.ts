import { describe, expect, it } from 'vitest';
import { distinctGlyphs, glyphColour, glyphShape } from '../../shared/domain/glyphs';

const look = (index: number): string => `${glyphShape(index)}/${glyphColour(index)}`;

describe('marks of solvers', () => {
  it('are 64 different ones', () => {
    expect(new Set(Array.from({ length: 64 }, (_, i) => look(i))).size).toBe(64);
    expect(look(64)).toBe(look(0));
  });
  it('stay as they are where nothing collides, in any order', () => {
    expect(distinctGlyphs([3, 0, 6])).toEqual([3, 0, 6]);
    expect(distinctGlyphs([])).toEqual([]);
  });
  it('Compare shows A and C in two colours, though their solvers were given the same one', () => {
    const [a, b, c] = distinctGlyphs([2, 5, 10]);
    expect([a, b]).toEqual([2, 5]);
    expect(glyphShape(c!)).toBe(glyphShape(10));
    expect(new Set([a, b, c].map((index) => glyphColour(index!))).size).toBe(3);
  });
  it('two blues are one too many for a few solvers, and there for eight', () => {
    const [blue, other] = distinctGlyphs([0, 5]);
    expect([blue, glyphShape(other!)]).toEqual([0, glyphShape(5)]);
    expect(glyphColour(other!)).toBe(6);
    expect(new Set(distinctGlyphs([0, 1, 2, 3, 4, 5, 6, 7]).map(glyphColour)).size).toBe(8);
  });
  it('the one with the smaller index keeps its colour, whoever stands first', () => {
    const [late, early] = distinctGlyphs([10, 2]);
    expect(early).toBe(2);
    expect(glyphColour(late!)).not.toBe(2);
  });
  it('two versions of one solver share its shape and differ in colour', () => {
    const [first, second] = distinctGlyphs([4, 4]);
    expect(glyphShape(first!)).toBe(glyphShape(second!));
    expect(first).not.toBe(second);
  });
  it.each([8, 20, 40])('%i solvers with any indices have marks that differ, and eight of them eight colours', (count) => {
    const given = distinctGlyphs(Array.from({ length: count }, (_, i) => (i * 13 + 5) % 64));
    expect(new Set(given).size).toBe(count);
    expect(new Set(given.slice(0, count).map(glyphColour)).size).toBe(8);
  });
});
