/** Finds an entry of a registry by its key. @throws RangeError that lists the keys there are. */
export function findByKey<T extends { readonly key: string }>(registry: readonly T[], key: string, noun: string): T {
  const found = registry.find((entry) => entry.key === key);
  if (!found) throw new RangeError(`There is no ${noun} '${key}'. Known: ${registry.map((entry) => entry.key).join(', ')}.`);
  return found;
}
