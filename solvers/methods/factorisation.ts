import type { Method } from '../core/types';
import { electrodeData, mapUnfit } from './direct/electrode-data';
import { boundedResidual } from './direct/full-residual';
import { picardRatios } from './direct/indicators';
import { signedImage } from './direct/signed-image';
import { signedParts, type MapPart } from './direct/signed-parts';
import { testRegions } from './direct/test-regions';
import { defineMethod, defineParameters, readParameters, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';

const specs = {
  safetyFactor: { kind: 'number', label: 'Safety factor', symbol: '\\tau', default: 1, minimum: 0, maximum: 10, scale: 'linear', help: 'Every eigenvalue is raised by this times the expected spectral norm of the noise. The method is told the noise.' },
  smallestShare: { kind: 'number', label: 'Smallest share', symbol: '\\epsilon', default: 1e-4, minimum: 1e-10, maximum: 0.1, scale: 'log', help: 'Eigenvalues are raised by at least this share of the largest one: smaller ones hold the error of the model. At least 0.003 where driven electrodes are not measured.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Factorisation method: a Picard ratio for the dipoles of each cell. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'factorisation',
  name: 'Factorisation method',
  class: 'direct',
  summary: 'Asks for each point whether the potential of a dipole there lies in the range of the root of the relative map, by a ratio of sums over the eigenvalues (Picard\'s criterion). The ratio locates the change; it does not measure its contrast: the image is the ratio over its largest value, times the one number that fits the data best, apart for more and for less conductivity.',
  formula: 'q(z)=\\frac{\\sum_k \\langle g_z,v_k\\rangle^2}{\\sum_k \\langle g_z,v_k\\rangle^2/(\\lambda_k+\\delta)},\\quad R_x - R_{x_b}=\\mp\\sum_k\\lambda_k v_k v_k^{\\mathsf T},\\quad \\delta=\\max(\\tau\\,\\mathrm E\\|N\\|,\\ \\epsilon\\lambda_1)',
  sources: [
    { short: 'Brühl and Hanke 2000', full: 'M. Brühl, M. Hanke: Numerical implementation of two noniterative methods for locating inclusions by impedance tomography. Inverse Problems 16 (2000) 1029-1042 (dipoles and the Picard criterion).', fromMemory: true },
    { short: 'Lechleiter, Hyvönen, Hakula 2008', full: 'A. Lechleiter, N. Hyvönen, H. Hakula: The factorization method applied to the complete electrode model of impedance tomography. SIAM Journal on Applied Mathematics 68 (2008) 1097-1121 (the same with electrodes: the dipole\'s electrode voltages are, by reciprocity, gradients of the model\'s own potentials).', fromMemory: true },
    { short: 'Harrach 2015', full: 'B. Harrach: Interpolation of missing electrode data in electrical impedance tomography. Inverse Problems 31 (2015) 115008 (where the driven electrodes are not measured their voltages are predicted this way).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: true, direct: true, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: [] },
  defaultRule: null,
  fixedValue: null,
  unfit: mapUnfit,
  prepare(problem, parameters, rule) {
    const { safetyFactor, smallestShare } = readParameters(method.name, schema, parameters);
    if (rule) throw new RangeError(`${method.name} has no parameter-choice rule: its bound follows the noise by itself.`);
    const data = electrodeData(problem);
    // The sensitivity matrix of a cell is the sum of g g^T over the dipoles in it, both directions, weighted by area.
    const { factors } = testRegions(data, 0);
    const indicator = (part: MapPart | null): Float64Array | null => {
      if (!part) return null;
      const ratios = picardRatios(part, factors);
      let largest = 0;
      for (const value of ratios) largest = Math.max(largest, value);
      return largest > 0 ? ratios.map((value) => value / largest) : null;
    };
    return makeReconstructor((frame, noise) => {
      const change = data.change(frame);
      const parts = signedParts(data.relativeMap(change, noise), data.size, (norm) => data.uncertainty(norm, noise, safetyFactor, smallestShare));
      const x = signedImage(data, change, indicator(parts.more), indicator(parts.less));
      return { x, parameter: null, iterations: 0, forwardSolves: 1, stop: 'direct', residualNorm: boundedResidual(problem, x, frame) };
    });
  },
};
export const factorisationMethod = defineMethod(method);
