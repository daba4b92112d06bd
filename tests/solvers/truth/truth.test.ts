import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { conductivityTruthSchema as truthSchema, type TruthDefinition } from '../../../shared/domain/truth-definition';
import { createEvaluationGrid } from '../../../solvers/core/grid';
import { requireInBody } from '../../../solvers/truth/check-in-body';
import { createTruthField } from '../../../solvers/truth/truth-field';
import { truthOnGrid } from '../../../solvers/truth/truth-on-grid';

const shapes = (...list: unknown[]): TruthDefinition => truthSchema.parse({ kind: 'shapes', background: 1, shapes: list });
const ellipse = (over: Record<string, unknown> = {}) => ({ kind: 'ellipse', label: 'e', value: 3, x: 0.2, y: -0.1, semiAxisA: 0.4, semiAxisB: 0.2, angleDeg: 30, ...over });
const grid = createEvaluationGrid(1);
const pixelArea = (2 / 64) ** 2;
const integral = (definition: TruthDefinition): number => truthOnGrid(createTruthField(definition), grid).reduce((s, v) => s + (v - 1) * pixelArea, 0);

describe('evaluation grid', () => {
  it('holds the pixels whose centre lies in the disc, row 0 at the lowest y', () => {
    const small = createEvaluationGrid(2, 4);
    // Centres at -1.5, -0.5, 0.5, 1.5: only the four corners (distance 2.12) lie outside.
    expect(Array.from(small.mask)).toEqual([0, 1, 1, 0, 1, 1, 1, 1, 1, 1, 1, 1, 0, 1, 1, 0]);
    expect(Array.from(small.inside)).toEqual([1, 2, 4, 5, 6, 7, 8, 9, 10, 11, 13, 14]);
    expect(() => createEvaluationGrid(0)).toThrow(/radius/);
    expect(() => createEvaluationGrid(1, 0)).toThrow(/pixels/);
  });
});

describe('shapes', () => {
  it('average to their exact areas on the grid', () => {
    // Sub-sampling 16 x 16 leaves up to about 1/16 of a pixel per rim pixel where an edge runs along the samples, random in
    // sign; over the 50 to 150 rim pixels of these shapes (250 to 700 pixels) that is below 2e-3.
    const one = (ratio: number) => expect(Math.abs(ratio - 1)).toBeLessThan(2e-3);
    one(integral(shapes(ellipse())) / (2 * Math.PI * 0.08));
    one(integral(shapes({ kind: 'polygon', label: 'p', value: 2, vertices: [[0, 0], [0.6, 0.1], [0.2, 0.5]] })) / (0.5 * Math.abs(0.6 * 0.5 - 0.1 * 0.2)));
    one(integral(shapes({ kind: 'annulus', label: 'a', value: 2, x: 0.1, y: 0, innerRadius: 0.2, outerRadius: 0.5 })) / (Math.PI * 0.21));
    // Integral of (1 - s^2)^2 over the unit disc is pi / 3.
    one(integral(shapes({ kind: 'bump', label: 'b', value: 4, x: 0.1, y: 0.2, semiAxisA: 0.5, semiAxisB: 0.3 })) / ((3 * Math.PI * 0.15) / 3));
  });

  it('declare targets whose area times contrast is the integral of the contrast', () => {
    for (const shape of [
      ellipse(),
      { kind: 'bump', label: 'b', value: 4, x: 0.1, y: 0.2, semiAxisA: 0.5, semiAxisB: 0.3 },
      { kind: 'polygon', label: 'p', value: 0.5, vertices: [[0.2, 0.5], [0.6, 0.1], [-0.2, -0.3]] },
    ]) {
      const definition = shapes(shape);
      const field = createTruthField(definition);
      const [target] = field.targets;
      expect(integral(definition) / (target.area * target.contrast)).toBeCloseTo(1, 3);
      const image = truthOnGrid(field, grid);
      let mx = 0;
      let total = 0;
      grid.inside.forEach((index, k) => {
        mx += (image[k] - 1) * (-1 + ((index % 64) + 0.5) / 32);
        total += image[k] - 1;
      });
      expect(mx / total).toBeCloseTo(target.x, 3);
    }
    expect(createTruthField(shapes(ellipse({ target: false }))).targets).toEqual([]);
  });

  it('lie one on another in order; a bump blends with what is below', () => {
    const field = createTruthField(shapes(ellipse({ x: 0, y: 0, value: 3 }), ellipse({ x: 0, y: 0, semiAxisA: 0.1, semiAxisB: 0.1, value: 7 }), { kind: 'bump', label: 'b', value: 1, x: 0.25, y: 0.1, semiAxisA: 0.05, semiAxisB: 0.05 }));
    expect(field.valueAt(0, 0)).toBe(7);
    expect(field.valueAt(0.2, 0.1)).toBe(3);
    expect(field.valueAt(0.25, 0.1)).toBe(1);
    expect(field.valueAt(0.9, 0)).toBe(1);
    expect(field.piecewiseConstant).toBe(false);
    expect(field.interfaces.length).toBe(2);
  });

  it('refuse crossing, folded and flat polygons and name the vertices', () => {
    const polygon = (vertices: number[][]) => () => createTruthField(shapes({ kind: 'polygon', label: 'bow tie', value: 2, vertices }));
    expect(polygon([[0, 0], [1, 1], [1, 0], [0, 1]])).toThrow(/Shape 1 \(bow tie\): the edges after vertices 1 and 3 meet/);
    expect(polygon([[0, 0], [0, 0], [1, 0]])).toThrow(/vertices 1 and 2 coincide/);
    expect(polygon([[0, 0], [1, 0], [0.5, 0]])).toThrow(RangeError);
  });
});

