import type { EitGeometry } from '../../shared/domain/geometry/electrical-impedance';
import type { Shape } from '../../shared/domain/truth-definition';
import { createTruthField, type TruthField } from '../../solvers/truth/truth-field';

/** A geometry on the unit disc, electrode 1 at angle 0, counter-clockwise. */
export function unitGeometry(overrides: Partial<EitGeometry> = {}): EitGeometry {
  return {
    body: { kind: 'disc', radius: 1 },
    electrodes: 16,
    electrodeCoverage: 0.5,
    firstElectrodeDeg: 0,
    numbering: 'counter-clockwise',
    contactImpedance: 0.01,
    pattern: 'adjacent',
    current: 1,
    measurement: 'adjacent-undriven',
    ...overrides,
  };
}

export function ellipse(x: number, y: number, a: number, b: number, value: number, angleDeg = 0): Shape {
  return { kind: 'ellipse', label: 'ellipse', target: true, value, x, y, semiAxisA: a, semiAxisB: b, angleDeg };
}

export function shapesTruth(shapes: Shape[], background = 1): TruthField {
  return createTruthField({ kind: 'shapes', background, shapes });
}

/** Largest difference over the largest reference value. */
export function maxError(values: ArrayLike<number>, reference: ArrayLike<number>): number {
  let difference = 0;
  let largest = 0;
  for (let i = 0; i < reference.length; i++) {
    difference = Math.max(difference, Math.abs(values[i] - reference[i]));
    largest = Math.max(largest, Math.abs(reference[i]));
  }
  return difference / largest;
}
