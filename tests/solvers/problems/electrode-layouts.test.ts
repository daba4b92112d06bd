import { beforeAll, describe, expect, it } from 'vitest';
import { ellipse, maxError, shapesTruth, unitGeometry } from '../../support/impedance-case';
import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { adjointCheck } from '../../../solvers/checks/adjoint';
import { taylorCheck } from '../../../solvers/checks/taylor';
import { createEitInversion } from '../../../solvers/problems/electrical-impedance/inversion-problem';
import { channels, currentPatterns, patternCount } from '../../../solvers/problems/electrical-impedance/patterns';
import { hasReciprocalPairs, reciprocityGap } from '../../../solvers/problems/electrical-impedance/reciprocity';
import { simulateElectricalImpedance } from '../../../solvers/problems/electrical-impedance/simulation';

const shapes = [ellipse(0.3, 0.2, 0.25, 0.2, 5, 20)];
const coarse = { level: 'coarse' } as const;
const simulate = (over: Partial<EitGeometry>) => simulateElectricalImpedance(shapesTruth(shapes), unitGeometry(over), coarse);

describe('current patterns on one mesh', () => {
  const L = 12;
  let adjacent: Float64Array;
  beforeAll(() => {
    adjacent = simulate({ electrodes: L, measurement: 'electrode-voltages' }).electrodeVoltages;
  });

  it.each([
    { pattern: 'skip', skip: 1 },
    { pattern: 'skip', skip: 4 },
    { pattern: 'opposite' },
    { pattern: 'trigonometric' },
    { pattern: 'listed', currents: [[3, -1, 0, 0, -2, 0, 0, 0, 0, 0, 0, 0], [0, 0, 0, 0.5, 0, 0, 0, 0, 0, -0.5, 0, 0]] },
  ] as const)('$pattern voltages are sums of those of adjacent pairs', (fields) => {
    const geometry = unitGeometry({ electrodes: L, measurement: 'electrode-voltages', ...(fields as Partial<EitGeometry>) });
    const { electrodeVoltages } = simulateElectricalImpedance(shapesTruth(shapes), geometry, coarse);
    const currents = currentPatterns(geometry);
    const summed = new Float64Array(electrodeVoltages.length);
    for (let k = 0; k < patternCount(geometry); k++)
      // A pattern is the sum over l of (I_1 + ... + I_l) times the adjacent pair (l, l + 1).
      for (let l = 0, weight = 0; l < L - 1; l++) {
        weight += currents[k * L + l];
        for (let m = 0; m < L; m++) summed[k * L + m] += weight * adjacent[l * L + m];
      }
    // The equations are linear: rounding of the dense solve.
    expect(maxError(electrodeVoltages, summed)).toBeLessThan(1e-10);
  });

  it.each([
    { pattern: 'skip', skip: 2, measurement: 'adjacent-undriven' },
    { pattern: 'skip', skip: 2, measurement: 'adjacent-all' },
    { pattern: 'opposite', measurement: 'electrode-voltages' },
    { pattern: 'listed', currents: [[1, -1, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0], [0, 0, 0, 0, 1, 0, -1, 0, 0, 0, 0, 0], [0, 0, 0, 0, 0, 0, 0, 0, 1, 1, -2, 0]], measurement: 'adjacent-undriven' },
  ] as const)('is reciprocal with another contact impedance under every electrode: $pattern, $measurement', (fields) => {
    const geometry = unitGeometry({ electrodes: L, contactImpedance: Array.from({ length: L }, (_, l) => 0.002 * 1.5 ** l), ...(fields as Partial<EitGeometry>) });
    const { data } = simulateElectricalImpedance(shapesTruth(shapes), geometry, coarse);
    expect(hasReciprocalPairs(geometry)).toBe(true);
    // Symmetry of the matrix up to rounding of the solves.
    expect(reciprocityGap(geometry, data)).toBeLessThan(1e-10);
    // A value that belongs to a pair of equal voltages gives itself away; undriven frames hold values without a partner too.
    const spoiled = data.map((v, i) => v * (1 + 1e-3 * (i % 7)));
    expect(reciprocityGap(geometry, spoiled)).toBeGreaterThan(1e-6);
  });

  it('knows that opposite pairs measured without the driven electrodes hold no equal voltages', () => {
    expect(hasReciprocalPairs(unitGeometry({ electrodes: L, pattern: 'opposite' }))).toBe(false);
    expect(reciprocityGap(unitGeometry({ electrodes: L, pattern: 'opposite' }), new Float64Array(48).fill(1))).toBe(0);
  });
});