describe('interfaces', () => {
  const curves = () =>
    createTruthField(
      shapes(ellipse(), ellipse({ semiAxisA: 0.05, semiAxisB: 0.6 }), { kind: 'polygon', label: 'p', value: 2, vertices: [[0.2, 0.5], [0.6, 0.1], [-0.2, -0.3]] }, { kind: 'annulus', label: 'a', value: 2, x: 0.1, y: 0, innerRadius: 0.2, outerRadius: 0.5 }),
    ).interfaces;

  it('give points on the curve, counter-clockwise, no further apart than asked, also under strong grading', () => {
    const spacing = (x: number, y: number) => Math.max(1e-3, 0.3 * Math.hypot(x - 0.5, y - 0.2));
    for (const curve of curves()) {
      const points = curve.points(spacing);
      const n = points.length / 2;
      let area = 0;
      for (let i = 0; i < n; i++) {
        const j = (i + 1) % n;
        const [ax, ay, bx, by] = [points[2 * i], points[2 * i + 1], points[2 * j], points[2 * j + 1]];
        area += ax * by - ay * bx;
        expect(Math.hypot(bx - ax, by - ay)).toBeLessThanOrEqual(Math.max(spacing(ax, ay), spacing(bx, by)) * (1 + 1e-12));
        const [px, py] = curve.project(ax, ay);
        expect(Math.hypot(px - ax, py - ay)).toBeLessThan(1e-13);
      }
      expect(area).toBeGreaterThan(0);
    }
  });

  it('hold every corner of a polygon', () => {
    const points = curves()[2].points(() => 0.07);
    for (const [x, y] of [[0.2, 0.5], [0.6, 0.1], [-0.2, -0.3]]) {
      let found = false;
      for (let i = 0; i < points.length; i += 2) found ||= points[i] === x && points[i + 1] === y;
      expect(found).toBe(true);
    }
  });

  it('project to the nearest point of the curve, against a dense search', () => {
    fc.assert(
      fc.property(fc.double({ min: -1, max: 1, noNaN: true }), fc.double({ min: -1, max: 1, noNaN: true }), fc.integer({ min: 0, max: 4 }), (x, y, which) => {
        const curve = curves()[which];
        const [px, py] = curve.project(x, y);
        const points = curve.points(() => 2e-3);
        let best = Infinity;
        for (let i = 0; i < points.length; i += 2) best = Math.min(best, Math.hypot(points[i] - x, points[i + 1] - y));
        const found = Math.hypot(px - x, py - y);
        // The search hits the curve within half its spacing along the curve.
        expect(found).toBeLessThanOrEqual(best + 1e-12);
        expect(found).toBeGreaterThanOrEqual(best - 1e-3 - 1e-12);
      }),
      { numRuns: 60 },
    );
  });

  it('tell inside from outside', () => {
    const [e] = curves();
    expect(e.inside(0.2, -0.1)).toBe(true);
    expect(e.inside(0.2 + 0.4, -0.1)).toBe(false);
  });
});

