import { exp, ln } from '../core/math';
import type { Method, Reconstruction } from '../core/types';
import { norm2, requireVector } from '../core/vector';
import { defineMethod, defineParameters, readParameters, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';
import { frameSpectrum, isZeroFrame } from './spectral-system';
import { explicitLimit } from './explicit-limit';
import { methodStream, noiseDeviation, smoothnessPrior } from './statistical/prior';

const specs = {
  deviation: { kind: 'number', label: 'Prior deviation', symbol: 's/\\bar x_b', default: 0.5, minimum: 1e-3, maximum: 100, scale: 'log', help: 'Standard deviation of the unknown before any data, as a share of the mean background (of 1 where the background is zero).' },
  correlationLength: { kind: 'number', label: 'Correlation length', symbol: '\\ell/R', unit: 'body radius', default: 0.2, minimum: 0.01, maximum: 5, scale: 'log', help: 'Over this distance the values of the prior hang together, as a share of the body radius.' },
  reference: {
    kind: 'choice', label: 'Proposals about', default: 'approximation',
    choices: [{ value: 'approximation', label: 'The Gaussian approximation of the posterior' }, { value: 'prior', label: 'The prior' }],
    help: 'The Gaussian that the proposals leave invariant. About the prior the chain mixes slowly where the data say much.',
  },
  stepSize: { kind: 'number', label: 'Step size', symbol: '\\beta', default: 0.3, minimum: 1e-4, maximum: 1, scale: 'log', help: 'Share of new noise in a proposal. About the prior it is halved or grown in the first quarter of the chain, which is thrown away.' },
  steps: { kind: 'integer', label: 'Steps', default: 2000, minimum: 100, maximum: 200000, help: 'Length of the chain after its start.' },
  kept: { kind: 'integer', label: 'Samples kept', default: 60, minimum: 10, maximum: 500, help: 'Evenly spaced members of the chain for credible intervals.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Proposals between two adaptations of the step, and the acceptance aimed at. */
const adaptEvery = 25;
const wantedAcceptance = 0.3;

/** Preconditioned Crank-Nicolson sampling. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'crank-nicolson',
  name: 'Preconditioned Crank-Nicolson sampling',
  class: 'statistical',
  summary: 'A Markov chain over the unknowns of the linearised problem under a Gaussian smoothness prior and white noise of the drawn norm. The image is the mean of the chain; its spread gives credible intervals.',
  formula: 'z\' = \\bar z + \\sqrt{1 - \\beta^2}\\,(z - \\bar z) + \\beta\\, C^{1/2} \\xi, \\quad \\text{accepted with } \\min\\bigl(1, e^{\\Phi(z) - \\Phi(z\')}\\bigr)',
  sources: [
    { short: 'Cotter et al. 2013', full: 'S. L. Cotter, G. O. Roberts, A. M. Stuart, D. White: MCMC methods for functions: modifying old algorithms to make them faster. Statistical Science 28 (2013) 424-446.', fromMemory: true },
    { short: 'Rudolf and Sprungk 2018', full: 'D. Rudolf, B. Sprungk: On a generalization of the preconditioned Crank-Nicolson Metropolis algorithm. Foundations of Computational Mathematics 18 (2018) 309-343 (proposals about an approximation of the posterior).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: true, families: ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: [] },
  defaultRule: null,
  fixedValue: null,
  unfit: explicitLimit,
  prepare(problem, parameters, rule) {
    const { deviation, correlationLength, reference, stepSize, steps, kept } = readParameters(method.name, schema, parameters);
    if (rule) throw new RangeError(`${method.name} has no parameter-choice rule.`);
    const prior = smoothnessPrior(problem, deviation, correlationLength);
    const { system } = prior;
    const { singularValues: s, rank, basis, unknowns: n, background, dataSize: m } = system;
    // What the data do not see keeps its prior: these parts belong to the samples of every draw.
    const unseen: Float64Array[] = [];
    const random = methodStream('unseen parts');
    for (let i = 0; i < kept; i++) {
      const part = new Float64Array(n);
      prior.draw(random, part);
      prior.removeSeen(part);
      unseen.push(part);
    }

    return makeReconstructor((data, noise, context): Reconstruction => {
      requireVector(data, m, 'The data frame');
      const frame = frameSpectrum(system, data);
      if (isZeroFrame(frame)) return { x: Float64Array.from(background), parameter: null, iterations: 0, forwardSolves: 0, stop: 'converged', residualNorm: 0 };
      const c = frame.coefficients;
      const sigma = noiseDeviation(noise.norm, norm2(data), m);
      // Gaussian reference: mean and deviation of every coordinate.
      const mean = new Float64Array(rank);
      const width = new Float64Array(rank).fill(1);
      if (reference === 'approximation')
        for (let k = 0; k < rank; k++) {
          const precision = 1 + (s[k] / sigma) * (s[k] / sigma);
          mean[k] = ((s[k] / sigma) * (c[k] / sigma)) / precision;
          width[k] = 1 / Math.sqrt(precision);
        }
      /** Minus the logarithm of the posterior's density over the reference's. */
      const potential = (z: Float64Array): number => {
        let sum = 0;
        for (let k = 0; k < rank; k++) {
          const r = (c[k] - s[k] * z[k]) / sigma;
          const q = (z[k] - mean[k]) / width[k];
          sum += r * r + z[k] * z[k] - q * q;
        }
        return 0.5 * sum;
      };
      const stream = methodStream('proposals');
      // The chain starts at the most probable point.
      const z = new Float64Array(rank);
      for (let k = 0; k < rank; k++) z[k] = (s[k] * c[k]) / (s[k] * s[k] + sigma * sigma);
      const proposal = new Float64Array(rank);
      const total = new Float64Array(rank);
      const samples: Float64Array[] = [];
      let now = potential(z);
      let beta = stepSize;
      let accepted = 0;
      const start = Math.floor(steps / 4);
      let step = 0;
      for (; step < start + steps; step++) {
        const keep = Math.sqrt(1 - beta * beta);
        for (let k = 0; k < rank; k++) proposal[k] = mean[k] + keep * (z[k] - mean[k]) + beta * width[k] * stream.nextNormal();
        const next = potential(proposal);
        if (now - next >= ln(stream.nextUniform())) {
          z.set(proposal);
          now = next;
          accepted++;
        }
        if (step < start) {
          if ((step + 1) % adaptEvery === 0) {
            if (reference === 'prior') beta = Math.min(1, Math.max(1e-6, beta * exp(accepted / adaptEvery - wantedAcceptance)));
            accepted = 0;
          }
          continue;
        }
        for (let k = 0; k < rank; k++) total[k] += z[k];
        const want = Math.floor(((step - start + 1) * kept) / steps);
        if (samples.length < want) samples.push(expand(z, unseen[samples.length]));
        if ((step & 255) === 0 && context?.aborted?.()) break;
      }
      const count = Math.max(1, step - start);
      for (let k = 0; k < rank; k++) total[k] /= count;
      let residual = frame.outside;
      for (let k = 0; k < rank; k++) residual += (c[k] - s[k] * total[k]) * (c[k] - s[k] * total[k]);
      return { x: expand(total, null), parameter: null, iterations: step, forwardSolves: 0, stop: 'maxIterations', residualNorm: Math.sqrt(residual), samples };
    }, s);

    function expand(z: Float64Array, part: Float64Array | null): Float64Array {
      const x = part ? part.slice() : new Float64Array(n);
      for (let k = 0; k < rank; k++) for (let j = 0; j < n; j++) x[j] += z[k] * basis[k * n + j];
      for (let j = 0; j < n; j++) x[j] += background[j];
      return x;
    }
  },
};
export const crankNicolsonMethod = defineMethod(method);
