import { describe, expect, it } from 'vitest';
import { ellipse, maxError, shapesTruth, unitGeometry } from '../../../support/impedance-case';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { Shape } from '../../../../shared/domain/truth-definition';
import { servedByBoundaryIntegrals, simulateByBoundaryIntegrals } from '../../../../solvers/problems/electrical-impedance/boundary-integrals/simulate';
import { reciprocityGap } from '../../../../solvers/problems/electrical-impedance/reciprocity';
import { createTruthField } from '../../../../solvers/truth/truth-field';

const annulus = (x: number, y: number, innerRadius: number, outerRadius: number, value: number): Shape => ({ kind: 'annulus', label: 'ring', target: true, value, x, y, innerRadius, outerRadius });
const twoEllipses = [ellipse(0.3, 0.2, 0.25, 0.15, 5, 20), ellipse(-0.4, -0.1, 0.3, 0.1, 0.2, 70)];
const star: EitGeometry['body'] = { kind: 'star', radius: 1, cosine: [0, 0.15, 0.05], sine: [0.05, -0.1] };

const simulate = (shapes: Shape[], overrides: Partial<EitGeometry> = {}, level?: 'coarse' | 'normal' | 'fine') =>
  simulateByBoundaryIntegrals(shapesTruth(shapes), unitGeometry({ measurement: 'adjacent-all', ...overrides }), { level });

describe('boundary integral simulation', () => {
  it.each<[string, Shape[], Partial<EitGeometry>]>([
    ['two ellipses', twoEllipses, {}],
    ['a disc 0.05 from the electrodes', [ellipse(0.65, 0, 0.3, 0.3, 5)], {}],
    ['two discs 0.05 apart', [ellipse(-0.325, 0, 0.3, 0.3, 50), ellipse(0.325, 0, 0.3, 0.3, 0.02)], {}],
    ['a thin ellipse', [ellipse(0, 0, 0.5, 0.08, 10, 30)], {}],
    ['nearly perfect conductor and insulator', [ellipse(0.4, 0, 0.3, 0.3, 1e6), ellipse(-0.4, 0, 0.3, 0.3, 1e-6)], {}],
    ['nearly perfect contact', [ellipse(0.2, 0, 0.3, 0.3, 5)], { contactImpedance: 1e-7 }],
    ['poor contact', [ellipse(0.2, 0, 0.3, 0.3, 5)], { contactImpedance: 10 }],
    ['narrow gaps', [ellipse(0.2, 0, 0.3, 0.3, 5)], { electrodeCoverage: 0.9 }],
    ['narrow electrodes', [ellipse(0.2, 0, 0.3, 0.3, 5)], { electrodeCoverage: 0.1 }],
    ['a star-shaped body', twoEllipses, { body: star }],
  ])('changes by less than 1e-7 when the panels are halved, and is reciprocal: %s', (_, shapes, overrides) => {
    const geometry = unitGeometry({ electrodes: 8, measurement: 'adjacent-all', ...overrides });
    const normal = simulate(shapes, geometry);
    expect(maxError(normal.data, simulate(shapes, geometry, 'fine').data)).toBeLessThan(1e-7);
    expect(reciprocityGap(geometry, normal.data)).toBeLessThan(1e-9);
    expect(reciprocityGap(geometry, normal.reference)).toBeLessThan(1e-9);
    expect(normal.unknowns).toBeLessThan(1500);
  });

  it('serves 64 electrodes', () => {
    const geometry = unitGeometry({ electrodes: 64, measurement: 'adjacent-all' });
    const { data, unknowns } = simulate([ellipse(0.2, 0, 0.3, 0.3, 5)], geometry);
    expect(reciprocityGap(geometry, data)).toBeLessThan(1e-9);
    expect(unknowns).toBeLessThan(1500);
  });

  it('gives the same bits twice, and scales as the equations do', () => {
    const base = simulate(twoEllipses);
    expect(simulate(twoEllipses).electrodeVoltages).toEqual(base.electrodeVoltages);
    const small = twoEllipses.map((s) => (s.kind === 'ellipse' ? { ...s, x: s.x / 16, y: s.y / 16, semiAxisA: s.semiAxisA / 16, semiAxisB: s.semiAxisB / 16 } : s));
    expect(maxError(simulate(small, { body: { kind: 'disc', radius: 1 / 16 }, contactImpedance: 0.01 / 16 }).data, base.data)).toBeLessThan(1e-12);
    const conductive = simulateByBoundaryIntegrals(shapesTruth(twoEllipses.map((s) => ({ ...s, value: 8 * s.value })), 8), unitGeometry({ measurement: 'adjacent-all', contactImpedance: 0.01 / 8 }));
    expect(maxError(conductive.data.map((v) => 8 * v), base.data)).toBeLessThan(1e-12);
  });

  it('does not depend on how the experiment is turned or mirrored', () => {
    const base = simulate([ellipse(0.4, 0.1, 0.25, 0.2, 5, 10)]).data;
    const c = Math.cos((37 * Math.PI) / 180);
    const s = Math.sin((37 * Math.PI) / 180);
    const turned = simulate([ellipse(0.4 * c - 0.1 * s, 0.4 * s + 0.1 * c, 0.25, 0.2, 5, 47)], { firstElectrodeDeg: 37 }).data;
    // Other panels on the boundary.
    expect(maxError(turned, base)).toBeLessThan(1e-9);
    const mirrored = simulate([ellipse(0.4, -0.1, 0.25, 0.2, 5, -10)], { numbering: 'clockwise' }).data;
    expect(maxError(mirrored, base)).toBeLessThan(1e-9);
  });

  it('gives a star without coefficients the voltages of the disc', () => {
    const disc = simulate(twoEllipses).data;
    expect(simulate(twoEllipses, { body: { kind: 'star', radius: 1, cosine: [0], sine: [] } }).data).toEqual(disc);
    // A disc about another origin is a star: r = e cos t + sqrt(1 - e^2 sin^2 t), of which eight harmonics are kept; the tenth is of order e^10.
    const e = 0.05;
    const series = (k: number): number => {
      let sum = 0;
      for (let i = 0; i < 64; i++) sum += Math.cos((k * i * Math.PI) / 32) * (e * Math.cos((i * Math.PI) / 32) + Math.sqrt(1 - e * e * Math.sin((i * Math.PI) / 32) ** 2));
      return sum / 32;
    };
    const mean = series(0) / 2;
    const cosine = [1, 2, 3, 4, 5, 6, 7, 8].map((k) => series(k) / mean);
    const moved = twoEllipses.map((s) => (s.kind === 'ellipse' ? { ...s, x: s.x + e } : s));
    const shifted = simulateByBoundaryIntegrals(shapesTruth(moved), unitGeometry({ measurement: 'adjacent-all', body: { kind: 'star', radius: mean, cosine, sine: [] } })).data;
    expect(maxError(shifted, disc)).toBeLessThan(1e-9);
  });

  it('leaves out what later shapes hide, and what does not differ from its surroundings', () => {
    const seen = simulate([ellipse(0.2, 0.1, 0.3, 0.2, 2)]);
    const hidden = simulate([ellipse(0.2, 0.1, 0.1, 0.1, 6), ellipse(0.2, 0.1, 0.3, 0.2, 2)]);
    expect(hidden.data).toEqual(seen.data);
    expect(hidden.unknowns).toBe(seen.unknowns);
    expect(simulate([ellipse(-0.5, 0, 0.2, 0.2, 1), ellipse(0.2, 0.1, 0.3, 0.2, 2)]).data).toEqual(seen.data);
    expect(seen.data).not.toEqual(seen.reference);
    const none = simulate([ellipse(-0.5, 0, 0.2, 0.2, 1)]);
    expect(none.data).toEqual(none.reference);
  });

  it('takes a hole that is filled exactly, and the same outline twice, as one outline', () => {
    const filled = simulate([annulus(0.1, 0, 0.3, 0.5, 3), ellipse(0.1, 0, 0.3, 0.3, 0.2)]);
    const nested = simulate([ellipse(0.1, 0, 0.5, 0.5, 3), ellipse(0.1, 0, 0.3, 0.3, 0.2)]);
    expect(maxError(filled.data, nested.data)).toBeLessThan(1e-12);
    expect(simulate([ellipse(0.1, 0, 0.3, 0.2, 7), ellipse(0.1, 0, 0.3, 0.2, 3)]).data).toEqual(simulate([ellipse(0.1, 0, 0.3, 0.2, 3)]).data);
  });
});

