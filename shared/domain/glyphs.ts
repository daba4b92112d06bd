/** Marks of solvers: 8 shapes by 8 colours, as one number from 0 to 63. Colour repeats what the shape says. */
const shapes = 8;
const colours = 8;
export const glyphCount = shapes * colours;

const whole = (value: number, count: number): number => ((value % count) + count) % count;
export const glyphShape = (glyph: number): number => Math.floor(whole(glyph, glyphCount) / colours);
export const glyphColour = (glyph: number): number => whole(glyph, glyphCount) % colours;
const glyphWith = (shape: number, colour: number): number => shape * colours + colour;

/** Colours 0 and 5 of the palette are both blue, so the second stands by for pages that run out of the others. */
const ownColours = [0, 1, 2, 3, 4, 6, 7] as const;
const spareColour = 5;

/** The mark of the solver that was made as number n, from 0: the first 56 differ, and any seven in a row have seven colours. */
export const solverGlyph = (n: number): number => glyphWith(whole(n, shapes), ownColours[whole(n, ownColours.length)]!);

/**
 * Marks for solvers that stand on one page, by place. Each keeps its shape, and its colour unless another one has it: the one with the
 * smaller mark keeps it, and the other takes the next free colour, the spare one last. With more than eight solvers colours repeat,
 * marks do not as long as a colour is left for the shape.
 */
export function distinctGlyphs(own: readonly number[]): number[] {
  const byMark = own.map((_, at) => at).sort((a, b) => own[a]! - own[b]! || a - b);
  const keeps = byMark.filter((at, i) => byMark.findIndex((other) => glyphColour(own[other]!) === glyphColour(own[at]!)) === i);
  const given = own.map((glyph) => glyphWith(glyphShape(glyph), glyphColour(glyph)));
  const uses = new Array<number>(colours).fill(0);
  const taken = new Set<number>();
  const take = (at: number, colour: number): void => {
    given[at] = glyphWith(glyphShape(own[at]!), colour);
    uses[colour] = uses[colour]! + 1;
    taken.add(given[at]!);
  };
  for (const at of keeps) take(at, glyphColour(own[at]!));
  for (const at of byMark.filter((other) => !keeps.includes(other))) {
    const colour = glyphColour(own[at]!);
    const from = Math.max(0, ownColours.findIndex((candidate) => candidate === colour));
    const onwards = [...ownColours.map((_, step) => ownColours[(from + step) % ownColours.length]!), spareColour];
    const free = onwards.filter((candidate) => !taken.has(glyphWith(glyphShape(own[at]!), candidate)));
    take(at, free.reduce((best, candidate) => (uses[candidate]! < uses[best]! ? candidate : best), free[0] ?? colour));
  }
  return given;
}
