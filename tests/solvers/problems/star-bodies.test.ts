import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ellipse, maxError, shapesTruth, unitGeometry } from '../../support/impedance-case';
import { starBodySchema } from '../../../shared/domain/body';
import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import type { Shape } from '../../../shared/domain/truth-definition';
import { bodyContains } from '../../../solvers/core/grid';
import { simulateByBoundaryIntegrals } from '../../../solvers/problems/electrical-impedance/boundary-integrals/simulate';
import { bodyGrid } from '../../../solvers/problems/electrical-impedance/body-grid';
import { createEitInversion } from '../../../solvers/problems/electrical-impedance/inversion-problem';
import { reciprocityGap } from '../../../solvers/problems/electrical-impedance/reciprocity';
import { simulateElectricalImpedance } from '../../../solvers/problems/electrical-impedance/simulation';
import { requireInOutline } from '../../../solvers/truth/check-in-body';
import { createTruthField } from '../../../solvers/truth/truth-field';
import { truthOnGrid } from '../../../solvers/truth/truth-on-grid';

type Body = EitGeometry['body'];
const coarse = { level: 'coarse' } as const;
const pebble: Body = { kind: 'star', radius: 1, cosine: [0.05, 0.12, -0.04, 0.02, 0, 0.01], sine: [0, 0.03, 0.06, 0, 0, 0, 0, 0.02] };
/** Four deep bays: the hull is far from the body. */
const clover: Body = { kind: 'star', radius: 1, cosine: [0, 0, 0, 0.3], sine: [] };

/** The unit circle about (d cos a, d sin a) in polar form about the origin, r = d cos(t - a) + sqrt(1 - d^2 sin^2(t - a)). */
function offCentreCircle(d: number, a: number): Body {
  const n = 512;
  const radius = Array.from({ length: n }, (_, i) => d * Math.cos((2 * Math.PI * i) / n - a) + Math.sqrt(1 - (d * Math.sin((2 * Math.PI * i) / n - a)) ** 2));
  const mean = radius.reduce((sum, r) => sum + r, 0) / n;
  const share = (k: number, wave: (t: number) => number): number => (radius.reduce((sum, r, i) => sum + r * wave((2 * Math.PI * k * i) / n), 0) * 2) / n / mean;
  const orders = [1, 2, 3, 4, 5, 6, 7, 8];
  return { kind: 'star', radius: mean, cosine: orders.map((k) => share(k, Math.cos)), sine: orders.map((k) => share(k, Math.sin)) };
}

/** The star turned by an angle, rad. */
function turned(body: Body, angle: number): Body {
  if (body.kind !== 'star') return body;
  const orders = Array.from({ length: 8 }, (_, k) => k + 1);
  const a = (k: number): number => body.cosine[k - 1] ?? 0;
  const b = (k: number): number => body.sine[k - 1] ?? 0;
  return {
    ...body,
    cosine: orders.map((k) => a(k) * Math.cos(k * angle) - b(k) * Math.sin(k * angle)),
    sine: orders.map((k) => b(k) * Math.cos(k * angle) + a(k) * Math.sin(k * angle)),
  };
}

