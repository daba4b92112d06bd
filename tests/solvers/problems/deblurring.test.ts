import { describe, expect, it } from 'vitest';
import type { EdgeKey, PointSpreadKey } from '../../../shared/domain/geometry/deblurring';
import { phantomDefinitionSchema, type DefinitionOf, type PhantomDefinitionInput } from '../../../shared/domain/phantom-definition';
import { prepareRun, runLevel } from '../../../solvers/campaign/run';
import { adjointCheck } from '../../../solvers/checks/adjoint';
import { blurredEdge } from '../../../solvers/checks/blurred-edge';
import { taylorCheck } from '../../../solvers/checks/taylor';
import { erf } from '../../../solvers/core/math';
import { denseMatrix } from '../../../solvers/core/matrix-operator';
import { norm2 } from '../../../solvers/core/vector';
import { getMethod } from '../../../solvers/methods/registry';
import { blurOperator } from '../../../solvers/problems/deblurring/blur-operator';
import { discInRectangle } from '../../../solvers/problems/deblurring/disc-spread';
import { edgeIndex } from '../../../solvers/problems/deblurring/edges';
import { pictureOf } from '../../../solvers/problems/deblurring/picture';
import { pointSpreadOf } from '../../../solvers/problems/deblurring/point-spread';
import { blurField, simulateBlur } from '../../../solvers/problems/deblurring/simulation';
import { createProblem, dataLayout, describeProblem, problemFacts, problemLine, simulate } from '../../../solvers/problems/registry';
import { createTruthField } from '../../../solvers/truth/truth-field';
import { TruthError } from '../../../solvers/truth/truth-error';
import reference from '../../reference/deblurring.json';

type Definition = DefinitionOf<'deblurring'>;
type Input = Extract<PhantomDefinitionInput, { family: 'deblurring' }>;
type Geometry = Definition['geometry'];

const square = { kind: 'rectangle', width: 1, height: 1 } as const;
const shapes = {
  kind: 'shapes', background: 0.2,
  shapes: [
    { kind: 'ellipse', label: 'oval', value: 1, x: -0.18, y: 0.1, semiAxisA: 0.2, semiAxisB: 0.12, angleDeg: 30 },
    { kind: 'polygon', label: 'wedge', value: 0.7, vertices: [[0.1, -0.3], [0.36, -0.3], [0.25, 0.05]] },
  ],
} satisfies Input['truth'];
function definition(geometry: Partial<Input['geometry']> = {}, truth: Input['truth'] = shapes): Definition {
  return phantomDefinitionSchema.parse({ family: 'deblurring', truth, geometry: { body: square, pointSpread: 'gaussian', spread: 0.06, edge: 'reflective', cells: 24, ...geometry } }) as Definition;
}
const geometry = (given: Partial<Input['geometry']>): Geometry => definition(given).geometry;

const spreads: readonly [PointSpreadKey, Partial<Input['geometry']>][] = [
  ['gaussian', { pointSpread: 'gaussian', spread: 0.06 }],
  ['disc', { pointSpread: 'disc', spread: 0.11 }],
  ['motion', { pointSpread: 'motion', spread: 0.13, motionDeg: 25 }],
];
const edges: readonly EdgeKey[] = ['zero', 'periodic', 'reflective'];

