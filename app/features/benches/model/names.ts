const longest = 19;

const head = (name: string): string => (name.split(/[,(]/)[0] ?? name).trim();

/** Cut at `longest`, inside a word only where at least four of its letters stay. */
function cut(text: string): string {
  if (text.length <= longest) return text;
  const part = text.slice(0, longest - 1);
  const space = part.lastIndexOf(' ');
  return `${space > 0 && part.length - space - 1 < 4 ? part.slice(0, space) : part}\u2026`;
}

/**
 * Names that fit beside a curve: what stands before the first comma, with the first word after it where two solvers would
 * read the same. The full name stands in the table.
 */
export function shortNames(names: readonly string[]): (name: string) => string {
  const counts = new Map<string, number>();
  for (const name of new Set(names)) counts.set(head(name), (counts.get(head(name)) ?? 0) + 1);
  return (name) => {
    if ((counts.get(head(name)) ?? 0) < 2) return cut(head(name));
    const rest = name.slice(head(name).length).replace(/^[\s,(]+/, '');
    const word = rest.split(/[\s,)]/)[0];
    return cut(word ? `${head(name)}, ${word}` : head(name));
  };
}
