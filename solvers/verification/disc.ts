import type { EitGeometry } from '../../shared/domain/geometry/electrical-impedance';
import type { Shape } from '../../shared/domain/truth-definition';
import { createTruthField, type TruthField } from '../truth/truth-field';

/** Unit disc, electrode 1 at angle 0, counter-clockwise, half of the rim covered, 1 A/m. */
export function unitDisc(overrides: Partial<EitGeometry> = {}): EitGeometry {
  return {
    body: { kind: 'disc', radius: 1 }, electrodes: 16, electrodeCoverage: 0.5, firstElectrodeDeg: 0, numbering: 'counter-clockwise', contactImpedance: 0.01,
    pattern: 'adjacent', current: 1, measurement: 'adjacent-undriven', ...overrides,
  };
}

/** One disc of conductivity `value` in a body of 1 S/m. */
export function discTruth(x: number, y: number, radius: number, value: number): TruthField {
  const shape: Shape = { kind: 'ellipse', label: 'disc', target: true, value, x, y, semiAxisA: radius, semiAxisB: radius, angleDeg: 0 };
  return createTruthField({ kind: 'shapes', background: 1, shapes: [shape] });
}

/** The eccentric disc of the reference values: centre (0.3, 0.2), radius 0.25, 5 S/m. */
export const eccentricDisc = (): TruthField => discTruth(0.3, 0.2, 0.25, 5);