describe('the blur that inverts', () => {
  // scipy.ndimage and scipy.signal, weights made there once more.
  it.each(reference.cases.map((item) => [item.pointSpread, item.edge, item] as const))('%s, %s edge: as scipy', (_spread, _edge, item) => {
    const { nx, ny, width, height } = reference;
    const operator = blurOperator(geometry({
      body: { kind: 'rectangle', width, height }, cells: nx, pointSpread: item.pointSpread as PointSpreadKey, spread: item.spread,
      edge: item.edge as EdgeKey, ...(item.motionDeg === null ? {} : { motionDeg: item.motionDeg }),
    }));
    const out = new Float64Array(nx * ny);
    operator.apply(Float64Array.from(reference.picture), out);
    item.blurred.forEach((value, k) => expect(Math.abs(out[k] - value)).toBeLessThanOrEqual(reference.tolerance.absolute));
  });

  it.each(spreads.flatMap(([key, part]) => edges.map((edge) => [key, edge, part] as const)))('%s, %s edge: matched adjoint, one derivative, and the sparse matrix is the action', (_key, edge, part) => {
    const problem = createProblem(describeProblem(definition({ ...part, edge })));
    expect(adjointCheck.evaluate(problem).state).toBe('pass');
    expect(taylorCheck.evaluate(problem).state).toBe('pass');
    const derivative = problem.linearise(problem.background());
    const x = Float64Array.from({ length: problem.unknowns }, (_, k) => Math.cos(k));
    const matrix = denseMatrix(derivative);
    const data = problem.evaluate(x);
    for (let i = 0; i < data.length; i += 37) {
      let sum = 0;
      for (let j = 0; j < x.length; j++) sum += matrix[i * x.length + j] * x[j];
      expect(data[i]).toBeCloseTo(sum, 12);
    }
  });

  it('goes without a matrix where that would be too large, with the same figures', () => {
    for (const part of [{ pointSpread: 'disc', spread: 0.33 }, { pointSpread: 'gaussian', spread: 0.16 }] as const) {
      const large = geometry({ ...part, cells: 64, edge: 'periodic' });
      const operator = blurOperator(large);
      expect(operator.sparse).toBeUndefined();
      const n = operator.cols;
      const x = Float64Array.from({ length: n }, (_, k) => Math.sin(k * k));
      const y = Float64Array.from({ length: n }, (_, k) => Math.cos(3 * k));
      const ax = new Float64Array(n);
      const aty = new Float64Array(n);
      operator.apply(x, ax);
      operator.applyAdjoint(y, aty);
      const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, k) => sum + value * b[k], 0);
      expect(Math.abs(dot(ax, y) - dot(x, aty))).toBeLessThan(1e-12 * norm2(ax) * norm2(y));
      // A periodic blur keeps the sum of a picture.
      expect(ax.reduce((s, v) => s + v, 0)).toBeCloseTo(x.reduce((s, v) => s + v, 0), 9);
    }
  });

  it('mirrors and repeats the picture at any distance', () => {
    const row = (edge: EdgeKey): number[] => Array.from({ length: 15 }, (_, k) => edgeIndex(edge, k - 6, 4));
    expect(row('periodic')).toEqual([2, 3, 0, 1, 2, 3, 0, 1, 2, 3, 0, 1, 2, 3, 0]);
    expect(row('reflective')).toEqual([2, 3, 3, 2, 1, 0, 0, 1, 2, 3, 3, 2, 1, 0, 0]);
    expect(row('zero')).toEqual([-1, -1, -1, -1, -1, -1, 0, 1, 2, 3, -1, -1, -1, -1, -1]);
  });
});

