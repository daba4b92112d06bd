import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ellipse, maxError, shapesTruth, unitGeometry } from '../../support/impedance-case';
import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import type { Shape } from '../../../shared/domain/truth-definition';
import { reciprocityGap } from '../../../solvers/problems/electrical-impedance/reciprocity';
import { simulateElectricalImpedance } from '../../../solvers/problems/electrical-impedance/simulation';
import { createTruthField } from '../../../solvers/truth/truth-field';

const shapes = [ellipse(0.3, 0.2, 0.25, 0.2, 5, 20)];
const coarse = { level: 'coarse' } as const;

describe('simulation of the complete electrode model', () => {
  it('gives the same bits twice', () => {
    const a = simulateElectricalImpedance(shapesTruth(shapes), unitGeometry(), coarse);
    const b = simulateElectricalImpedance(shapesTruth(shapes), unitGeometry(), coarse);
    expect(b.data).toEqual(a.data);
    expect(b.electrodeVoltages).toEqual(a.electrodeVoltages);
  });

  it('scales as the equations do: current, conductivity with contact impedance, and size with contact impedance', () => {
    const base = simulateElectricalImpedance(shapesTruth(shapes), unitGeometry(), coarse).data;
    const current = simulateElectricalImpedance(shapesTruth(shapes), unitGeometry({ current: 4 }), coarse).data;
    // Powers of two only shift exponents; rounding 1e-12 elsewhere.
    expect(maxError(current.map((v) => v / 4), base)).toBeLessThan(1e-12);
    const conductive = simulateElectricalImpedance(shapesTruth(shapes.map((s) => ({ ...s, value: s.value * 8 })), 8), unitGeometry({ contactImpedance: 0.01 / 8 }), coarse).data;
    expect(maxError(conductive.map((v) => v * 8), base)).toBeLessThan(1e-10);
    const small = shapes.map((s) => (s.kind === 'ellipse' ? { ...s, x: s.x / 16, y: s.y / 16, semiAxisA: s.semiAxisA / 16, semiAxisB: s.semiAxisB / 16 } : s));
    const shrunk = simulateElectricalImpedance(shapesTruth(small), unitGeometry({ body: { kind: 'disc', radius: 1 / 16 }, contactImpedance: 0.01 / 16 }), coarse).data;
    expect(maxError(shrunk, base)).toBeLessThan(1e-10);
  });

  it('does not depend on how the experiment is turned', () => {
    const base = simulateElectricalImpedance(shapesTruth([ellipse(0.4, 0, 0.25, 0.2, 5)]), unitGeometry()).data;
    const c = Math.cos((37 * Math.PI) / 180);
    const s = Math.sin((37 * Math.PI) / 180);
    const turned = simulateElectricalImpedance(shapesTruth([ellipse(0.4 * c, 0.4 * s, 0.25, 0.2, 5, 37)]), unitGeometry({ firstElectrodeDeg: 37 })).data;
    // The mesh is made in the frame of the electrodes; rounding may change single triangles, so discretisation error remains.
    expect(maxError(turned, base)).toBeLessThan(2e-5);
    const empty = simulateElectricalImpedance(shapesTruth([]), unitGeometry(), coarse).data;
    expect(simulateElectricalImpedance(shapesTruth([]), unitGeometry({ firstElectrodeDeg: 37 }), coarse).data).toEqual(empty);
  });

  it('mirrors when the electrodes are numbered clockwise', () => {
    const base = simulateElectricalImpedance(shapesTruth([ellipse(0.3, 0.2, 0.2, 0.2, 5)]), unitGeometry()).data;
    const mirrored = simulateElectricalImpedance(shapesTruth([ellipse(0.3, -0.2, 0.2, 0.2, 5)]), unitGeometry({ numbering: 'clockwise' })).data;
    // Two meshes: discretisation error.
    expect(maxError(mirrored, base)).toBeLessThan(2e-5);
  });

  it.each([
    { pattern: 'adjacent', measurement: 'adjacent-undriven' },
    { pattern: 'adjacent', measurement: 'adjacent-all' },
    { pattern: 'trigonometric', measurement: 'adjacent-all' },
    { pattern: 'trigonometric', measurement: 'electrode-voltages' },
  ] as const)('is reciprocal: $pattern, $measurement', (patterns) => {
    const geometry = unitGeometry(patterns);
    const { data, reference } = simulateElectricalImpedance(shapesTruth(shapes), geometry, coarse);
    // Symmetry of the matrix up to rounding of the solves.
    expect(reciprocityGap(geometry, data)).toBeLessThan(1e-10);
    expect(reciprocityGap(geometry, reference)).toBeLessThan(1e-10);
    const spoiled = data.slice();
    spoiled[5] *= 1.001;
    expect(reciprocityGap(geometry, spoiled)).toBeGreaterThan(1e-6);
  });

  it('converges at order three or more where the grading rules the error', () => {
    const at = (f: number): Float64Array =>
      simulateElectricalImpedance(shapesTruth([]), unitGeometry({ electrodes: 8, contactImpedance: 0.1, measurement: 'adjacent-all' }), {
        detail: { grading: 0.5 * f, tipGrading: 0.5 * f, hMin: 4e-4, hMax: 0.4 * f },
      }).data;
    const exact = at(0.2);
    // Order 4 in energy for quadratic elements; node counts are integers and the pattern changes, hence the margin.
    expect(Math.log2(maxError(at(1), exact) / maxError(at(0.5), exact))).toBeGreaterThan(3);
  });

  it('approaches perfectly conducting electrodes as the contact impedance falls', () => {
    const at = (z: number): Float64Array => simulateElectricalImpedance(shapesTruth(shapes), unitGeometry({ contactImpedance: z }), coarse).electrodeVoltages;
    const limit = at(1e-7);
    expect(limit.every(Number.isFinite)).toBe(true);
    expect(maxError(at(1e-5), limit)).toBeLessThan(1e-3);
    expect(maxError(at(1e-6), limit)).toBeLessThan(maxError(at(1e-5), limit));
  });

  it('raises voltages of electrodes by the contact voltage alone when the impedance is large', () => {
    // U_l = z I / |e| + what the body adds, which settles as 1/z; |e| = pi / 16.
    const at = (z: number): number => simulateElectricalImpedance(shapesTruth([]), unitGeometry({ contactImpedance: z }), coarse).electrodeVoltages[0];
    expect(at(10) - at(5)).toBeCloseTo((5 * 16) / Math.PI, 2);
  });

  it('agrees for a smooth bump given as a shape, as an expression and as an array', () => {
    const bump: Shape = { kind: 'bump', label: 'bump', target: true, value: 4, x: 0.2, y: 0.1, semiAxisA: 0.4, semiAxisB: 0.4, angleDeg: 0 };
    const shape = simulateElectricalImpedance(shapesTruth([bump]), unitGeometry(), coarse).data;
    const expression = createTruthField({ kind: 'expression', background: 1, expression: '1 + 3 * max(0, 1 - ((x - 0.2)^2 + (y - 0.1)^2) / 0.16)^2' });
    // The same function on the same mesh.
    expect(maxError(simulateElectricalImpedance(expression, unitGeometry(), coarse).data, shape)).toBeLessThan(1e-9);
    const n = 128;
    const values = new Float64Array(n * n);
    for (let i = 0; i < n; i++)
      for (let j = 0; j < n; j++) {
        const s = ((-1 + (2 * (j + 0.5)) / n - 0.2) ** 2 + (1 - (2 * (i + 0.5)) / n - 0.1) ** 2) / 0.16;
        values[i * n + j] = 1 + 3 * Math.max(0, 1 - s) ** 2;
      }
    const array = createTruthField({ kind: 'array', background: 1, sha256: '0'.repeat(64), rows: n, cols: n, extent: { xMin: -1, xMax: 1, yMin: -1, yMax: 1 }, scale: 1, offset: 0 }, values);
    // Bilinear interpolation: (2/128)^2 / 8 times second derivatives up to 75 is 2e-3 of sigma at the top, less in the data.
    expect(maxError(simulateElectricalImpedance(array, unitGeometry(), coarse).data, shape)).toBeLessThan(1e-3);
  });

  it('stays finite and reciprocal for any shapes, also crossing, touching and outside', () => {
    const place = fc.double({ min: -1.2, max: 1.2, noNaN: true });
    const axis = fc.double({ min: 0.03, max: 0.8, noNaN: true });
    const value = fc.constantFrom(1e-3, 0.1, 0.5, 4, 50);
    const anyShape: fc.Arbitrary<Shape> = fc.oneof(
      fc.record({ x: place, y: place, semiAxisA: axis, semiAxisB: axis, angleDeg: fc.integer({ min: 0, max: 180 }), value }).map((s) => ({ kind: 'ellipse' as const, label: 'e', target: true, ...s })),
      fc.record({ x: place, y: place, semiAxisA: axis, semiAxisB: axis, angleDeg: fc.constant(0), value }).map((s) => ({ kind: 'bump' as const, label: 'b', target: true, ...s })),
      fc.record({ x: place, y: place, innerRadius: fc.double({ min: 0.02, max: 0.3, noNaN: true }), outerRadius: fc.double({ min: 0.31, max: 0.6, noNaN: true }), value }).map((s) => ({ kind: 'annulus' as const, label: 'a', target: true, ...s })),
      fc.record({ x: place, y: place, w: axis, h: axis, value }).map(({ x, y, w, h, value: v }) => ({
        kind: 'polygon' as const, label: 'p', target: true, value: v, vertices: [[x, y], [x + w, y], [x + w, y + h], [x, y + h]] as [number, number][],
      })),
    );
    fc.assert(
      fc.property(fc.array(anyShape, { minLength: 1, maxLength: 4 }), fc.constantFrom<EitGeometry['electrodes']>(8, 16), fc.constantFrom(1e-6, 1e-2, 1), (list, electrodes, contactImpedance) => {
        const geometry = unitGeometry({ electrodes, contactImpedance, measurement: 'adjacent-all' });
        const result = simulateElectricalImpedance(shapesTruth(list), geometry, coarse);
        expect(result.data.every(Number.isFinite)).toBe(true);
        expect(reciprocityGap(geometry, result.data)).toBeLessThan(1e-8);
        expect(result.meshQuality).toBeGreaterThan(0.2);
      }),
      { numRuns: 8, seed: 7 },
    );
  });

  it('meshes coincident and touching outlines', () => {
    const square = (x: number, y: number, v: number): Shape => ({ kind: 'polygon', label: 'q', target: true, value: v, vertices: [[x, y], [x + 0.3, y], [x + 0.3, y + 0.3], [x, y + 0.3]] });
    for (const list of [
      [square(-0.3, 0, 2), square(0, 0, 3), square(0, -0.3, 4), square(-0.3, -0.3, 5)],
      [ellipse(0.2, 0, 0.2, 0.2, 3), ellipse(0.2, 0, 0.2, 0.2, 4), ellipse(-0.2, 0, 0.2, 0.2, 5)],
      [ellipse(0.5, 0, 0.5, 0.5, 3), ellipse(0, 0, 0.9999, 0.9999, 2)],
    ]) {
      const { data } = simulateElectricalImpedance(shapesTruth(list), unitGeometry({ electrodes: 8 }), coarse);
      expect(data.every(Number.isFinite)).toBe(true);
    }
  });
});
