import { levelToDecibel } from '../../shared/domain/ladder';

/** Narrow no-break space between a number and its unit. */
export const thinSpace = '\u202f';
const minus = '\u2212';

/** A relative noise level or any fraction as per cent: two significant digits, whole numbers bare. */
export function formatPercent(fraction: number): string {
  return `${percentDigits(fraction)}${thinSpace}%`;
}

/** The digits of `formatPercent` without its unit. */
export function percentDigits(fraction: number): string {
  const v = fraction * 100;
  if (v >= 9.95) return v.toFixed(0);
  if (v >= 0.995) return v.toFixed(v % 1 < 0.005 || v % 1 > 0.995 ? 0 : 1);
  if (v >= 0.0995) {
    const tenths = Math.abs((v * 10) % 1);
    return v.toFixed(tenths < 0.01 || tenths > 0.99 ? 1 : 2);
  }
  if (v >= 0.00995 || v === 0) return v.toFixed(2);
  return toSignificant(v, 2);
}

export function formatDecibel(fraction: number): string {
  return `${levelToDecibel(fraction).toFixed(1)}${thinSpace}dB`;
}

/** An error reading: three decimals below 1, fewer above. Null (undefined metric) reads as a dash. */
export function formatError(value: number | null | undefined): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return '\u2013';
  const a = Math.abs(value);
  const digits = a < 0.9995 ? value.toFixed(3) : a < 9.995 ? value.toFixed(2) : a < 999.5 ? value.toFixed(1) : formatNumber(value, 3);
  return digits.replace('-', minus);
}

/** `digits` significant digits, plain where it stays readable, else as m × 10^e. */
export function formatNumber(value: number | null | undefined, digits = 3): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return '\u2013';
  if (value === 0) return '0';
  const exponent = Math.floor(Math.log10(Math.abs(value)));
  if (exponent >= -3 && exponent < 5) return toSignificant(value, digits).replace('-', minus);
  const [mantissa, e] = value.toExponential(digits - 1).split('e');
  return `${(mantissa ?? '').replace('-', minus)}\u00a0\u00d7\u00a010${superscript(Number(e))}`;
}

/** A whole number with thin spaces between groups of three from 10 000 on. */
export function formatCount(value: number): string {
  const digits = Math.abs(Math.round(value)).toString();
  const grouped = digits.length > 4 ? digits.replace(/\B(?=(\d{3})+$)/g, thinSpace) : digits;
  return (value < 0 ? minus : '') + grouped;
}

const units = [
  { below: 1e-3, scale: 1e6, unit: '\u00b5s' },
  { below: 1, scale: 1e3, unit: 'ms' },
  { below: 100, scale: 1, unit: 's' },
] as const;

/** Seconds as µs, ms, s, min or h with two significant digits. */
export function formatSeconds(seconds: number | null | undefined): string {
  if (seconds === null || seconds === undefined || !Number.isFinite(seconds)) return '\u2013';
  for (const { below, scale, unit } of units) {
    if (seconds < below) return `${toSignificant(seconds * scale, 2)}${thinSpace}${unit}`;
  }
  if (seconds < 3600) {
    const whole = Math.round(seconds);
    const rest = whole % 60;
    return `${Math.floor(whole / 60)}${thinSpace}min${rest ? ` ${rest}${thinSpace}s` : ''}`;
  }
  return `${toSignificant(seconds / 3600, 2)}${thinSpace}h`;
}

const prefixes = [
  [1e9, 'G'], [1e6, 'M'], [1e3, 'k'], [1, ''], [1e-3, 'm'], [1e-6, '\u00b5'], [1e-9, 'n'], [1e-12, 'p'],
] as const;

/** A quantity with an SI prefix: 0.0012 V reads 1.2 mV. */
export function formatQuantity(value: number | null | undefined, unit: string, digits = 3): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return '\u2013';
  if (value === 0) return `0${thinSpace}${unit}`;
  const [factor, prefix] = prefixes.find(([f]) => Math.abs(value) >= f * 0.9995) ?? [1e-12, 'p'];
  return `${toSignificant(value / factor, digits).replace('-', minus)}${thinSpace}${prefix}${unit}`;
}

export function formatBytes(bytes: number): string {
  if (bytes < 1000) return `${bytes}${thinSpace}B`;
  return formatQuantity(bytes, 'B', 2).replace('\u2013', '');
}

/** Signed, with a real minus: +0.93, −0.03. */
export function formatSigned(value: number, decimals = 2): string {
  const text = Math.abs(value).toFixed(decimals);
  if (Number(text) === 0) return text;
  return `${value < 0 ? minus : '+'}${text}`;
}

const months = [
  'January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December',
];

/** 30 November 2026, in the reader's time zone. */
export function formatDate(iso: string | number | Date): string {
  const d = new Date(iso);
  return `${d.getDate()} ${months[d.getMonth()] ?? ''} ${d.getFullYear()}`;
}

/** 30 Nov, with the year unless it is this one. */
export function formatShortDate(iso: string | number | Date, now: Date = new Date()): string {
  const d = new Date(iso);
  const year = d.getFullYear() === now.getFullYear() ? '' : ` ${d.getFullYear()}`;
  return `${d.getDate()} ${(months[d.getMonth()] ?? '').slice(0, 3)}${year}`;
}

/** 30 November 2026, 14:02. */
export function formatDateTime(iso: string | number | Date): string {
  const d = new Date(iso);
  return `${formatDate(d)}, ${String(d.getHours()).padStart(2, '0')}:${String(d.getMinutes()).padStart(2, '0')}`;
}

/** A content hash for reading: its first groups of four digits. */
export function formatHash(hash: string, groups = 3): string {
  return (hash.slice(0, groups * 4).match(/.{1,4}/g) ?? []).join(' ');
}

/** `one` or `many` after the count: 1 draw, 24 draws. */
export function plural(count: number, one: string, many = `${one}s`): string {
  return `${formatCount(count)} ${count === 1 ? one : many}`;
}

const numberWords = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten'];
export function numberWord(count: number): string {
  return numberWords[count] ?? formatCount(count);
}

function toSignificant(value: number, digits: number): string {
  const rounded = Number(value.toPrecision(digits));
  const exponent = rounded === 0 ? 0 : Math.floor(Math.log10(Math.abs(rounded)));
  return rounded.toFixed(Math.max(0, digits - 1 - exponent));
}

function superscript(n: number): string {
  const glyphs = '\u2070\u00b9\u00b2\u00b3\u2074\u2075\u2076\u2077\u2078\u2079';
  return (n < 0 ? '\u207b' : '') + [...Math.abs(n).toString()].map((c) => glyphs[Number(c)] ?? c).join('');
}
