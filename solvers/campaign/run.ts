/**
 * What a worker or a browser runs: one solver configuration on one phantom, level by level. Pure: the clock, if any, is handed in.
 */
import { sha256Hex } from '../core/hash';
import { deriveDrawKey } from '../core/random';
import type { ForwardProblem, Method, NoiseInfo, Reconstruction, Reconstructor, RuleSetting } from '../core/types';
import { allFinite } from '../core/vector';
import { credibleInterval, fewestSamples } from './credible-interval';
import { getMethod } from '../methods/registry';
import { evaluateMetrics, metrics } from '../metrics/registry';
import type { NoiseModel } from '../noise/noise-model';
import { getNoiseModel } from '../noise/registry';
import type { LevelSeed, SimulatedPhantom, Trial } from './trial';

export interface RunConfiguration {
  readonly method: string;
  /** Checked against the method's own schema; missing ones take their default. */
  readonly parameters: Readonly<Record<string, number | string>>;
  readonly rule: RuleSetting | null;
}

export interface PreparedRun {
  readonly problem: ForwardProblem;
  readonly method: Method;
  readonly configuration: RunConfiguration;
  readonly noiseModel: NoiseModel;
  readonly reconstructor: Reconstructor;
}

/**
 * Pays once for the factorisations of a configuration on a problem. Several configurations on the same problem object share their
 * decompositions.
 * @throws RangeError for an unknown method or noise model, or parameters that the method refuses
 */
export function prepareRun(request: { problem: ForwardProblem; noiseModel?: string } & RunConfiguration): PreparedRun {
  const { problem, parameters, rule } = request;
  const method = getMethod(request.method);
  if (!method.capabilities.families.includes(problem.family)) throw new RangeError(`${method.name} does not serve the family '${problem.family}'.`);
  if (!method.capabilities.dataKinds.includes(problem.dataKind)) throw new RangeError(`${method.name} does not serve ${problem.dataKind} data.`);
  const noiseModel = getNoiseModel(request.noiseModel ?? 'gaussian');
  if (!noiseModel.families.includes(problem.family)) throw new RangeError(`The noise '${noiseModel.name}' does not occur in the family '${problem.family}'.`);
  const reason = method.unfit?.(problem);
  if (reason) throw new RangeError(`${method.name} does not serve this phantom: ${reason}`);
  return {
    problem, method, configuration: { method: request.method, parameters, rule },
    noiseModel, reconstructor: method.prepare(problem, { ...parameters }, rule),
  };
}

export interface RunLevelOptions extends LevelSeed {
  /** Draw indices, in the order of the trials returned. */
  readonly draws: readonly number[];
  /** Seconds, monotonic. */
  readonly now?: () => number;
  /** Looked at between reconstructions; once true the trials finished so far are returned. */
  readonly aborted?: () => boolean;
}

/**
 * Reconstructs and scores the given draws of one level. The bits of a trial do not depend on which other draws are asked for.
 * @throws RangeError where the simulated data do not fit the problem
 */
export function runLevel(prepared: PreparedRun, simulated: SimulatedPhantom, options: RunLevelOptions): Trial[] {
  const { benchSeed, phantomHash, levelIndex, level, draws, now, aborted } = options;
  requireFit(prepared.problem, simulated);
  const data: Float64Array[] = [];
  const noise: NoiseInfo[] = [];
  for (const drawIndex of draws) {
    const key = deriveDrawKey(benchSeed, phantomHash, levelIndex, drawIndex);
    const drawn = prepared.noiseModel.draw(simulated.clean, level, simulated.noiseScale, key);
    data.push(drawn.data);
    noise.push({ norm: drawn.noiseNorm, level });
  }
  const begin = now?.();
  const reconstructions = prepared.reconstructor.reconstructMany(data, noise, { aborted });
  const seconds = now && begin !== undefined && reconstructions.length > 0 ? (now() - begin) / reconstructions.length : null;
  return reconstructions.map((reconstruction, i) => score(prepared.problem, simulated, levelIndex, draws[i], noise[i].norm, reconstruction, seconds));
}

/** One draw alone, with the bits that the whole level gives. */
export function recomputeDraw(prepared: PreparedRun, simulated: SimulatedPhantom, seed: LevelSeed & { readonly drawIndex: number }): Trial {
  return runLevel(prepared, simulated, { ...seed, draws: [seed.drawIndex] })[0];
}

function score(problem: ForwardProblem, simulated: SimulatedPhantom, levelIndex: number, drawIndex: number, noiseNorm: number, reconstruction: Reconstruction, seconds: number | null): Trial {
  const { parameter, iterations, forwardSolves, residualNorm, x } = reconstruction;
  const finite = allFinite(x) && Number.isFinite(residualNorm);
  const image = finite ? new Float64Array(simulated.truthImage.length) : Float64Array.from(simulated.backgroundImage);
  if (finite) problem.toImage(x, image);
  return {
    levelIndex, drawIndex, noiseNorm, parameter, iterations, forwardSolves, stop: finite ? reconstruction.stop : 'diverged',
    metrics: finite ? scoreImage(problem, simulated, image, residualNorm, noiseNorm, reconstruction.samples) : undefinedMetrics('The reconstruction is not finite; the background is stored in its place.'),
    image, imageHash: sha256Hex(image), seconds,
  };
}

/** Metrics of an image, also one reconstructed elsewhere (`residualNorm` null where unknown). */
export function scoreImage(problem: ForwardProblem, simulated: SimulatedPhantom, image: Float64Array, residualNorm: number | null, noiseNorm: number, samples?: readonly Float64Array[]): Trial['metrics'] {
  const interval = samples && samples.length >= fewestSamples ? credibleInterval(problem, samples) : undefined;
  return evaluateMetrics({ truth: simulated.truthImage, background: simulated.backgroundImage, estimate: image, grid: problem.grid, targets: simulated.targets, residualNorm, noiseNorm, interval });
}

/** Metrics of the background alone: the baseline of every chart. */
export function trivialMetrics(problem: ForwardProblem, simulated: SimulatedPhantom): Trial['metrics'] {
  return scoreImage(problem, simulated, simulated.backgroundImage, null, 0);
}

function undefinedMetrics(reason: string): Trial['metrics'] {
  const values: Trial['metrics'] = {};
  for (const metric of metrics) values[metric.key] = { value: null, reason };
  return values;
}

function requireFit(problem: ForwardProblem, simulated: SimulatedPhantom): void {
  const pixels = problem.grid.inside.length;
  if (simulated.clean.length !== problem.dataSize) throw new RangeError(`The simulated data have ${simulated.clean.length} values, the problem ${problem.dataSize}.`);
  for (const [name, image] of [['truth', simulated.truthImage], ['background', simulated.backgroundImage]] as const)
    if (image.length !== pixels) throw new RangeError(`The ${name} image has ${image.length} pixels, the grid ${pixels} inside the body.`);
}
