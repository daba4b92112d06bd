import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { cos, sin } from '../../core/math';

/** What the patterns need to know of the geometry. */
export type PatternGeometry = Pick<EitGeometry, 'electrodes' | 'pattern' | 'measurement' | 'current'>;

/** A frame of data: one value per channel, pattern after pattern. */
export interface Channel {
  /** Index of the current pattern, 0-based. */
  readonly pattern: number;
  /** Electrodes, 0-based: the value is U[plus] - U[minus], or U[plus] where `minus` is null. */
  readonly plus: number;
  readonly minus: number | null;
}

/** Number of current patterns: L for adjacent drive, L - 1 for trigonometric. */
export function patternCount(geometry: PatternGeometry): number {
  return geometry.pattern === 'adjacent' ? geometry.electrodes : geometry.electrodes - 1;
}

/**
 * Currents per unit height, A/m, `patternCount` x L, row-major; every row sums to zero. Adjacent: +I into electrode k, -I into
 * the next. Trigonometric (Isaacson 1986): I cos(k theta_l), k = 1 .. L/2, then I sin(k theta_l), k = 1 .. L/2 - 1, with
 * theta_l = 2 pi l / L.
 */
export function currentPatterns(geometry: PatternGeometry): Float64Array {
  const L = geometry.electrodes;
  const rows = patternCount(geometry);
  const currents = new Float64Array(rows * L);
  if (geometry.pattern === 'adjacent') {
    for (let k = 0; k < rows; k++) {
      currents[k * L + k] = geometry.current;
      currents[k * L + ((k + 1) % L)] = -geometry.current;
    }
    return currents;
  }
  for (let row = 0; row < rows; row++) {
    const k = row < L / 2 ? row + 1 : row - L / 2 + 1;
    // The angle is reduced to one turn first, so that equal currents are equal in every bit.
    for (let l = 0; l < L; l++) {
      const theta = (2 * Math.PI * ((k * l) % L)) / L;
      currents[row * L + l] = geometry.current * (row < L / 2 ? cos(theta) : sin(theta));
    }
  }
  return currents;
}

/** The channels of a frame in order: pattern-major, measurements from the electrode after the driven pair on. */
export function channels(geometry: PatternGeometry): Channel[] {
  const L = geometry.electrodes;
  const list: Channel[] = [];
  for (let pattern = 0; pattern < patternCount(geometry); pattern++) {
    if (geometry.measurement === 'electrode-voltages') {
      for (let l = 0; l < L; l++) list.push({ pattern, plus: l, minus: null });
    } else if (geometry.measurement === 'adjacent-all') {
      for (let l = 0; l < L; l++) list.push({ pattern, plus: l, minus: (l + 1) % L });
    } else {
      for (let step = 2; step <= L - 2; step++) {
        const plus = (pattern + step) % L;
        list.push({ pattern, plus, minus: (plus + 1) % L });
      }
    }
  }
  return list;
}

/** Values in one frame. */
export function frameSize(geometry: PatternGeometry): number {
  const L = geometry.electrodes;
  const perPattern = geometry.measurement === 'adjacent-undriven' ? L - 3 : L;
  return patternCount(geometry) * perPattern;
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

/** Names of the channels as the pages print them: drive 'k–k+1' (or 'cos kθ'), measurement 'k–k+1' (or 'k'). */
export function channelNames(geometry: PatternGeometry): { readonly drive: string; readonly measure: string }[] {
  const L = geometry.electrodes;
  const half = L / 2;
  return channels(geometry).map(({ pattern, plus, minus }) => ({
    drive:
      geometry.pattern === 'adjacent'
        ? `${pattern + 1}–${((pattern + 1) % L) + 1}`
        : pattern < half
          ? `cos ${pattern + 1}θ`
          : `sin ${pattern - half + 1}θ`,
    measure: minus === null ? `${plus + 1}` : `${plus + 1}–${minus + 1}`,
  }));
}
