import type { Method } from '../core/types';
import { harmonicsUnfit } from './direct/harmonic-map';
import { boundedResidual } from './direct/full-residual';
import { cutoffChoice, truncatedTransform } from './direct/truncation';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';

const specs = {
  largestCutoff: {
    kind: 'number', label: 'Largest cutoff', symbol: 'K_{\\max}', unit: 'per body radius', default: 16, minimum: 1, maximum: 24, scale: 'linear',
    help: 'The discrepancy principle compares the noise with the transform itself, ring by ring, and looks for a cutoff in sixteen steps up to here, at most half the number of electrodes: beyond that the data hold nothing.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** Calderon's linearisation at constant conductivity. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'calderon',
  name: 'Linearisation at constant conductivity (Calderón)',
  class: 'direct',
  summary: 'Tests the map from voltages to currents with growing exponentials that together make a plane wave; to first order this gives the Fourier transform of the change of conductivity, which is cut at K and transformed back. On a disc, from electrodes that determine the map.',
  formula: '\\hat x = x_b\\Bigl(1 - \\frac{1}{2\\pi^2}\\int_{|k|<K} \\frac{1}{|k|^2}\\Bigl[\\int_{\\partial\\Omega} e^{i\\bar k\\bar z/2}(\\Lambda_x - \\Lambda_{x_b})\\,e^{ikz/2}\\,ds\\Bigr] e^{-i\\operatorname{Re}(kz)}\\,dk\\Bigr)',
  sources: [
    { short: 'Calderón 1980', full: 'A. P. Calderón: On an inverse boundary value problem. Seminar on Numerical Analysis and its Applications to Continuum Physics, Sociedade Brasileira de Matemática, Rio de Janeiro (1980) 65-73.', fromMemory: true },
    { short: 'Isaacson 1986', full: 'D. Isaacson: Distinguishability of conductivities by electric current computed tomography. IEEE Transactions on Medical Imaging MI-5 (1986) 91-95 (the trigonometric patterns in which the map is read).' },
    { short: 'Harrach 2015', full: 'B. Harrach: Interpolation of missing electrode data in electrical impedance tomography. Inverse Problems 31 (2015) 115008 (where the driven electrodes are not measured their voltages are predicted this way).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: true, direct: true, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Cutoff', symbol: 'K', unit: 'per body radius', default: 5, minimum: 0.1, maximum: 24, scale: 'linear', help: 'Largest frequency kept, over one body radius: details down to about 3 R / K.' }),
  unfit: harmonicsUnfit,
  prepare(problem, parameters, rule) {
    const { largestCutoff } = readParameters(method.name, schema, parameters);
    const choice = cutoffChoice(readRule(method, rule), largestCutoff, 1);
    const transform = truncatedTransform(problem);
    const zero = new Float64Array(2 * transform.harmonics * transform.harmonics);
    for (const cutoff of transform.cutoffs(choice)) transform.image(zero, cutoff);
    const background = problem.background();
    return makeReconstructor((data, noise) => {
      const read = transform.read(data, noise, 'exponential');
      const cutoff = transform.choose(read, noise, choice);
      const change = transform.image(read.exponentials, cutoff);
      const x = Float64Array.from(background, (value, j) => value * (1 + change[j]));
      const residualNorm = boundedResidual(problem, x, data);
      return { x, parameter: cutoff, iterations: 0, forwardSolves: 1, stop: 'direct', residualNorm };
    });
  },
};
export const calderonMethod = defineMethod(method);
