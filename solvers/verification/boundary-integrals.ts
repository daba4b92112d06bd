import { neumannToDirichletByBoundaryIntegrals } from '../problems/electrical-impedance/boundary-integrals/neumann-to-dirichlet';
import { simulateByBoundaryIntegrals } from '../problems/electrical-impedance/boundary-integrals/simulate';
import { concentricEigenvalue, type Harmonic } from '../problems/electrical-impedance/continuum';
import { digestOf, largestEntry, largestGap, type VerificationCheck } from './check';
import { discTruth, eccentricDisc, unitDisc } from './disc';
import { convergedVoltages, convergedVoltagesSource } from './electrode-model';

const voltages: VerificationCheck = {
  key: 'boundary-integrals-electrode-model',
  group: 'Forward models',
  name: 'Complete electrode model by boundary integrals',
  line: 'largest voltage of the first cosine, z\u00a0=\u00a00.001, 16 electrodes, eccentric disc of 5 S/m; the gap is over all 16',
  published: '-2.43251745647',
  unit: 'V',
  bound: 1e-8,
  reason: 'As a share of the largest voltage; the code that made the values agrees with itself to 1e-9 when it is refined.',
  source: convergedVoltagesSource,
  cost: 'heavy',
  run() {
    const wanted: readonly number[] = convergedVoltages[0.001];
    const { electrodeVoltages } = simulateByBoundaryIntegrals(eccentricDisc(), unitDisc({ contactImpedance: 0.001, pattern: 'trigonometric', measurement: 'electrode-voltages' }));
    const first = electrodeVoltages.slice(0, 16);
    return { measured: first[largestEntry(wanted)], gap: largestGap(first, wanted), digest: digestOf(electrodeVoltages) };
  },
};

const eigenvalues: VerificationCheck = {
  key: 'boundary-integrals-concentric-disc',
  group: 'Forward models',
  name: 'Concentric disc by boundary integrals',
  line: 'Neumann-to-Dirichlet eigenvalue of mode 4, s\u00a0=\u00a02, ρ\u00a0=\u00a00.5; the gap is over modes 1 to 8',
  published: '0.249349805',
  unit: '',
  bound: 1e-9,
  reason: 'Relative to the largest eigenvalue; panels with 12 points leave little more than rounding.',
  source: {
    short: 'Isaacson 1986',
    full: 'D. Isaacson, Distinguishability of conductivities by electric current computed tomography, IEEE Trans. Med. Imaging MI-5 (1986) 91-95: (1/n)(1 - μρ²ⁿ)/(1 + μρ²ⁿ), μ = (s - 1)/(s + 1).',
  },
  cost: 'heavy',
  run() {
    const harmonics: Harmonic[] = [1, 2, 3, 4, 5, 6, 7, 8].map((n) => ({ n, kind: 'cos' }));
    const map = neumannToDirichletByBoundaryIntegrals(discTruth(0, 0, 0.5, 2), 1, harmonics);
    const measured = harmonics.map((_, i) => map[9 * i]);
    return { measured: measured[3], gap: largestGap(measured, harmonics.map(({ n }) => concentricEigenvalue(0.5, 2, 1, n))), digest: digestOf(map) };
  },
};

export const boundaryIntegralChecks: readonly VerificationCheck[] = [voltages, eigenvalues];
