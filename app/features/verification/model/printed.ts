const minus = '\u2212';

const isNumber = (text: string): boolean => text.trim() !== '' && Number.isFinite(Number(text));

/** A published value as printed, with a real minus; a long hash by its ends. */
export function printedValue(text: string): string {
  if (isNumber(text)) return text.replace('-', minus);
  return text.length > 20 ? `${text.slice(0, 8)} … ${text.slice(-8)}` : text;
}

/** A measured value beside its published one: one digit more than was printed, so that rounding is seen. */
export function measuredValue(measured: number | string | null, published: string): string {
  if (measured === null) return '–';
  if (typeof measured === 'string') return printedValue(measured);
  if (Number.isInteger(measured)) return String(measured).replace('-', minus);
  const decimals = isNumber(published) ? (published.split('.')[1]?.length ?? 0) : 5;
  return measured.toFixed(Math.min(15, Math.max(decimals + 1, published.includes('.') ? 0 : 4))).replace('-', minus);
}
