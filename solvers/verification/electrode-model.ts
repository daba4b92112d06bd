import type { Source } from '../core/types';
import { reciprocityGap } from '../problems/electrical-impedance/reciprocity';
import { simulateElectricalImpedance } from '../problems/electrical-impedance/simulation';
import { digestOf, largestEntry, largestGap, type VerificationCheck } from './check';
import { eccentricDisc, unitDisc } from './disc';

/** Electrode voltages, V, for the currents cos(theta) of 1 A/m, by contact impedance in ohm m^2. */
export const convergedVoltages = {
  0.001: [2.329293788325, 2.107345200762, 1.642258065864, 0.953376508527, 0.07374412773931, -0.8577234771266, -1.672191069091, -2.227975790684, -2.43251745647, -2.252593271329, -1.717005250413, -0.9112017152658, 0.03590169944928, 0.9712823975772, 1.741089971743, 2.216916270391],
  0.1: [2.899313156759, 2.630189897582, 2.044832514324, 1.17646789805, 0.07931029250225, -1.073636223338, -2.077355075152, -2.760170481342, -3.009840017303, -2.786263047382, -2.125013461551, -1.130879269302, 0.03823971647044, 1.195027468479, 2.151124492212, 2.748652138991],
} as const;

const model = 'Model: E. Somersalo, M. Cheney, D. Isaacson, Existence and uniqueness for electrode models for electric current computed tomography, SIAM J. Appl. Math. 52 (1992) 1023-1040.';

export const convergedVoltagesSource: Source = {
  short: 'converged, three independent codes',
  full: `${model} Values converged with a semi-analytic boundary equation (self-convergence 1e-9), confirmed by an isoparametric quadratic finite-element code with 244,000 unknowns (to 6e-6) and by FreeFem++ 4.11 with quadratic elements (to 6e-6 on its finer mesh).`,
};

function electrodeModelCheck(contactImpedance: keyof typeof convergedVoltages, published: string): VerificationCheck {
  const values: readonly number[] = convergedVoltages[contactImpedance];
  return {
    key: `complete-electrode-model-z-${contactImpedance}`,
    group: 'Forward models',
    name: `Complete electrode model, z = ${contactImpedance}`,
    line: 'largest voltage of the first cosine, 16 electrodes, eccentric disc of 5 S/m; the gap is over all 16',
    published,
    unit: 'V',
    bound: 1e-4,
    reason: 'What a simulation may be off by, as a share of the largest voltage; the three codes agree among themselves to 4e-5 or better.',
    source: convergedVoltagesSource,
    cost: 'heavy',
    run() {
      const { electrodeVoltages } = simulateElectricalImpedance(eccentricDisc(), unitDisc({ contactImpedance, pattern: 'trigonometric', measurement: 'electrode-voltages' }));
      const voltages = electrodeVoltages.slice(0, 16);
      return { measured: voltages[largestEntry(values)], gap: largestGap(voltages, values), digest: digestOf(electrodeVoltages) };
    },
  };
}

const reciprocity: VerificationCheck = {
  key: 'reciprocity',
  group: 'Forward models',
  name: 'Reciprocity',
  line: 'drive and measurement change places, 208 voltages of the eccentric disc',
  published: 'equal',
  unit: '',
  bound: 1e-8,
  reason: 'The discrete system is symmetric too: what is left is rounding in a factorisation with tens of thousands of unknowns.',
  source: { short: 'Somersalo, Cheney, Isaacson 1992', full: `${model} The bilinear form is symmetric.`, fromMemory: true },
  cost: 'heavy',
  run() {
    const geometry = unitDisc();
    const { data } = simulateElectricalImpedance(eccentricDisc(), geometry);
    const gap = reciprocityGap(geometry, data);
    return { measured: gap === 0 ? 'equal' : 'equal to rounding', gap, words: 'Largest difference of two voltages that must be equal, over the largest voltage.', digest: digestOf(data) };
  },
};

export const electrodeModelChecks: readonly VerificationCheck[] = [electrodeModelCheck(0.001, '-2.432517'), electrodeModelCheck(0.1, '-3.009840'), reciprocity];