describe('simulation in star-shaped bodies', () => {
  it('gives the bits of the disc when all coefficients are zero', () => {
    const shapes = [ellipse(0.3, 0.2, 0.25, 0.2, 5)];
    const disc = simulateElectricalImpedance(shapesTruth(shapes), unitGeometry({ electrodes: 8 }), coarse);
    const star = simulateElectricalImpedance(shapesTruth(shapes), unitGeometry({ electrodes: 8, body: { kind: 'star', radius: 1, cosine: [0, 0], sine: [0] } }), coarse);
    expect(star.data).toEqual(disc.data);
  });

  it('gives the voltages of the disc for a disc whose centre is not the origin', () => {
    const [d, a, first] = [0.3, 1.2, (20 * Math.PI) / 180];
    const [ox, oy] = [d * Math.cos(a), d * Math.sin(a)];
    const disc = simulateElectricalImpedance(shapesTruth([ellipse(0.3, 0.2, 0.2, 0.15, 5, 20)]), unitGeometry({ firstElectrodeDeg: 20 }));
    const star = simulateElectricalImpedance(
      shapesTruth([ellipse(0.3 + ox, 0.2 + oy, 0.2, 0.15, 5, 20)]),
      unitGeometry({ body: offCentreCircle(d, a), firstElectrodeDeg: (Math.atan2(oy + Math.sin(first), ox + Math.cos(first)) * 180) / Math.PI }),
    );
    // Two meshes of errors about 1e-5, which are alike; the series left out are below 1e-6.
    expect(maxError(star.data, disc.data)).toBeLessThan(2e-5);
    expect(maxError(star.reference, disc.reference)).toBeLessThan(2e-5);
  });

  it.each([['pebble', pebble], ['clover', clover]] as const)('agrees with boundary integral equations: %s', (_, body) => {
    const geometry = unitGeometry({ body, electrodes: 12, firstElectrodeDeg: 20, numbering: 'clockwise', contactImpedance: Array.from({ length: 12 }, (__, l) => [0.003, 0.01, 0.05][l % 3]), measurement: 'adjacent-all' });
    const truth = shapesTruth([ellipse(0.3, 0.2, 0.2, 0.15, 5, 20)]);
    const elements = simulateElectricalImpedance(truth, geometry);
    const integrals = simulateByBoundaryIntegrals(truth, geometry);
    // Another method without a mesh in common; the error that simulations promise.
    expect(maxError(elements.data, integrals.data)).toBeLessThan(1e-4);
    expect(maxError(elements.reference, integrals.reference)).toBeLessThan(1e-4);
    expect(elements.meshQuality).toBeGreaterThan(0.4);
  });

  it('does not depend on how the experiment is turned', () => {
    const base = simulateElectricalImpedance(shapesTruth([ellipse(0.3, 0, 0.25, 0.2, 5)]), unitGeometry({ body: pebble, electrodes: 8 }), coarse).data;
    const at = (degrees: number): Float64Array => {
      const angle = (degrees * Math.PI) / 180;
      const shape = ellipse(0.3 * Math.cos(angle), 0.3 * Math.sin(angle), 0.25, 0.2, 5, degrees);
      return simulateElectricalImpedance(shapesTruth([shape]), unitGeometry({ body: turned(pebble, angle), electrodes: 8, firstElectrodeDeg: degrees }), coarse).data;
    };
    // The mesh is made in the frame of the electrodes; rounding may change single triangles, so discretisation error remains.
    expect(maxError(at(37), base)).toBeLessThan(1e-4);
    expect(maxError(at(-110), base)).toBeLessThan(1e-4);
  });

  it('meshes shapes in a bay, across the boundary and around the body', () => {
    const square = (x: number, y: number, side: number): Shape => ({ kind: 'polygon', label: 'q', target: true, value: 3, vertices: [[x, y], [x + side, y], [x + side, y + side], [x, y + side]] });
    for (const shapes of [[ellipse(0.6, 0.6, 0.3, 0.2, 0.2)], [square(0.2, 0.2, 0.6)], [ellipse(0, 0, 0.9, 0.9, 4)], [ellipse(1.1, 0, 0.3, 0.3, 10), square(-0.5, -0.5, 0.3)]]) {
      const result = simulateElectricalImpedance(shapesTruth(shapes), unitGeometry({ body: clover, electrodes: 8, measurement: 'adjacent-all' }), coarse);
      expect(result.data.every(Number.isFinite)).toBe(true);
      expect(result.meshQuality).toBeGreaterThan(0.2);
    }
  });
});

describe('any outline that the form takes', () => {
  it('is meshed well and gives finite, reciprocal voltages', () => {
    // Coefficients that fall like those of a smooth curve; what the schema refuses is skipped.
    const series = fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 8, maxLength: 8 });
    const anyOutline = fc.record({ a: series, b: series, size: fc.double({ min: 0, max: 0.5 }) })
      .map(({ a, b, size }) => ({ kind: 'star' as const, radius: 1, cosine: a.map((v, k) => (size * v) / (k + 1)), sine: b.map((v, k) => (size * v) / (k + 1)) }))
      .filter((body) => starBodySchema.safeParse(body).success);
    fc.assert(
      fc.property(anyOutline, fc.constantFrom(8, 10), fc.constantFrom(1e-5, 1e-2), (body, electrodes, contactImpedance) => {
        const geometry = unitGeometry({ body, electrodes, contactImpedance, measurement: 'adjacent-all' });
        const result = simulateElectricalImpedance(shapesTruth([ellipse(0.1, 0.2, 0.3, 0.15, 5, 30), ellipse(0.6, -0.5, 0.3, 0.3, 0.2)]), geometry, coarse);
        expect(result.data.every(Number.isFinite)).toBe(true);
        expect(reciprocityGap(geometry, result.data)).toBeLessThan(1e-8);
        expect(result.meshQuality).toBeGreaterThan(0.2);
      }),
      { numRuns: 6, seed: 11 },
    );
  });
});

