import type { Method } from '../core/types';
import { dBarSolver, type DBarSolver } from './direct/d-bar-solver';
import { boundedResidual } from './direct/full-residual';
import { harmonicsUnfit } from './direct/harmonic-map';
import { cutoffChoice, truncatedTransform } from './direct/truncation';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';

const specs = {
  traces: {
    kind: 'choice', label: 'Boundary traces', symbol: '\\psi', default: 'single-layer',
    choices: [{ value: 'single-layer', label: 'corrected by a single layer (t-zero)' }, { value: 'exponential', label: 'exponentials (t-exp)' }],
    help: 'The true transform needs the traces of the growing solutions. The exponentials replace them by those of a constant conductivity; the single layer corrects them with the Green function of the Laplace equation.',
  },
  largestRadius: {
    kind: 'number', label: 'Largest radius', symbol: 'R_{\\max}', unit: 'per body radius', default: 8, minimum: 0.5, maximum: 12, scale: 'linear',
    help: 'The discrepancy principle compares the noise with the transform itself, ring by ring, and looks for a radius in sixteen steps up to here, at most a quarter of the number of electrodes: beyond that the data hold nothing.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** D-bar method with a truncated scattering transform. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'd-bar',
  name: 'D-bar with a truncated scattering transform',
  class: 'direct',
  summary: 'Computes an approximate scattering transform from the map from voltages to currents, cuts it at a radius, and solves a d-bar equation at each point: the nonlinear counterpart of the Fourier transform and its inverse. On a disc, from electrodes that determine the map.',
  formula: '\\hat x = x_b\\,\\mu(z,0)^2,\\quad \\bar\\partial_k\\mu = \\frac{t_R(k)}{4\\pi\\bar k}\\,e^{-i(kz+\\bar k\\bar z)}\\,\\overline{\\mu},\\quad t_R(k)=\\int_{\\partial\\Omega} e^{i\\bar k\\bar z}(\\Lambda_x-\\Lambda_{x_b})\\,\\psi\\,ds\\ \\ (|k|<R)',
  sources: [
    { short: 'Knudsen, Lassas, Mueller, Siltanen 2009', full: 'K. Knudsen, M. Lassas, J. L. Mueller, S. Siltanen: Regularized D-bar method for the inverse conductivity problem. Inverse Problems and Imaging 3 (2009) 599-624 (the truncation as regularisation).', fromMemory: true },
    { short: 'Siltanen, Mueller, Isaacson 2000', full: 'S. Siltanen, J. Mueller, D. Isaacson: An implementation of the reconstruction algorithm of A. Nachman for the 2D inverse conductivity problem. Inverse Problems 16 (2000) 681-699 (the exponential approximation of the traces).', fromMemory: true },
    { short: 'Cornean, Knudsen, Siltanen 2006', full: 'H. Cornean, K. Knudsen, S. Siltanen: Towards a d-bar reconstruction method for three-dimensional EIT. Journal of Inverse and Ill-Posed Problems 14 (2006) 111-134 (traces by the single layer of the Laplace equation).', fromMemory: true },
    { short: 'Harrach 2015', full: 'B. Harrach: Interpolation of missing electrode data in electrical impedance tomography. Inverse Problems 31 (2015) 115008 (where the driven electrodes are not measured their voltages are predicted this way).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: true, direct: true, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Truncation radius', symbol: 'R', unit: 'per body radius', default: 3, minimum: 0.05, maximum: 12, scale: 'linear', help: 'Largest |k| of the transform, over one body radius: details down to about 1.5 body radii over this number.' }),
  unfit: harmonicsUnfit,
  prepare(problem, parameters, rule) {
    const { traces, largestRadius } = readParameters(method.name, schema, parameters);
    // The transform at k holds the frequency 2 k of the conductivity.
    const choice = cutoffChoice(readRule(method, rule), largestRadius, 2);
    const transform = truncatedTransform(problem);
    const { harmonics, centres } = transform;
    const solvers = new Map<number, DBarSolver>(transform.cutoffs(choice).map((cutoff) => [cutoff, dBarSolver(centres, 0.5 * cutoff)]));
    const background = problem.background();
    return makeReconstructor((data, noise) => {
      const read = transform.read(data, noise, traces);
      const cutoff = transform.choose(read, noise, choice);
      const { values, iterations, converged } = solvers.get(cutoff)!.solve(read.exponentials, harmonics);
      const x = Float64Array.from(background, (value, j) => value * values[j]);
      const residualNorm = boundedResidual(problem, x, data);
      return { x, parameter: 0.5 * cutoff, iterations, forwardSolves: 1, stop: converged ? 'direct' : 'maxIterations', residualNorm };
    });
  },
};
export const dBarMethod = defineMethod(method);
