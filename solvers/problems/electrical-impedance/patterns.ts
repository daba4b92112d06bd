import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { cos, sin } from '../../core/math';

/** What the patterns need to know of the geometry. */
export type PatternGeometry = Pick<EitGeometry, 'electrodes' | 'pattern' | 'measurement' | 'current' | 'skip' | 'currents'>;

/** A frame of data: one value per channel, pattern after pattern. */
export interface Channel {
  /** Index of the current pattern, 0-based. */
  readonly pattern: number;
  /** Electrodes, 0-based: the value is U[plus] - U[minus], or U[plus] where `minus` is null. */
  readonly plus: number;
  readonly minus: number | null;
}

/**
 * Number of current patterns: L for adjacent and skipping pairs, L / 2 for opposite ones (the others differ by sign), L - 1 for
 * trigonometric ones, the rows of a list.
 */
export function patternCount(geometry: PatternGeometry): number {
  switch (geometry.pattern) {
    case 'adjacent':
    case 'skip':
      return geometry.electrodes;
    case 'opposite':
      return geometry.electrodes / 2;
    case 'trigonometric':
      return geometry.electrodes - 1;
    case 'listed':
      return listedRows(geometry).length;
  }
}

function listedRows({ currents }: PatternGeometry): readonly (readonly number[])[] {
  if (!currents) throw new RangeError('The listed pattern needs a list of currents.');
  return currents;
}

/** Electrodes between which pattern k drives the current, in and out, 0-based; null where a pattern drives more than a pair. */
export function drivenPair(geometry: PatternGeometry, k: number): readonly [number, number] | null {
  const L = geometry.electrodes;
  switch (geometry.pattern) {
    case 'adjacent':
      return [k, (k + 1) % L];
    case 'skip':
      return [k, (k + 1 + (geometry.skip ?? 0)) % L];
    case 'opposite':
      return [k, k + L / 2];
    default:
      return null;
  }
}

/**
 * Currents per unit height, A/m, `patternCount` x L, row-major; every row sums to zero. Pairs: +I into the first electrode, -I into
 * the second: the next one, the one after `skip` others, or the opposite one. Trigonometric (Isaacson 1986): I cos(k theta_l),
 * k = 1 .. L/2, then I sin(k theta_l), k = 1 .. L/2 - 1, with theta_l = 2 pi l / L. Listed: I times the rows, less their mean, which
 * is what rounding of decimals left.
 */
export function currentPatterns(geometry: PatternGeometry): Float64Array {
  const L = geometry.electrodes;
  const rows = patternCount(geometry);
  const currents = new Float64Array(rows * L);
  if (geometry.pattern === 'listed') {
    listedRows(geometry).forEach((row, k) => {
      let sum = 0;
      for (let l = 0; l < L; l++) sum += row[l];
      for (let l = 0; l < L; l++) currents[k * L + l] = geometry.current * (row[l] - sum / L);
    });
    return currents;
  }
  for (let row = 0; row < rows; row++) {
    const pair = drivenPair(geometry, row);
    if (pair) {
      currents[row * L + pair[0]] = geometry.current;
      currents[row * L + pair[1]] = -geometry.current;
      continue;
    }
    const k = row < L / 2 ? row + 1 : row - L / 2 + 1;
    // The angle is reduced to one turn first, so that equal currents are equal in every bit.
    for (let l = 0; l < L; l++) {
      const theta = (2 * Math.PI * ((k * l) % L)) / L;
      currents[row * L + l] = geometry.current * (row < L / 2 ? cos(theta) : sin(theta));
    }
  }
  return currents;
}

/** Whether pattern k drives a current through electrode l. */
function driven(geometry: PatternGeometry, k: number, l: number): boolean {
  const pair = drivenPair(geometry, k);
  return pair ? pair[0] === l || pair[1] === l : geometry.pattern !== 'listed' || listedRows(geometry)[k][l] !== 0;
}

/** The channels of a frame in order: pattern-major; without the driven electrodes, from the first driven one of a pair on. */
export function channels(geometry: PatternGeometry): Channel[] {
  const L = geometry.electrodes;
  const list: Channel[] = [];
  for (let pattern = 0; pattern < patternCount(geometry); pattern++) {
    if (geometry.measurement === 'electrode-voltages') {
      for (let l = 0; l < L; l++) list.push({ pattern, plus: l, minus: null });
    } else if (geometry.measurement === 'adjacent-all') {
      for (let l = 0; l < L; l++) list.push({ pattern, plus: l, minus: (l + 1) % L });
    } else {
      const first = drivenPair(geometry, pattern)?.[0] ?? 0;
      for (let step = 0; step < L; step++) {
        const plus = (first + step) % L;
        const minus = (plus + 1) % L;
        if (!driven(geometry, pattern, plus) && !driven(geometry, pattern, minus)) list.push({ pattern, plus, minus });
      }
    }
  }
  return list;
}

/** Values in one frame. */
export function frameSize(geometry: PatternGeometry): number {
  return geometry.measurement === 'adjacent-undriven' ? channels(geometry).length : patternCount(geometry) * geometry.electrodes;
}

/** Data of a frame from electrode voltages (`patternCount` x L, row-major). */
export function measure(geometry: PatternGeometry, voltages: Float64Array): Float64Array {
  const L = geometry.electrodes;
  if (voltages.length !== patternCount(geometry) * L)
    throw new RangeError(`There are ${voltages.length} electrode voltages, not ${patternCount(geometry)} patterns x ${L} electrodes.`);
  const list = channels(geometry);
  const data = new Float64Array(list.length);
  for (let i = 0; i < list.length; i++) {
    const { pattern, plus, minus } = list[i];
    data[i] = minus === null ? voltages[pattern * L + plus] : voltages[pattern * L + plus] - voltages[pattern * L + minus];
  }
  return data;
}

/** Name of a pattern as the pages print it: 'k–l' for a pair, 'cos kθ', 'pattern k'. */
function patternName(geometry: PatternGeometry, k: number): string {
  const half = geometry.electrodes / 2;
  const pair = drivenPair(geometry, k);
  if (pair) return `${pair[0] + 1}–${pair[1] + 1}`;
  if (geometry.pattern === 'listed') return `pattern ${k + 1}`;
  return k < half ? `cos ${k + 1}θ` : `sin ${k - half + 1}θ`;
}

/** Names of the channels as the pages print them: the drive, and the measurement 'k–k+1' (or 'k'). */
export function channelNames(geometry: PatternGeometry): { readonly drive: string; readonly measure: string }[] {
  return channels(geometry).map(({ pattern, plus, minus }) => ({
    drive: patternName(geometry, pattern),
    measure: minus === null ? `${plus + 1}` : `${plus + 1}–${minus + 1}`,
  }));
}

/** The patterns in words, for a line about a phantom. */
export function patternWords(geometry: PatternGeometry): string {
  switch (geometry.pattern) {
    case 'adjacent':
      return 'adjacent pairs';
    case 'skip':
      return `pairs with ${geometry.skip} skipped`;
    case 'opposite':
      return 'opposite pairs';
    case 'trigonometric':
      return 'trigonometric patterns';
    case 'listed':
      return `${patternCount(geometry)} listed pattern${patternCount(geometry) === 1 ? '' : 's'}`;
  }
}
