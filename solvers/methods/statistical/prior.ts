/** The Gaussian prior that the sampling methods share: white noise through the smoothness operator, in the coordinates of the singular vectors. */
import { deriveKey, RandomStream } from '../../core/random';
import { denseMatrix } from '../../core/matrix-operator';
import type { ForwardProblem } from '../../core/types';
import { smoothnessFactor, smoothnessSystem } from '../smoothness-prior';
import { frameSpectrum, type SpectralSystem } from '../spectral-system';
import { unknownScale } from '../unknown-scale';

export interface SmoothnessPrior {
  readonly system: SpectralSystem;
  /** A draw of the prior with zero mean: R^{-1} xi, xi standard normal. Length n. */
  draw(random: RandomStream, out: Float64Array): void;
  /** Takes away from a change what the data see of it: the part in the span of the singular vectors. */
  removeSeen(change: Float64Array): void;
}

/** @param deviation share of the scale of the unknown; @param length share of the body radius */
export function smoothnessPrior(problem: ForwardProblem, deviation: number, length: number): SmoothnessPrior {
  const size = deviation * unknownScale(problem);
  const reach = length * problem.grid.bodyRadius;
  const system = smoothnessSystem(problem, size, reach);
  const factor = smoothnessFactor(problem, size, reach);
  const jacobian = denseMatrix(problem.linearise(problem.background()));
  const { dataSize: m, unknowns: n, rank, basis, singularValues: s } = system;
  const seen = new Float64Array(m);
  return {
    system,
    draw(random, out) {
      random.fillNormal(out);
      factor.halfSolveMany(out, 1, 'backward');
    },
    removeSeen(change) {
      // v_k^T R h = u_k^T J h / s_k.
      for (let i = 0; i < m; i++) {
        let sum = 0;
        for (let j = 0; j < n; j++) sum += jacobian[i * n + j] * change[j];
        seen[i] = sum + system.offset[i];
      }
      const { coefficients } = frameSpectrum(system, seen);
      for (let k = 0; k < rank; k++) {
        const z = coefficients[k] / s[k];
        for (let j = 0; j < n; j++) change[j] -= z * basis[k * n + j];
      }
    },
  };
}

/** A stream of its own for each purpose: the same for every draw of the noise, so that a draw can be computed alone. */
export const methodStream = (purpose: string): RandomStream => new RandomStream(deriveKey('hadamark method 1', purpose));

/** Standard deviation of one datum, from the norm of the noise; a hair of the data where there is none. */
export function noiseDeviation(norm: number, dataNorm: number, m: number): number {
  return Math.max(norm, 1e-6 * dataNorm) / Math.sqrt(m);
}
