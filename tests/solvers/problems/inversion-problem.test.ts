import { beforeAll, describe, expect, it } from 'vitest';
import { eitGeometrySchema, type EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { adjointCheck } from '../../../solvers/checks/adjoint';
import { taylorCheck } from '../../../solvers/checks/taylor';
import { applySparse } from '../../../solvers/core/sparse';
import { norm2 } from '../../../solvers/core/vector';
import { matmulTransposed, transpose } from '../../../solvers/linear-algebra/matrix-product';
import { electrodeIntegrals } from '../../../solvers/problems/electrical-impedance/electrode-integrals';
import { electrodeModel, solveElectrodes } from '../../../solvers/problems/electrical-impedance/electrode-model';
import { electrodeFrame } from '../../../solvers/problems/electrical-impedance/electrodes';
import { createEitInversion, type EitInversion } from '../../../solvers/problems/electrical-impedance/inversion-problem';
import { frameJacobian } from '../../../solvers/problems/electrical-impedance/jacobian';
import { elementsByCell, pairSensitivities, unitStiffness } from '../../../solvers/problems/electrical-impedance/sensitivity';
import { contactNumber, contactNumbers, sampleConductivity } from '../../../solvers/problems/electrical-impedance/simulation';
import { simulationDetail, simulationMesh } from '../../../solvers/problems/electrical-impedance/simulation-mesh';
import { createTruthField } from '../../../solvers/truth/truth-field';
import reference from '../../reference/inversion-model.json';

const geometry = (over: Partial<EitGeometry> = {}): EitGeometry =>
  eitGeometrySchema.parse({
    body: { kind: 'disc', radius: 1 }, electrodes: 16, electrodeCoverage: 0.5, firstElectrodeDeg: 0, numbering: 'counter-clockwise',
    contactImpedance: 0.01, pattern: 'adjacent', current: 1, measurement: 'electrode-voltages', ...over,
  });
const circle = (value: number, [x, y, radius] = [0.3, 0.2, 0.25]) =>
  createTruthField({ kind: 'shapes', background: 1, shapes: [{ kind: 'ellipse', label: 'c', value, target: true, x, y, semiAxisA: radius, semiAxisB: radius, angleDeg: 0 }] });
const largest = (values: ArrayLike<number>): number => Array.from(values).reduce((m, v) => Math.max(m, Math.abs(v)), 0);

describe('inversion model against converged electrode-model values', () => {
  it.each(reference.background)('background, z = $contactImpedance ($locator)', ({ contactImpedance, electrodes, coverage, voltages }) => {
    const problem = createEitInversion(geometry({ contactImpedance, electrodes: electrodes as 16, electrodeCoverage: coverage }), 1, 'absolute');
    const frame = problem.evaluate(problem.background());
    // The inversion's own accuracy: its mesh is about four times coarser than the simulation's, whose bound is 1e-4.
    for (let l = 0; l < electrodes; l++) expect(Math.abs(frame[l] - voltages[l])).toBeLessThan(4e-4 * largest(voltages));
  });

  it('a circular inclusion projected on the cells, closer with finer cells (cem_1)', () => {
    const [{ contactImpedance, voltages }] = reference.inclusion;
    const gap = (detail?: { cellMin: number; cellMax: number; grading: number; elementMin: number }): number => {
      const problem = createEitInversion(geometry({ contactImpedance }), 1, 'absolute', detail);
      const frame = problem.evaluate(problem.project(circle(5)));
      return largest(voltages.map((v, l) => frame[l] - v)) / largest(voltages);
    };
    const usual = gap();
    // An outline cut by cells of size h is a first-order error in the inclusion's effect, here about 5 % of it.
    expect(usual).toBeLessThan(4e-3);
    expect(gap({ cellMin: 0.028, cellMax: 0.042, grading: 1, elementMin: 8e-4 })).toBeLessThan(0.7 * usual);
  });
});

describe('derivative', () => {
  it('agrees with the derivative of the voltages by the conductivity of an inclusion, on a mesh that follows it (dU_ds_inclusion)', () => {
    const g = geometry({ contactImpedance: reference.derivative.contactImpedance, measurement: 'adjacent-all' });
    const frame = electrodeFrame(g);
    const truth = circle(5);
    const mesh = simulationMesh(truth, frame, simulationDetail(contactNumber(g, 1))).quadratic;
    const model = electrodeModel(mesh, electrodeIntegrals(mesh, frame));
    const L = 16;
    const currents = new Float64Array(L * L);
    for (let j = 0; j < L; j++) {
      currents[j * L + j] = 1;
      currents[j * L + ((j + 1) % L)] = -1;
    }
    const sigma = sampleConductivity(truth, mesh, frame);
    const { voltages, unitPotentials } = solveElectrodes(model, sigma, contactNumbers(g, 1), currents);
    const fields = matmulTransposed(transpose(unitPotentials, L, model.pattern.n), voltages, model.pattern.n, L, L);
    // Two cells: outside and inside the inclusion.
    const cellOf = Int32Array.from({ length: mesh.elements.length / 6 }, (_, t) => (sigma[6 * t] > 3 ? 1 : 0));
    const jacobian = frameJacobian(g, pairSensitivities(mesh, unitStiffness(mesh), elementsByCell(cellOf, 2), fields, L), 2);
    const { values } = reference.derivative;
    // The simulation's accuracy, 1e-4 of the data; derivatives lose about a digit.
    for (let m = 0; m < L; m++) expect(Math.abs(jacobian[2 * m + 1] - values[m])).toBeLessThan(1e-3 * largest(values));
  });

  it.each([
    ['adjacent', 'adjacent-undriven'],
    ['adjacent', 'adjacent-all'],
    ['adjacent', 'electrode-voltages'],
    ['trigonometric', 'adjacent-all'],
    ['trigonometric', 'electrode-voltages'],
  ] as const)('%s patterns, %s: adjoint to 1e-10, Taylor slope 2', (pattern, measurement) => {
    for (const kind of ['difference', 'absolute'] as const) {
      const problem = createEitInversion(geometry({ electrodes: 8, pattern, measurement, firstElectrodeDeg: 77, numbering: 'clockwise', current: 0.005, body: { kind: 'disc', radius: 0.14 } }), 0.2, kind);
      expect(adjointCheck.evaluate(problem).state).toBe('pass');
      const taylor = taylorCheck.evaluate(problem);
      expect(taylor.state).toBe('pass');
      expect(taylor.figure).toBeLessThan(reference.taylor.expectedSlope + 0.3);
    }
  });
});

describe('cells', () => {
  const radius = 0.14;
  let problem: EitInversion;
  beforeAll(() => {
    problem = createEitInversion(geometry({ body: { kind: 'disc', radius }, firstElectrodeDeg: 30, measurement: 'adjacent-undriven' }), 0.2, 'difference');
  });

  it('are about 1,600, fill the disc and are of sensible shape', () => {
    expect(problem.unknowns).toBeGreaterThan(1400);
    expect(problem.unknowns).toBeLessThan(1900);
    expect(problem.dataSize).toBe(208);
    const total = problem.unknownWeights.reduce((s, a) => s + a, 0);
    // Quadratic elements follow the circle to fourth order in their length.
    expect(Math.abs(total / (Math.PI * radius * radius) - 1)).toBeLessThan(1e-6);
    expect(Math.max(...problem.unknownWeights) / Math.min(...problem.unknownWeights)).toBeLessThan(12);
  });

  it('image: a constant stays constant, pixel averages conserve the integral, and the place is right in a turned body', () => {
    const image = new Float64Array(problem.grid.inside.length);
    problem.toImage(new Float64Array(problem.unknowns).fill(3), image);
    for (const value of image) expect(Math.abs(value - 3)).toBeLessThan(1e-14);
    const target = createTruthField({ kind: 'shapes', background: 0.2, shapes: [{ kind: 'ellipse', label: 'c', value: 0.21, target: true, x: 0.06, y: 0.03, semiAxisA: 0.03, semiAxisB: 0.03, angleDeg: 0 }] });
    problem.toImage(problem.project(target), image);
    let sum = 0;
    let mx = 0;
    let my = 0;
    const dx = (2 * radius) / 64;
    problem.grid.inside.forEach((index, k) => {
      const weight = image[k] - 0.2;
      sum += weight;
      mx += weight * (-radius + ((index % 64) + 0.5) * dx);
      my += weight * (-radius + (Math.floor(index / 64) + 0.5) * dx);
    });
    // The centroid of an outline cut by cells of size 0.08 R moves by a small part of a cell.
    expect(Math.abs(mx / sum - 0.06)).toBeLessThan(0.01 * radius);
    expect(Math.abs(my / sum - 0.03)).toBeLessThan(0.01 * radius);
    // 2.5 %: contrast is nearly linear for 5 %; 10 x 10 samples a cell and 8 x 8 a pixel.
    expect(Math.abs((sum * dx * dx) / (0.01 * Math.PI * 0.03 * 0.03) - 1)).toBeLessThan(0.025);
  });

  it('penalties approximate their integrals, whatever the size of the body', () => {
    // x on the cells by its average: exact for the linear function at the centroid up to the curved rim.
    const linear = new Float64Array(problem.unknowns);
    const field = createTruthField({ kind: 'expression', background: 1, expression: '1 + 0.001 * x' });
    problem.project(field).forEach((value, i) => (linear[i] = (value - 1) / 0.001));
    const size2 = (kind: 'identity' | 'gradient' | 'laplacian'): number => {
      const matrix = problem.penalty(kind);
      const out = new Float64Array(matrix.rows);
      applySparse(matrix, linear, out);
      return norm2(out) ** 2;
    };
    // Integral of x^2 over a disc is pi R^4 / 4; of |grad x|^2, pi R^2.
    expect(size2('identity') / ((Math.PI * radius ** 4) / 4)).toBeCloseTo(1, 2);
    // Two-point differences on triangles are consistent where the line of centroids crosses the edge at a right angle; on
    // this mesh the sum is right to a few per cent.
    expect(Math.abs(size2('gradient') / (Math.PI * radius ** 2) - 1)).toBeLessThan(0.15);
    expect(problem.penalty('laplacian').rows).toBe(problem.unknowns);
    const constant = new Float64Array(problem.unknowns).fill(2);
    for (const kind of ['gradient', 'laplacian'] as const) {
      const matrix = problem.penalty(kind);
      const out = new Float64Array(matrix.rows);
      applySparse(matrix, constant, out);
      // Rounding of entries up to about 10 / sqrt(area).
      expect(largest(out)).toBeLessThan(1e-9);
    }
  });

  it('jumps: the total variation of a half plane is its length across the disc, in the directions of the mesh', () => {
    const { matrix, lengths } = problem.jumps();
    const x = problem.project(createTruthField({ kind: 'expression', background: 1, expression: 'x > 0 ? 2 : 1' })).map((v) => (v > 1.5 ? 1 : 0));
    const jumps = new Float64Array(matrix.rows);
    applySparse(matrix, x, jumps);
    let variation = 0;
    for (let i = 0; i < jumps.length; i++) variation += lengths[i] * Math.abs(jumps[i]);
    // A line followed by edges at random angles is longer than straight, at most by 2 (edges of equilateral triangles: 1.15).
    expect(variation).toBeGreaterThan(2 * radius);
    expect(variation).toBeLessThan(3 * radius);
  });

  it('same bits from a second object, and from calls in another order', () => {
    const again = createEitInversion(problem.geometry, 0.2, 'difference');
    const x = problem.background().map((v, i) => v * (1 + 0.3 * Math.cos(i)));
    const first = problem.evaluate(x);
    again.linearise(x.map((v) => v * 1.1));
    expect(again.evaluate(x)).toEqual(first);
    expect(again.linearise(x).values).toEqual(problem.linearise(x).values);
    expect(problem.evaluate(problem.background()).every((v) => v === 0)).toBe(true);
  });

  it('refuses conductivities that are not positive and vectors of the wrong length', () => {
    const x = problem.background();
    x[7] = -1;
    expect(() => problem.evaluate(x)).toThrow(/Cell 7/);
    expect(() => problem.evaluate(x.slice(1))).toThrow(RangeError);
    expect(() => createEitInversion(problem.geometry, 0, 'absolute')).toThrow(/background/);
  });
});
