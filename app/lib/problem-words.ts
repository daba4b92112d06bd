/** Words and units that depend on the problem. */
import type { Body } from '../../shared/domain/body';
import type { NoiseReference } from '../../shared/domain/phantom-definition';
import { formatNumber, formatSigned } from './format';

/** What a noise level is relative to. */
export const noiseReferenceWords: Record<NoiseReference, string> = { voltages: 'the raw voltages', difference: 'the difference signal', data: 'the data' };
export const noiseReferenceWord = (key: string): string => noiseReferenceWords[key as NoiseReference] ?? noiseReferenceWords.data;

/** A number's text with its unit; a pure number stands alone. */
export const withUnit = (text: string, unit: string): string => (unit ? `${text} ${unit}` : text);
/** '…, S/m' behind a name; nothing for a pure number. */
export const unitAfter = (unit: string): string => (unit ? `, ${unit}` : '');

/** A number of up to three digits without trailing zeros: 6, 3.14, 0.25. */
export const plainNumber = (value: number): string => String(Number(value.toPrecision(3))).replace('-', '\u2212');

const millimetres = (metres: number): string => `${formatSigned(metres * 1000, 0).replace('+', '')} mm`;

/** A place in the body: 'x 12 mm, y −30 mm', or on a line 'x 0.25'. */
export function placeWords(body: Body | undefined, { x, y }: { readonly x: number; readonly y: number }): string {
  return body?.kind === 'interval' ? `x ${formatNumber(x, 3)}` : `x ${millimetres(x)}, y ${millimetres(y)}`;
}
