/** Numbers as people type them. NaN where the text is not one finite number. */
export function parseDecimal(text: string): number {
  const clean = text.trim().replace(/\u2212/g, '-').replace(/^(-?\d+),(\d+)$/, '$1.$2');
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(clean)) return Number.NaN;
  const value = Number(clean);
  return Number.isFinite(value) ? value : Number.NaN;
}

/**
 * value * 10^power as the nearest double of the shifted decimal, so that 54.3 mm is 0.0543 m and not its neighbour: equal
 * input then has an equal content hash.
 */
export function shiftDecimal(value: number, power: number): number {
  if (!Number.isFinite(value)) return Number.NaN;
  const [mantissa, exponent] = value.toString().split('e');
  return Number(`${mantissa}e${Number(exponent ?? 0) + power}`);
}

/** A number for an input: plain digits where that is short, at most twelve significant. */
export function decimalText(value: number): string {
  if (!Number.isFinite(value)) return '';
  return String(Number(value.toPrecision(12)));
}