describe('inversion in star-shaped bodies', () => {
  const geometry = unitGeometry({ body: clover, firstElectrodeDeg: 90, numbering: 'clockwise' });
  const problem = createEitInversion(geometry, 1, 'difference');
  const area = (4 * Math.PI * (1 + 0.3 ** 2 / 2)) / 4;

  it('has cells that fill the body', () => {
    // Half the integral of r^2 over the angle. The elements follow the boundary to third order.
    expect(problem.unknownWeights.reduce((sum, value) => sum + value, 0) / area).toBeCloseTo(1, 4);
    expect(problem.unknowns).toBeGreaterThan(1200);
    expect(problem.unknowns).toBeLessThan(2400);
  });

  it('puts cells on pixels by their place, also across bays', () => {
    const image = new Float64Array(problem.grid.inside.length);
    const truth = createTruthField({ kind: 'expression', background: 1, expression: '2 + x + 0.5 * y' });
    problem.toImage(problem.project(truth), image);
    const wanted = truthOnGrid(truth, problem.grid);
    // A cell is up to 0.084 wide and the truth changes by 1.1 over a radius: cells hold their mean to 0.05 at their rims.
    for (let i = 0; i < image.length; i++) expect(Math.abs(image[i] - wanted[i])).toBeLessThan(0.09);
    expect(problem.grid.inside.length * (((problem.grid.xMax - problem.grid.xMin) / problem.grid.nx) ** 2) / area).toBeCloseTo(1, 2);
  });

  it('agrees with the simulation on the background', () => {
    expect(maxError(problem.frameOf(problem.background()), simulateElectricalImpedance(shapesTruth([]), geometry).data)).toBeLessThan(5e-4);
  });
});

describe('grid and shapes of a star-shaped body', () => {
  it('covers the square about the origin that holds the outline', () => {
    const grid = bodyGrid({ body: offCentreCircle(0.3, 0) });
    // The circle reaches from -0.7 to 1.3.
    expect(grid.xMax).toBeCloseTo(1.3, 5);
    expect(grid.xMin).toBe(-grid.xMax);
    expect(grid.bodyRadius).toBe(grid.xMax);
    expect(bodyGrid({ body: { kind: 'star', radius: 2, cosine: [0], sine: [] } })).toEqual(bodyGrid({ body: { kind: 'disc', radius: 2 } }));
  });

  it.each([
    ['lies outside', ellipse(0.75, 0.75, 0.1, 0.1, 2)],
    ['covers', ellipse(0, 0, 2, 2, 2)],
    ['lies outside', { kind: 'annulus', label: 'a', value: 2, target: true, x: 0, y: 0, innerRadius: 1.5, outerRadius: 2 } as const],
    ['lies outside', { kind: 'bump', label: 'b', value: 2, target: true, x: 0.8, y: 0.8, semiAxisA: 0.1, semiAxisB: 0.1, angleDeg: 0 } as const],
  ])('refuses a shape that %s the body', (words, shape) => {
    const definition = { kind: 'shapes', background: 1, shapes: [shape] } as const;
    expect(() => requireInOutline({ ...definition, shapes: [shape] }, bodyContains(clover), 1, () => createTruthField({ ...definition, shapes: [shape] }))).toThrow(words);
  });

  it('takes shapes that lie in the body in part', () => {
    for (const shape of [ellipse(0.6, 0.6, 0.2, 0.2, 2), ellipse(1.2, 0, 0.2, 0.2, 2), ellipse(0.1, 0.2, 0.01, 0.01, 2)])
      requireInOutline({ kind: 'shapes', background: 1, shapes: [shape] }, bodyContains(clover), 1, () => shapesTruth([shape]));
  });
});
