import { describe, expect, it } from 'vitest';
import reference from '../../reference/complete-electrode-model.json';
import { maxError, shapesTruth, ellipse, unitGeometry } from '../../support/impedance-case';
import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { measure } from '../../../solvers/problems/electrical-impedance/patterns';
import { simulateElectricalImpedance } from '../../../solvers/problems/electrical-impedance/simulation';

// Values from a boundary equation confirmed by two independent finite-element codes; see the JSON for source and agreement.
describe.each(reference.cases.map((item) => [item.id, item] as const))('complete electrode model: %s', (_, item) => {
  const L = item.electrodes as EitGeometry['electrodes'];
  const geometry = unitGeometry({ electrodes: L, contactImpedance: item.contactImpedance, electrodeCoverage: item.coverage, pattern: 'trigonometric', measurement: 'electrode-voltages' });
  const truth = shapesTruth(item.inclusion ? [ellipse(item.inclusion[0], item.inclusion[1], item.inclusion[2], item.inclusion[2], item.inclusion[3])] : []);
  const trigonometric = simulateElectricalImpedance(truth, geometry);
  const bound = reference.tolerance.relativeToLargest;
  const row = (voltages: Float64Array, k: number): Float64Array => voltages.subarray(k * L, (k + 1) * L);
  /** Voltages for any currents of zero sum: these patterns are a basis of them. */
  const respond = (currents: readonly number[]): Float64Array => {
    const voltages = new Float64Array(L);
    for (let k = 0; k < L - 1; k++) {
      const sine = k >= L / 2;
      const n = sine ? k - L / 2 + 1 : k + 1;
      const pattern = Array.from({ length: L }, (_, l) => (sine ? Math.sin : Math.cos)((2 * Math.PI * n * l) / L));
      const squares = pattern.reduce((s, p) => s + p * p, 0);
      const share = currents.reduce((s, c, l) => s + c * pattern[l], 0) / squares;
      for (let l = 0; l < L; l++) voltages[l] += share * trigonometric.electrodeVoltages[k * L + l];
    }
    return voltages;
  };
  const drive = (d: number): number[] => Array.from({ length: L }, (_, l) => (l === d ? 1 : l === (d + 1) % L ? -1 : 0));

  it('agrees in the trigonometric patterns', () => {
    expect(maxError(row(trigonometric.electrodeVoltages, 0), item.cos1)).toBeLessThan(bound);
    expect(maxError(row(trigonometric.electrodeVoltages, 1), item.cos2)).toBeLessThan(bound);
    expect(maxError(row(trigonometric.electrodeVoltages, L / 2 - 1), item.cosHalf)).toBeLessThan(bound);
    expect(maxError(row(trigonometric.electrodeVoltages, L / 2), item.sin1)).toBeLessThan(bound);
  });

  it('agrees in adjacent drive, adjacent data and the impedance matrix', () => {
    expect(maxError(respond(drive(0)), item.adjacentDrive1)).toBeLessThan(bound);
    const adjacent = new Float64Array(L * L);
    for (let d = 0; d < L; d++) adjacent.set(respond(drive(d)), d * L);
    const data = measure({ ...geometry, pattern: 'adjacent', measurement: 'adjacent-undriven' }, adjacent);
    expect(maxError(data, item.adjacentData)).toBeLessThan(bound);
    const unit = Array.from({ length: L }, (_, l) => (l === 0 ? 1 : 0) - 1 / L);
    expect(maxError(respond(unit), item.impedanceMatrixFirstRow)).toBeLessThan(bound);
  });
});