describe('contact impedance of each electrode', () => {
  it('gives the bits of one value when all are equal, in both models', () => {
    const one = simulate({ electrodes: 8, contactImpedance: 0.01 });
    const listed = simulate({ electrodes: 8, contactImpedance: Array.from({ length: 8 }, () => 0.01) });
    expect(listed.data).toEqual(one.data);
    expect(listed.electrodeVoltages).toEqual(one.electrodeVoltages);
    const a = createEitInversion(unitGeometry({ electrodes: 8, contactImpedance: 0.01 }), 1, 'absolute');
    const b = createEitInversion(unitGeometry({ electrodes: 8, contactImpedance: Array.from({ length: 8 }, () => 0.01) }), 1, 'absolute');
    expect(b.frameOf(b.background())).toEqual(a.frameOf(a.background()));
  });

  it('raises the voltage of its electrode by the contact voltage where it is large', () => {
    // U_l = z_l I / |e| + what the body adds; the width |e| is pi / 8 for eight electrodes on half the unit circle.
    const at = (z: number): Float64Array => simulate({ electrodes: 8, contactImpedance: Array.from({ length: 8 }, (_, l) => (l === 0 ? z : 0.01)), measurement: 'electrode-voltages' }).electrodeVoltages;
    const far = at(10);
    const near = at(5);
    // Electrode 1 against electrode 2, in drive 1-2 that puts I = 1 into electrode 1.
    expect(far[0] - far[1] - (near[0] - near[1])).toBeCloseTo((5 * 8) / Math.PI, 2);
    // No current passes electrode 1 in drive 3-4: its contact does not count to leading order.
    expect(Math.abs(far[2 * 8 + 4] - near[2 * 8 + 4])).toBeLessThan(0.02);
  });
});

describe('listed centre angles', () => {
  it.each(['clockwise', 'counter-clockwise'] as const)('are the equal spacing where they list it, %s', (numbering) => {
    const sign = numbering === 'clockwise' ? -1 : 1;
    const electrodeAnglesDeg = Array.from({ length: 8 }, (_, l) => 30 + sign * 45 * l);
    const listed = simulate({ electrodes: 8, numbering, electrodeAnglesDeg });
    const even = simulate({ electrodes: 8, numbering, firstElectrodeDeg: 30 });
    // The same mesh up to rounding of the angles.
    expect(maxError(listed.data, even.data)).toBeLessThan(1e-9);
  });

  it('turn with the experiment', () => {
    const angles = [0, 40, 95, 130, 185, 215, 270, 320];
    const base = simulate({ electrodes: 8, electrodeAnglesDeg: angles });
    const turned = simulateElectricalImpedance(shapesTruth([ellipse(-0.2, 0.3, 0.25, 0.2, 5, 110)]), unitGeometry({ electrodes: 8, electrodeAnglesDeg: angles.map((a) => a + 90) }), coarse);
    // A quarter turn is exact, so the mesh is the same; rounding of the projections remains.
    expect(maxError(turned.data, base.data)).toBeLessThan(1e-8);
  });
});

describe('the inversion model', () => {
  // Ten electrodes: no multiple of four.
  it.each([
    { pattern: 'skip', skip: 2, measurement: 'adjacent-undriven' },
    { pattern: 'opposite', measurement: 'adjacent-all' },
    { pattern: 'listed', currents: [[1, -1, 0, 0, 0, 0, 0, 0, 0, 0], [0, 1, 0, -2, 0, 0, 1, 0, 0, 0]], measurement: 'adjacent-undriven' },
  ] as const)('has the derivative of its forward map: $pattern, $measurement', (fields) => {
    const geometry = unitGeometry({ electrodes: 10, contactImpedance: Array.from({ length: 10 }, (_, l) => 0.01 * (1 + l)), ...(fields as Partial<EitGeometry>) });
    const problem = createEitInversion(geometry, 1, 'difference', { cellMin: 0.15, cellMax: 0.2, grading: 1, elementMin: 0.01 });
    expect(problem.dataSize).toBe(channels(geometry).length);
    expect(taylorCheck.evaluate(problem).state).toBe('pass');
    expect(adjointCheck.evaluate(problem).state).toBe('pass');
  });

  it('agrees with the simulation for unevenly placed electrodes with contacts of their own', () => {
    const geometry = unitGeometry({
      electrodes: 12, electrodeAnglesDeg: [0, 25, 61, 88, 121, 148, 180, 214, 240, 270, 301, 332], contactImpedance: Array.from({ length: 12 }, (_, l) => [0.002, 0.01, 0.05][l % 3]),
      pattern: 'skip', skip: 3, measurement: 'electrode-voltages',
    });
    const problem = createEitInversion(geometry, 1, 'absolute');
    // Two discretisations; the inversion's elements are the coarser ones, 5e-4 is the bound of its model error elsewhere.
    expect(maxError(problem.frameOf(problem.background()), simulateElectricalImpedance(shapesTruth([]), geometry).data)).toBeLessThan(5e-4);
  });
});
