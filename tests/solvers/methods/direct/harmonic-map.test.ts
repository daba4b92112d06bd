import { describe, expect, it } from 'vitest';
import { electrodeData } from '../../../../solvers/methods/direct/electrode-data';
import { exponentialMatrix, harmonicReader, harmonicsUnfit, linearExponentialMatrix } from '../../../../solvers/methods/direct/harmonic-map';
import { concentricEigenvalue } from '../../../../solvers/problems/electrical-impedance/continuum';
import { createEitInversion } from '../../../../solvers/problems/electrical-impedance/inversion-problem';
import { simulateElectricalImpedance } from '../../../../solvers/problems/electrical-impedance/simulation';
import { ellipse, shapesTruth, unitGeometry } from '../../../support/impedance-case';
import { concentricMap } from '../../../../solvers/verification/disc-maps';

const silent = { norm: 0, level: 0 };

describe('exponentialMatrix', () => {
  it('of a concentric disc is 2 pi n times the relative eigenvalue, and 4 pi n mu rho^2n with the single layer', () => {
    const N = 8;
    for (const s of [0.2, 3]) {
      const plain = exponentialMatrix(concentricMap(0.6, s, N), N);
      const layer = exponentialMatrix(concentricMap(0.6, s, N), N, 'single-layer');
      for (let n = 1; n <= N; n++) {
        const at = (n - 1) * N + n - 1;
        const relative = 1 / concentricEigenvalue(0.6, s, 1, n) - n;
        expect(Math.abs(plain[at] - 2 * Math.PI * relative)).toBeLessThan(1e-12);
        expect(Math.abs(layer[at] - 4 * Math.PI * n * ((s - 1) / (s + 1)) * 0.6 ** (2 * n))).toBeLessThan(1e-12);
      }
      expect(Math.max(...plain.slice(N * N).map(Math.abs))).toBeLessThan(1e-12);
    }
  });
  it('differs from the linear one by the square of the contrast', () => {
    const gap = (contrast: number): number => {
      const map = concentricMap(0.6, 1 + contrast, 4);
      const linear = linearExponentialMatrix(map, 4);
      return Math.abs(exponentialMatrix(map, 4)[0] - linear[0]);
    };
    // A quarter at half the contrast, to the third order.
    expect(Math.abs(gap(0.02) / gap(0.01) - 4)).toBeLessThan(0.1);
  });
  it('stays bounded where noise asks for a conductivity below nothing', () => {
    const map = concentricMap(0.6, 3, 4);
    map[0] = -5;
    // 1 + A is kept at 1/20, so the relative eigenvalue at 19.
    expect(exponentialMatrix(map, 4)[0]).toBeLessThan(2 * Math.PI * 19 + 1);
  });
});

describe('harmonics from electrodes', () => {
  it.each([
    ['clockwise' as const, 37, 0.1, 2.5, 'trigonometric' as const, 'electrode-voltages' as const],
    ['counter-clockwise' as const, -10, 1, 1, 'adjacent' as const, 'adjacent-all' as const],
  ])('a concentric disc of the electrode model has the eigenvalues of the continuum (%s)', (numbering, firstElectrodeDeg, radius, background, pattern, measurement) => {
    const geometry = unitGeometry({ numbering, firstElectrodeDeg, pattern, measurement, body: { kind: 'disc', radius }, contactImpedance: (0.005 * radius) / background });
    const problem = createEitInversion(geometry, background, 'difference');
    const reader = harmonicReader(electrodeData(problem));
    const truth = shapesTruth([ellipse(0, 0, 0.5 * radius, 0.5 * radius, 2 * background)], background);
    const { data, reference } = simulateElectricalImpedance(truth, geometry);
    const out = reader.read(electrodeData(problem).relativeMap(data.map((value, i) => value - reference[i]), silent));
    const N = reader.harmonics;
    for (let n = 1; n <= 4; n++) {
      const exact = concentricEigenvalue(0.5, 2, 1, n) - 1 / n;
      for (const a of [2 * n - 2, 2 * n - 1])
        // Electrodes conduct along the rim, which the continuum does not: a few parts in a hundred at contact impedance 0.005.
        expect(Math.abs(out[a * 2 * N + a] / exact - 1)).toBeLessThan(0.04);
    }
    // Off-diagonal entries vanish by symmetry; what is left is the mesh.
    expect(Math.abs(out[1])).toBeLessThan(1e-4 * Math.abs(out[0]));
  });

  it('says why it cannot serve', () => {
    const facts = (overrides: Parameters<typeof unitGeometry>[0], dataSize = 16 * 16) => ({ family: 'electrical-impedance' as const, dataKind: 'difference' as const, dataSize, unknowns: 10, geometry: unitGeometry({ measurement: 'adjacent-all', ...overrides }) });
    expect(harmonicsUnfit(facts({}))).toBeNull();
    expect(harmonicsUnfit(facts({}, 20))).toMatch(/20 values/);
    expect(harmonicsUnfit(facts({ pattern: 'opposite' }, 8 * 16))).toMatch(/15 independent currents; these patterns hold 8/);
    expect(harmonicsUnfit(facts({ body: { kind: 'star', radius: 1, cosine: [0, 0.2], sine: [] } }))).toMatch(/disc/);
    expect(harmonicsUnfit(facts({ electrodeAnglesDeg: Array.from({ length: 16 }, (_, l) => 22 * l) }))).toMatch(/spacing/);
    expect(harmonicsUnfit(facts({ contactImpedance: Array.from({ length: 16 }, (_, l) => (l === 3 ? 0.02 : 0.01)) }))).toMatch(/contact impedance/);
    expect(harmonicsUnfit({ ...facts({}), family: 'x-ray' })).toMatch(/electrodes/);
  });
});
