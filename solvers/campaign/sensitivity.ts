import type { SimulatedPhantom } from './trial';
import { prepareRun, scoreImage, type RunConfiguration } from './run';
import { exp, ln } from '../core/math';
import { deriveDrawKey } from '../core/random';
import type { ForwardProblem, NoiseInfo, ParameterField, PenaltyKey } from '../core/types';
import { getNoiseModel } from '../noise/registry';
import { explicitLimit } from '../methods/explicit-limit';
import { frameSpectrum, spectralSystem } from '../methods/spectral-system';

/** Error of one draw against the regularisation parameter. */
export interface Sensitivity {
  readonly parameterName: string;
  /** Ascending; on a log grid, or whole numbers. */
  readonly parameters: readonly number[];
  /** Metric at each parameter; NaN never: an undefined error is left out with its parameter. */
  readonly errors: readonly number[];
  /** What the run's own rule chose for this draw, with its error; null where it chose nothing. */
  readonly choice: { readonly parameter: number; readonly error: number | null } | null;
  /** The best parameter of the grid: it uses the truth, so it is shown and never ranked. */
  readonly oracle: { readonly parameter: number; readonly error: number };
}

export interface DrawOfLevel {
  readonly benchSeed: string | number;
  readonly phantomHash: string;
  readonly levelIndex: number;
  readonly level: number;
  readonly drawIndex: number;
  readonly noiseModel?: string;
}

function drawData(simulated: SimulatedPhantom, draw: DrawOfLevel): { data: Float64Array; noise: NoiseInfo } {
  const key = deriveDrawKey(draw.benchSeed, draw.phantomHash, draw.levelIndex, draw.drawIndex);
  const { data, noiseNorm } = getNoiseModel(draw.noiseModel ?? 'gaussian').draw(simulated.clean, draw.level, simulated.noiseScale, key);
  return { data, noise: { norm: noiseNorm, level: draw.level } };
}

/** Values to try: log-spaced over the field's range, or the whole numbers up to 120 with growing gaps. */
export function parameterGrid(field: ParameterField, points: number): number[] {
  const low = field.minimum ?? 1e-8;
  const high = field.kind === 'integer' ? Math.min(field.maximum ?? 120, 120) : Math.min(field.maximum ?? 1, 1);
  const values: number[] = [];
  for (let i = 0; i < points; i++) {
    let value = exp(ln(low) + ((ln(high) - ln(low)) * i) / (points - 1));
    // Rounding must not carry the ends past the range that the method takes.
    value = Math.min(high, Math.max(low, value));
    if (field.kind === 'integer') value = Math.round(value);
    if (values.length === 0 || value > values[values.length - 1]) values.push(value);
  }
  return values;
}

/**
 * Reconstructs one draw at each parameter of a grid, with the rule 'fixed', and with the run's own rule.
 * @param metric key of the error, smaller is better
 * @returns null for a method without a parameter, or a nonlinear one (a grid of nonlinear solves takes too long to show)
 */
export function errorAgainstParameter(
  problem: ForwardProblem, configuration: RunConfiguration, simulated: SimulatedPhantom, draw: DrawOfLevel, metric = 'relative-l2-error', points?: number,
): Sensitivity | null {
  const own = prepareRun({ problem, ...configuration });
  const { method } = own;
  if (!method.fixedValue || method.capabilities.nonlinear) return null;
  const { data, noise } = drawData(simulated, draw);
  const image = new Float64Array(problem.grid.inside.length);
  const errorOf = (x: Float64Array): number | null => {
    problem.toImage(x, image);
    return scoreImage(problem, simulated, image, null, noise.norm)[metric]?.value ?? null;
  };
  const parameters: number[] = [];
  const errors: number[] = [];
  const count = points ?? (method.capabilities.direct || method.class === 'iterative' ? 60 : 20);
  for (const value of parameterGrid(method.fixedValue, count)) {
    const { x } = method.prepare(problem, { ...configuration.parameters }, { key: 'fixed', value }).reconstruct(data, noise);
    const error = errorOf(x);
    if (error === null || !Number.isFinite(error)) continue;
    parameters.push(value);
    errors.push(error);
  }
  if (errors.length === 0) return null;
  let best = 0;
  for (let i = 1; i < errors.length; i++) if (errors[i] < errors[best]) best = i;
  const chosen = own.reconstructor.reconstruct(data, noise);
  return {
    parameterName: method.fixedValue.symbol ?? method.fixedValue.label, parameters, errors,
    choice: chosen.parameter === null ? null : { parameter: chosen.parameter, error: errorOf(chosen.x) },
    oracle: { parameter: parameters[best], error: errors[best] },
  };
}

/** The Picard view (Hansen 1990): where |u_i^T y| sinks to the noise, the components beyond carry none of the truth. */
export interface PicardData {
  readonly singularValues: readonly number[];
  /** |u_i^T y|. */
  readonly coefficients: readonly number[];
  /** ||e|| / sqrt(m). */
  readonly noisePerCoefficient: number;
  /** First of three neighbouring coefficients (counted from 0) that all lie at or below twice the noise; null where there are none. */
  readonly crossing: number | null;
}

/** @returns null where the singular vectors of the problem are out of reach */
export function picardData(problem: ForwardProblem, penalty: PenaltyKey, simulated: SimulatedPhantom, draw: DrawOfLevel): PicardData | null {
  if (explicitLimit(problem) !== null) return null;
  const { data, noise } = drawData(simulated, draw);
  const frame = frameSpectrum(spectralSystem(problem, penalty), data);
  const singularValues = Array.from(frame.singularValues);
  const coefficients = singularValues.map((_, i) => Math.abs(frame.coefficients[i]));
  const noisePerCoefficient = noise.norm / Math.sqrt(problem.dataSize);
  const sunk = (i: number): boolean => coefficients[i] <= 2 * noisePerCoefficient;
  let crossing: number | null = null;
  for (let i = 0; i + 2 < coefficients.length && crossing === null; i++) if (sunk(i) && sunk(i + 1) && sunk(i + 2)) crossing = i;
  return { singularValues, coefficients, noisePerCoefficient, crossing };
}