describe('point-spread functions', () => {
  it('cut a disc by rectangles exactly', () => {
    expect(discInRectangle(-2, 2, -2, 2)).toBeCloseTo(Math.PI, 14);
    expect(discInRectangle(0, 2, 0, 2)).toBeCloseTo(Math.PI / 4, 14);
    expect(discInRectangle(-0.1, 0.2, -0.3, 0.15)).toBeCloseTo(0.135, 14);
    // Segment beyond x = 1/2: arccos(1/2) - sqrt(3)/4.
    expect(discInRectangle(0.5, 2, -2, 2)).toBeCloseTo(Math.PI / 3 - Math.sqrt(3) / 4, 14);
    expect(discInRectangle(0.8, 0.9, 0.8, 0.9)).toBe(0);
    let sum = 0;
    for (let i = -7; i < 7; i++) for (let j = -7; j < 7; j++) sum += discInRectangle(j * 0.17, (j + 1) * 0.17, i * 0.17, (i + 1) * 0.17);
    expect(sum).toBeCloseTo(Math.PI, 13);
  });

  it.each(spreads)('%s: weights of unit sum, the same from both sides, with the second moment of the function', (key, part) => {
    const given = geometry({ ...part, cells: 96 });
    const { dx, dy } = pictureOf(given);
    const { rows, columns, values } = pointSpreadOf(given).taps(dx, dy);
    let sum = 0;
    let moment = 0;
    for (let k = 0; k < values.length; k++) {
      sum += values[k];
      moment += values[k] * (columns[k] * dx * columns[k] * dx + rows[k] * dy * rows[k] * dy);
      const opposite = values.findIndex((_, l) => rows[l] === -rows[k] && columns[l] === -columns[k]);
      expect(values[opposite]).toBeCloseTo(values[k], 14);
    }
    expect(sum).toBeCloseTo(1, 13);
    // Closed forms; counting by pixels adds the second moment of a pixel along each axis, (dx^2 + dy^2) / 12, to disc and motion.
    const { spread } = given;
    const exact = key === 'gaussian' ? 2 * spread * spread : (key === 'disc' ? (spread * spread) / 2 : (spread * spread) / 3) + (dx * dx + dy * dy) / 12;
    expect(Math.abs(moment / exact - 1)).toBeLessThan(0.01);
  });

  it('keep a motion along an axis in its row or column', () => {
    for (const motionDeg of [0, 90, 180, -90]) {
      const given = geometry({ pointSpread: 'motion', spread: 0.2, motionDeg });
      const { dx, dy } = pictureOf(given);
      const { rows, columns } = pointSpreadOf(given).taps(dx, dy);
      expect((motionDeg % 180 === 0 ? rows : columns).every((k) => k === 0)).toBe(true);
    }
  });

  it('may be far smaller than a pixel', () => {
    const x = Float64Array.from({ length: 576 }, (_, k) => k % 7);
    for (const [, part] of spreads) {
      const out = new Float64Array(576);
      blurOperator(geometry({ ...part, spread: 1e-4 })).apply(x, out);
      out.forEach((value, k) => expect(value).toBeCloseTo(x[k], 12));
    }
  });
});

describe('the simulation', () => {
  // Closed forms: the error function of a Gaussian, the segment of a disc, the ramp of a motion, each averaged over a pixel.
  it.each(spreads)('%s blurs an edge as the closed form', (_key, part) => {
    const { simulated, exact } = blurredEdge(geometry({ ...part, edge: 'zero' }));
    simulated.forEach((value, j) => expect(Math.abs(value - exact[j])).toBeLessThan(3e-4));
    expect(exact[0]).toBeCloseTo(1, 4);
    expect(exact[exact.length - 1]).toBeCloseTo(0, 4);
  });

  // A Gaussian blurs a Gaussian to a Gaussian of the sum of the variances: closed form, averaged over pixels by the error function.
  it('adds variances', () => {
    const given = definition({}, { kind: 'expression', background: 0, expression: 'exp(-(x*x + y*y) / (2 * 0.01))' });
    const { clean } = simulate(given);
    const { nx, dx } = pictureOf(given.geometry);
    const sigma = Math.sqrt(0.01 + 0.06 ** 2);
    const below = (x: number): number => 0.5 * (1 + erf(x / (sigma * Math.SQRT2)));
    const average = (j: number): number => {
      const left = (j - nx / 2) * dx;
      const part = (below(left + dx) - below(left)) / dx;
      return part * Math.sqrt(2 * Math.PI * 0.01);
    };
    for (const [i, j] of [[12, 12], [8, 14], [3, 20], [0, 0]]) expect(Math.abs(clean[i * nx + j] - average(i) * average(j))).toBeLessThan(2e-4);
  });

  it('brings in light from beyond the frame', () => {
    const truth = createTruthField({ kind: 'expression', background: 0, expression: 'step(x - 0.5)' }, undefined, { min: 0, max: 1, unit: '', rule: '' });
    const given = geometry({ pointSpread: 'disc', spread: 0.11 });
    const { nx } = pictureOf(given);
    const data = simulateBlur(truth, given);
    expect(data[nx - 1]).toBeGreaterThan(0.2);
    expect(data[0]).toBe(0);
  });

  it.each(spreads)('%s: samples lie on a field that holds the support, and half of them change little', (_key, part) => {
    const given = definition(part);
    const field = blurField(given.geometry);
    const { dx, dy } = pictureOf(given.geometry);
    const { reachX, reachY } = pointSpreadOf(given.geometry);
    expect(field.samples % 2).toBe(0);
    expect(field.samples).toBeGreaterThanOrEqual(4);
    expect(field.marginX * dx).toBeGreaterThanOrEqual(reachX);
    expect(field.marginY * dy).toBeGreaterThanOrEqual(reachY);
    const { clean, truth, noiseScale } = simulate(given);
    const coarse = simulateBlur(truth, given.geometry, blurField(given.geometry, 2));
    expect(norm2(coarse.map((value, k) => value - clean[k])) / noiseScale).toBeLessThan(5e-4);
  });

  it('stays affordable for the widest functions on the most pixels', () => {
    for (const part of [{ pointSpread: 'disc', spread: 0.5 }, { pointSpread: 'gaussian', spread: 1 / 6 }] as const) {
      const { samples, grid } = blurField(geometry({ ...part, cells: 96 }));
      expect(samples).toBeGreaterThanOrEqual(4);
      expect(grid.nx).toBeLessThanOrEqual(1200);
    }
  });
});

