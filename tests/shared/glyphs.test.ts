import { describe, expect, it } from 'vitest';
import { distinctGlyphs, glyphColour, glyphShape, solverGlyph } from '../../shared/domain/glyphs';

const first = (count: number): number[] => Array.from({ length: count }, (_, n) => solverGlyph(n));

describe('marks of solvers', () => {
  it('differ for the first 56, with seven colours in any seven in a row and never the second blue', () => {
    expect(new Set(first(56)).size).toBe(56);
    expect(new Set(first(56).slice(10, 17).map(glyphColour)).size).toBe(7);
    expect(first(56).map(glyphColour)).not.toContain(5);
    expect([glyphShape(64), glyphColour(64)]).toEqual([0, 0]);
  });
  it('stay as they are where no colour comes twice, whoever stands beside them', () => {
    const some = [solverGlyph(3), solverGlyph(0), solverGlyph(6)];
    expect(distinctGlyphs(some)).toEqual(some);
    expect(distinctGlyphs(first(7))).toEqual(first(7));
    expect(distinctGlyphs([])).toEqual([]);
  });
  it('Compare shows A and C in two colours, though their solvers have the same one', () => {
    const own = [solverGlyph(2), solverGlyph(5), solverGlyph(9)];
    expect(glyphColour(own[2]!)).toBe(glyphColour(own[0]!));
    const given = distinctGlyphs(own);
    expect(new Set(given.map(glyphColour)).size).toBe(3);
    expect(given.map(glyphShape)).toEqual(own.map(glyphShape));
    // One of the two gives way, and nobody else moves.
    expect(given.filter((glyph, i) => glyph !== own[i])).toHaveLength(1);
    expect(given[1]).toBe(own[1]);
  });
  it('does not depend on who stands first', () => {
    const [x, y] = [solverGlyph(2), solverGlyph(9)];
    expect([...distinctGlyphs([x, y])].sort()).toEqual([...distinctGlyphs([y, x])].sort());
  });
  it('two versions of one solver share its shape and differ in colour', () => {
    const [one, two] = distinctGlyphs([4, 4]);
    expect(glyphShape(one!)).toBe(glyphShape(two!));
    expect(one).not.toBe(two);
  });
  it('the eighth solver of a page takes the spare blue', () => {
    const given = distinctGlyphs(first(8));
    expect(given.slice(0, 7)).toEqual(first(7));
    expect(new Set(given.map(glyphColour)).size).toBe(8);
  });
  it.each([20, 40])('%i solvers have marks that differ', (count) => {
    expect(new Set(distinctGlyphs(Array.from({ length: count }, (_, i) => solverGlyph(i * 13 + 5)))).size).toBe(count);
  });
});
