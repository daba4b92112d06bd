import { describe, expect, it } from 'vitest';
import reference from '../../../reference/complete-electrode-model.json';
import { ellipse, maxError, shapesTruth, unitGeometry } from '../../../support/impedance-case';
import { simulateByBoundaryIntegrals } from '../../../../solvers/problems/electrical-impedance/boundary-integrals/simulate';
import { reciprocityGap } from '../../../../solvers/problems/electrical-impedance/reciprocity';

/** The reference values themselves are good to about 1e-9 (self-convergence of the boundary equation that made them). */
const bound = 1e-8;

// Values from a boundary equation confirmed by two independent finite-element codes; see the JSON for source and agreement.
describe.each(reference.cases.map((item) => [item.id, item] as const))('boundary integrals: %s', (_, item) => {
  const L = item.electrodes;
  const setting = unitGeometry({ electrodes: L, contactImpedance: item.contactImpedance, electrodeCoverage: item.coverage });
  const truth = shapesTruth(item.inclusion ? [ellipse(item.inclusion[0], item.inclusion[1], item.inclusion[2], item.inclusion[2], item.inclusion[3])] : []);

  it('agrees in the trigonometric patterns', () => {
    const geometry = { ...setting, pattern: 'trigonometric', measurement: 'electrode-voltages' } as const;
    const { electrodeVoltages, data } = simulateByBoundaryIntegrals(truth, geometry);
    const row = (k: number): Float64Array => electrodeVoltages.subarray(k * L, (k + 1) * L);
    expect(maxError(row(0), item.cos1)).toBeLessThan(bound);
    expect(maxError(row(1), item.cos2)).toBeLessThan(bound);
    expect(maxError(row(L / 2 - 1), item.cosHalf)).toBeLessThan(bound);
    expect(maxError(row(L / 2), item.sin1)).toBeLessThan(bound);
    expect(reciprocityGap(geometry, data)).toBeLessThan(1e-9);
  });

  it('agrees in adjacent drive and adjacent data', () => {
    const { electrodeVoltages, data } = simulateByBoundaryIntegrals(truth, setting);
    expect(maxError(electrodeVoltages.subarray(0, L), item.adjacentDrive1)).toBeLessThan(bound);
    expect(maxError(data, item.adjacentData)).toBeLessThan(bound);
    expect(reciprocityGap(setting, data)).toBeLessThan(1e-9);
  });
});