describe('expressions and arrays as ground truth', () => {
  it('an expression is evaluated in x, y, r and theta, and a value that is no conductivity is reported with its place', () => {
    const field = createTruthField({ kind: 'expression', background: 1, expression: '1 + 0.5 cos(2 theta) r^2' });
    expect(field.valueAt(0.6, 0)).toBeCloseTo(1.18, 14);
    expect(() => createTruthField({ kind: 'expression', background: 1, expression: 'x' }).valueAt(-0.5, 0.25)).toThrow(/-0.5 S\/m at x = -0.5 m, y = 0.25 m/);
    expect(() => createTruthField({ kind: 'expression', background: 1, expression: '1 / (x - x)' }).valueAt(0, 0)).toThrow(/Infinity|NaN/);
  });

  it('an array runs from the top down, is bilinear between pixel centres and is the background outside', () => {
    const definition = { kind: 'array', background: 9, sha256: '0'.repeat(64), rows: 2, cols: 2, extent: { xMin: -1, xMax: 1, yMin: -1, yMax: 1 }, scale: 2, offset: 1 } as const;
    const field = createTruthField(definition, Float64Array.of(1, 2, 3, 4));
    expect(field.valueAt(-0.5, 0.5)).toBe(3);
    expect(field.valueAt(0.5, 0.5)).toBe(5);
    expect(field.valueAt(-0.5, -0.5)).toBe(7);
    expect(field.valueAt(0, 0)).toBe(6);
    expect(field.valueAt(-0.99, 0.99)).toBe(3);
    expect(field.valueAt(1.5, 0)).toBe(9);
    expect(field.interfaces.length).toBe(1);
    expect(() => createTruthField(definition, Float64Array.of(1, 2, -3, 4))).toThrow(/Row 2, column 1/);
    expect(() => createTruthField(definition, Float64Array.of(1, 2))).toThrow(/2 values, not rows x cols/);
    expect(() => createTruthField(definition)).toThrow(/are needed/);
  });

  it('averages a step in an expression over the pixel', () => {
    const image = truthOnGrid(createTruthField({ kind: 'expression', background: 1, expression: '1 + step(x - 0.01)' }), grid);
    // The step crosses the pixels 0 < x < 1/32 at 0.32 of their width; 16 samples resolve it to 1/32.
    const row = grid.inside.findIndex((index) => index % 64 === 32 && Math.floor(index / 64) === 32);
    expect(Math.abs(image[row] - 1.68)).toBeLessThan(1 / 32);
  });
});

describe('shapes against the body', () => {
  const check = (shape: Record<string, unknown>) => () => {
    const definition = shapes(shape);
    requireInBody(definition, 1, () => createTruthField(definition));
  };
  it('refuse a shape outside the body or over all of it, and accept one across the boundary', () => {
    expect(check(ellipse({ x: 1.5 }))).toThrow(/Shape 1 \(e\) lies outside the body of radius 1 m/);
    expect(check(ellipse({ x: 0, y: 0, semiAxisA: 2, semiAxisB: 2 }))).toThrow(/covers the body/);
    expect(check({ kind: 'annulus', label: 'a', value: 2, x: 0, y: 0, innerRadius: 1.2, outerRadius: 2 })).toThrow(/outside/);
    expect(check({ kind: 'bump', label: 'b', value: 2, x: 2, y: 0, semiAxisA: 0.5, semiAxisB: 0.5 })).toThrow(/outside/);
    expect(check(ellipse({ x: 0.9 }))).not.toThrow();
    expect(check({ kind: 'annulus', label: 'a', value: 2, x: 0, y: 0, innerRadius: 0.9, outerRadius: 2 })).not.toThrow();
  });
});