describe('the phantom', () => {
  it('states the gap of the two models on a truth', () => {
    const gapOf = (edge: EdgeKey, truth: Input['truth'] = shapes) => simulate(definition({ edge }, truth));
    // The background goes on beyond the frame, which a zero edge denies.
    expect(gapOf('zero').modelErrorFloor).toBeGreaterThan(0.03);
    expect(gapOf('zero').backgroundGap).toBeGreaterThan(0.05);
    expect(gapOf('reflective').backgroundGap).toBeLessThan(1e-12);
    expect(gapOf('reflective').modelErrorFloor).toBeLessThan(0.01);
    // Without light beyond the frame the edges agree.
    expect(gapOf('zero', { ...shapes, background: 0 }).modelErrorFloor).toBeLessThan(0.01);
  });
  it('keeps its targets and names its rows', () => {
    const given = definition({ body: { kind: 'rectangle', width: 1, height: 0.75 } });
    expect(simulate(given).targets.map((target) => target.label)).toEqual(['oval', 'wedge']);
    const layout = dataLayout(given);
    expect([layout.groupNames.length, layout.valueNames[0].length]).toEqual([18, 24]);
    expect(problemFacts(given)).toMatchObject({ dataSize: 432, unknowns: 432 });
    expect(problemLine(given)).toBe('Gaussian blur of deviation 0.06 m, 24 x 18 pixels, reflective edge');
    expect(problemLine(definition({ pointSpread: 'motion', spread: 0.1 }))).toBe('motion blur of 0.2 m at 0°, 24 x 24 pixels, reflective edge');
  });
  it('refuses what gives no light, lies outside or is too wide', () => {
    expect(() => simulate(definition({}, { kind: 'shapes', background: 0, shapes: [] }))).toThrow('The blurred picture is zero everywhere');
    expect(() => simulate(definition({}, { kind: 'shapes', background: 0, shapes: [{ kind: 'ellipse', label: 'far', value: 1, x: 2, y: 0, semiAxisA: 0.1, semiAxisB: 0.1 }] }))).toThrow(TruthError);
    expect(() => definition({ spread: 0.2 })).toThrow('must not be wider than the picture');
    expect(() => definition({ motionDeg: 10 })).toThrow('Only a motion has a direction.');
    expect(() => createProblem(describeProblem(definition())).evaluate(new Float64Array(3))).toThrow(RangeError);
  });
});

describe('methods on a picture', () => {
  const given = definition({ cells: 16, spread: 0.07 });
  const problem = createProblem(describeProblem(given));
  const simulated = simulate(given, undefined, problem);
  const error = (key: string): number => {
    const method = getMethod(key);
    const run = prepareRun({ problem, method: key, parameters: {}, rule: method.defaultRule });
    return runLevel(run, simulated, { benchSeed: 5, phantomHash: 'picture', levelIndex: 0, level: 0.02, draws: [0] })[0].metrics['relative-l2-error'].value!;
  };
  // Closer to the truth than the blurred picture is: common sense, no source.
  it.each(['truncated-svd', 'tikhonov', 'cgls', 'sirt', 'kaczmarz', 'total-variation'])('%s sharpens', (key) => {
    const blurred = norm2(simulated.clean.map((v, k) => v - simulated.truthImage[k])) / norm2(simulated.truthImage.map((v) => v - 0.2));
    expect(error(key)).toBeLessThan(blurred);
  });
});
