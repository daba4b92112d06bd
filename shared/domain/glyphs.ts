/** Marks of solvers: 8 shapes by 8 colours. A solver keeps the index it was given; only the colour gives way where a page would show one twice. */
export const glyphColours = 8;
export const glyphCount = glyphColours * glyphColours;

const whole = (index: number): number => ((index % glyphCount) + glyphCount) % glyphCount;
export const glyphColour = (index: number): number => whole(index) % glyphColours;
/** From the ninth on the pairing of colour and shape shifts, so that 64 differ. */
export const glyphShape = (index: number): number => (whole(index) + 3 * Math.floor(whole(index) / glyphColours)) % glyphColours;

/** Colours 1 and 6 of the palette are both blue: on a page with few solvers one of them gives way too. */
const hueOf = (colour: number): number => (colour === 5 ? 0 : colour);

/** The index with this shape and colour: colour c and shift b give the shape c + 3 b, and 3 b takes every value modulo 8. */
function glyphWith(shape: number, colour: number): number {
  for (let shift = 0; shift < glyphColours; shift++) if (glyphShape(glyphColours * shift + colour) === shape) return glyphColours * shift + colour;
  throw new RangeError(`There is no mark of shape ${shape} and colour ${colour}.`);
}

/**
 * Marks for solvers that stand on one page, by place. Each keeps its shape, and its colour unless one before it (by its own index,
 * then by place) has it; it then takes the next free colour. With more than eight solvers colours repeat, marks do not before the
 * 65th.
 */
export function distinctGlyphs(stored: readonly number[]): number[] {
  const order = stored.map((_, at) => at).sort((a, b) => stored[a]! - stored[b]! || a - b);
  const given = new Array<number>(stored.length).fill(0);
  const uses = new Array<number>(glyphColours).fill(0);
  const hues = new Array<number>(glyphColours).fill(0);
  const taken = new Set<number>();
  for (const at of order) {
    const own = whole(stored[at]!);
    const shape = glyphShape(own);
    // Its own colour first, then onwards from it: the least used one whose mark is free, of these one of the least used hue.
    const free = Array.from({ length: glyphColours }, (_, step) => (glyphColour(own) + step) % glyphColours).filter((colour) => !taken.has(glyphWith(shape, colour)));
    const cost = (colour: number): number => uses[colour]! * stored.length + hues[hueOf(colour)]!;
    const colour = free.reduce((best, candidate) => (cost(candidate) < cost(best) ? candidate : best), free[0] ?? glyphColour(own));
    given[at] = glyphWith(shape, colour);
    uses[colour] = uses[colour]! + 1;
    hues[hueOf(colour)] = hues[hueOf(colour)]! + 1;
    taken.add(given[at]!);
  }
  return given;
}
