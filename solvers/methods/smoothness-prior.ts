import { familyKeys } from '../../shared/domain/families';
import type { ForwardProblem, Method } from '../core/types';
import { analyse, factorise } from '../linear-algebra/sparse-cholesky';
import { explicitLimit } from './explicit-limit';
import { defineMethod, defineParameters, readParameters, type ParametersOf } from './parameters';
import { gramLower } from './penalty';
import { makeSpectralReconstructor } from './spectral-batch';
import { filteredResidual } from './spectral-filter';
import { iteratedTikhonovFilter } from './iterated-tikhonov';
import { isZeroFrame, spectralSystemOf, type SpectralSystem, type StandardFactor } from './spectral-system';
import { unknownScale } from './unknown-scale';

const specs = {
  deviation: { kind: 'number', label: 'Prior deviation', symbol: 's/\\bar x_b', default: 0.5, minimum: 1e-3, maximum: 100, scale: 'log', help: 'Standard deviation of the unknown before any data, as a share of the mean background (of 1 where the background is zero).' },
  correlationLength: { kind: 'number', label: 'Correlation length', symbol: '\\ell/R', unit: 'body radius', default: 0.2, minimum: 0.01, maximum: 5, scale: 'log', help: 'Over this distance the values of the prior hang together, as a share of the body radius.' },
  smallestAlpha: {
    kind: 'number', label: 'Smallest alpha', symbol: '\\alpha_{\\min}/\\sigma_1', default: 1e-7, minimum: 1e-12, maximum: 1, scale: 'log',
    help: 'The noise deviation is not taken below this share of the largest singular value. It guards against model errors.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/**
 * Standard form with the precision Q = tau^2 B M^{-1} B, B = M / l^2 + G^T G, M the cell measures: white noise through
 * (1 / l^2 - Laplacian)^{-1}. tau^2 = l^2 / (4 pi) gives deviation 1 in the plane (Lindgren, Rue, Lindstrom 2011 with nu = 1); near the
 * boundary, where nothing flows out, the variance is about twice that. `deviation` is in the unit of the unknown.
 * @throws RangeError for a deviation that is not positive
 */
export function smoothnessSystem(problem: ForwardProblem, deviation: number, length: number): SpectralSystem {
  return spectralSystemOf(problem, `smoothness ${deviation} ${length}`, () => smoothnessFactor(problem, deviation, length));
}

/** The factor R of the precision R^T R of that prior. @throws RangeError for a deviation that is not positive */
export function smoothnessFactor(problem: ForwardProblem, deviation: number, length: number): StandardFactor {
  if (!(deviation > 0)) throw new RangeError('The prior deviation must be positive.');
  const weights = problem.unknownWeights;
  const lower = gramLower(problem.penalty('gradient'), weights, 1 / (length * length));
  const factor = factorise(analyse(lower), lower.values);
  const n = problem.unknowns;
  // Variance of the field over that of the noise: l^2 / (4 pi) in the plane, l^3 / 4 on a line (Lindgren, Rue, Lindstrom 2011, section 2.1).
  const unitDeviation = problem.grid.body.kind === 'interval' ? length * Math.sqrt(length) * 0.5 : length / Math.sqrt(4 * 3.141592653589793);
  const tau = unitDeviation / deviation;
  const scale = new Float64Array(n);
  for (let j = 0; j < n; j++) scale[j] = Math.sqrt(weights[j]) / tau;
  const multiply = (b: Float64Array, count: number): void => {
    for (let i = 0; i < count; i++) for (let j = 0; j < n; j++) b[i * n + j] *= scale[j];
  };
  return {
    // R = tau M^{-1/2} B, so R^{-T} = M^{1/2} B^{-1} / tau and R^{-1} = B^{-1} M^{1/2} / tau.
    halfSolveMany(b, count, half) {
      if (half === 'backward') multiply(b, count);
      factor.solveMany(b, count);
      if (half === 'forward') multiply(b, count);
    },
  };
}

/** Maximum a posteriori estimate under a Gaussian smoothness prior. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'smoothness-prior',
  name: 'Gaussian smoothness prior (MAP)',
  class: 'spectral',
  summary: 'The most probable unknown of the linearised problem under a Gaussian prior with a deviation and a correlation length. The noise is taken as white with the norm that was drawn: it is told the noise and has no parameter to choose.',
  formula: '\\hat x = x_b + \\operatorname*{arg\\,min}_h\\; \\frac{\\|J h - (y - F(x_b))\\|^2}{\\|e\\|^2/m} + h^{\\mathsf T} \\Gamma^{-1} h, \\quad \\Gamma^{-1} = \\frac{\\ell^2}{4\\pi s^2}\\, B M^{-1} B, \\; B = \\ell^{-2} M + G^{\\mathsf T} G',
  sources: [
    { short: 'Kaipio and Somersalo 2005', full: 'J. Kaipio, E. Somersalo: Statistical and Computational Inverse Problems. Springer, 2005 (chapter 3).', fromMemory: true },
    { short: 'Lindgren, Rue, Lindstrom 2011', full: 'F. Lindgren, H. Rue, J. Lindstrom: An explicit link between Gaussian fields and Gaussian Markov random fields. Journal of the Royal Statistical Society B 73 (2011) 423-498.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  // Linear in the data at a given noise, but not homogeneous: it is told the noise, and doubling both changes the weight of the prior.
  capabilities: { linear: false, nonlinear: false, direct: true, statistical: false, families: familyKeys, dataKinds: ['difference', 'absolute'], rules: [] },
  defaultRule: null,
  fixedValue: null,
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { deviation, correlationLength, smallestAlpha } = readParameters(method.name, schema, parameters);
    if (rule) throw new RangeError(`${method.name} has no parameter-choice rule.`);
    const system = smoothnessSystem(problem, deviation * unknownScale(problem), correlationLength * problem.grid.bodyRadius);
    const s = system.singularValues;
    const filter = iteratedTikhonovFilter(1);
    return makeSpectralReconstructor(system, (frame, noise) => {
      const zero = isZeroFrame(frame);
      const alpha = Math.max(noise.norm / Math.sqrt(system.dataSize), smallestAlpha * s[0]);
      const d = new Float64Array(s.length);
      for (let k = 0; k < s.length; k++) d[k] = (s[k] / (s[k] * s[k] + alpha * alpha)) * frame.coefficients[k];
      return {
        d, count: zero ? 0 : s.length,
        report: { parameter: null, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: Math.sqrt(filteredResidual(frame, filter, alpha)) },
      };
    });
  },
};
export const smoothnessPriorMethod = defineMethod(method);