describe('what boundary integrals do not serve', () => {
  const reason = (shapes: Shape[], overrides: Partial<EitGeometry> = {}): string | null => servedByBoundaryIntegrals(shapesTruth(shapes), unitGeometry(overrides));
  const square: Shape = { kind: 'polygon', label: 'square', target: true, value: 2, vertices: [[0, 0], [0.3, 0], [0.3, 0.3], [0, 0.3]] };

  it.each<[string, Shape[], RegExp]>([
    ['shapes that cross', [ellipse(-0.2, 0, 0.3, 0.3, 50), ellipse(0.3, 0, 0.3, 0.3, 20)], /touch or cross/],
    ['shapes that touch', [ellipse(-0.3, 0, 0.3, 0.3, 50), ellipse(0.3, 0, 0.3, 0.3, 20)], /touch or cross|too close/],
    ['a shape that touches another from within', [ellipse(0, 0, 0.4, 0.4, 50), ellipse(0.2, 0, 0.2, 0.2, 20)], /touch or cross|too close/],
    ['a shape that crosses the boundary', [ellipse(-0.9, 0, 0.3, 0.3, 50)], /leaves the body|touch or cross/],
    ['a shape that touches the boundary', [ellipse(0.7, 0, 0.3, 0.3, 50)], /leaves the body|touch or cross|too close/],
    ['a polygon', [square], /corners/],
    ['a smooth bump', [{ kind: 'bump', label: 'bump', target: true, value: 4, x: 0, y: 0, semiAxisA: 0.4, semiAxisB: 0.4, angleDeg: 0 }], /varies/],
  ])('gives the reason: %s', (_, shapes, why) => {
    expect(reason(shapes)).toMatch(why);
    expect(() => simulate(shapes)).toThrow(RangeError);
  });

  it('serves a polygon that cannot be seen, and refuses what is no set of shapes', () => {
    expect(reason([square, ellipse(0.1, 0.1, 0.4, 0.4, 3)])).toBeNull();
    expect(servedByBoundaryIntegrals(createTruthField({ kind: 'expression', background: 1, expression: '1 + x^2' }), unitGeometry())).toMatch(/varies/);
  });
});
