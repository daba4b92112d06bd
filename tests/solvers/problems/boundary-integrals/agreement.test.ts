import { describe, expect, it } from 'vitest';
import { ellipse, maxError, shapesTruth, unitGeometry } from '../../../support/impedance-case';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { Shape } from '../../../../shared/domain/truth-definition';
import { simulateByBoundaryIntegrals } from '../../../../solvers/problems/electrical-impedance/boundary-integrals/simulate';
import { simulateElectricalImpedance } from '../../../../solvers/problems/electrical-impedance/simulation';

const annulus: Shape = { kind: 'annulus', label: 'ring', target: true, value: 3, x: 0.1, y: 0, innerRadius: 0.3, outerRadius: 0.5 };
const twoEllipses = [ellipse(0.3, 0.2, 0.25, 0.15, 5, 20), ellipse(-0.4, -0.1, 0.3, 0.1, 0.2, 70)];
const star: EitGeometry['body'] = { kind: 'star', radius: 1, cosine: [0, 0.15, 0.05], sine: [0.05, -0.1] };

describe('boundary integrals and finite elements', () => {
  // Finite elements may be off by 1e-4 of the largest voltage; no discretisation is shared.
  it.each<[string, Shape[], Partial<EitGeometry>]>([
    ['two ellipses', twoEllipses, { electrodes: 16 }],
    ['an annulus', [annulus], {}],
    ['nested ellipses in a star-shaped body', [ellipse(0, 0, 0.6, 0.5, 2), ellipse(0.2, 0.1, 0.3, 0.2, 6)], { body: star }],
    [
      'listed angles and contact impedances, clockwise',
      [ellipse(0.2, 0, 0.3, 0.3, 5)],
      { numbering: 'clockwise', electrodeCoverage: 0.4, electrodeAnglesDeg: [320, 270, 230, 190, 140, 95, 60, 10], contactImpedance: [0.01, 0.02, 0.05, 0.01, 0.1, 0.01, 0.03, 0.01] },
    ],
  ])('agree to 1e-4 of the largest voltage: %s', (_, shapes, overrides) => {
    const geometry = unitGeometry({ electrodes: 8, measurement: 'adjacent-all', ...overrides });
    const panels = simulateByBoundaryIntegrals(shapesTruth(shapes), geometry);
    const elements = simulateElectricalImpedance(shapesTruth(shapes), geometry);
    expect(maxError(elements.data, panels.data)).toBeLessThan(1e-4);
    expect(maxError(elements.reference, panels.reference)).toBeLessThan(1e-4);
  });
});
