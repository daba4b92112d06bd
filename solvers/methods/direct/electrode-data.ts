import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { denseMatrix } from '../../core/matrix-operator';
import type { ForwardProblem, NoiseInfo, ProblemFacts } from '../../core/types';
import { requireVector } from '../../core/vector';
import { createEitInversion, type EitInversion } from '../../problems/electrical-impedance/inversion-problem';
import { frameSize, patternCount } from '../../problems/electrical-impedance/patterns';
import { drivenChannels, type DrivenChannels } from './driven-channels';
import { currentRank, electrodeMatrixReader } from './electrode-matrix';

/** What the direct methods read from the frames of one problem. */
export interface ElectrodeData {
  readonly problem: EitInversion;
  /** Electrodes less one: size of the matrices, in the trigonometric basis. */
  readonly size: number;
  /** Frame minus that of the background, length `dataSize`. @throws RangeError for a wrong length or a value that is not finite */
  change(data: Float64Array): Float64Array;
  /** The relative map R(sigma) - R(background), V per A/m, size x size; zero for the background's frame. */
  relativeMap(change: Float64Array, noise: NoiseInfo): Float64Array;
  /**
   * What the eigenvalues of a relative map of spectral norm `norm` may be off by, V per A/m: the expected spectral norm of the noise times
   * the safety factor, at least `share` of the norm; at least 0.003 of it where the channels at driven electrodes are predicted,
   * about what these predictions are off by.
   */
  uncertainty(norm: number, noise: NoiseInfo, safetyFactor: number, share: number): number;
  /** Expected squares of the entries of the noise in the relative map, symmetric, size x size, for noise of norm 1. */
  readonly entryVariances: Float64Array;
  /** Minus the derivative of the map for each cell, size x size x cells: positive semidefinite in every cell. V per A/m per S/m. */
  sensitivities(): Float64Array;
  /** Derivative of a frame at the background, dataSize x cells. */
  readonly jacobian: Float64Array;
}

/** Why the map between electrodes cannot be had from the frames of a problem; null where it can. */
export function mapUnfit(facts: ProblemFacts): string | null {
  const geometry = facts.geometry as EitGeometry;
  if (facts.family !== 'electrical-impedance') return 'it needs currents and voltages of electrodes.';
  if (facts.dataSize !== frameSize(geometry)) return `its frames have ${facts.dataSize} values, not the ${frameSize(geometry)} of these electrodes.`;
  const rank = currentRank(geometry);
  if (rank < geometry.electrodes - 1)
    return `it needs the voltages of ${geometry.electrodes - 1} independent currents; these patterns hold ${rank}.`;
  if (2 * facts.dataSize < patternCount(geometry) * geometry.electrodes) return 'it predicts the voltages at driven electrodes from the others, and fewer than half of the channels are measured.';
  return null;
}

/** Share of the largest eigenvalue that predicted channels put the others off by, for changes well inside (`driven-channels.ts`). */
const predictedShare = 0.003;

const cache = new WeakMap<ForwardProblem, ElectrodeData>();

/**
 * The electrode data of a problem, one computation a problem object.
 * Where the driven electrodes are not measured their channels are predicted (see `driven-channels.ts`); the noise bound then takes
 * them as noisy as the measured ones.
 * @throws RangeError where `mapUnfit` gives a reason, or the problem is not an inversion model of electrodes
 */
export function electrodeData(problem: ForwardProblem): ElectrodeData {
  let entry = cache.get(problem);
  if (!entry) cache.set(problem, (entry = compute(problem)));
  return entry;
}

function compute(given: ForwardProblem): ElectrodeData {
  const reason = mapUnfit(given);
  if (reason) throw new RangeError(reason);
  if (!('cellCentres' in given)) throw new RangeError('The model of the problem does not tell where its cells lie.');
  const problem = given as EitInversion;
  const { dataSize, unknowns } = problem;
  const background = problem.background();
  const jacobian = denseMatrix(problem.linearise(background));
  const offset = problem.dataKind === 'difference' ? null : problem.evaluate(background);
  let completion: DrivenChannels | null = null;
  let fullJacobian = jacobian;
  let geometry = problem.geometry;
  if (geometry.measurement === 'adjacent-undriven') {
    geometry = { ...geometry, measurement: 'adjacent-all' };
    fullJacobian = denseMatrix(createEitInversion(geometry, background[0], 'difference').linearise(background));
    completion = drivenChannels(problem, geometry, fullJacobian);
  }
  const reader = electrodeMatrixReader(geometry);
  const { size, currentVariances, voltageVariances } = reader;
  const entryVariances = new Float64Array(size * size);
  for (let a = 0; a < size; a++)
    for (let b = 0; b < size; b++) {
      const sum = currentVariances[a] * voltageVariances[b] + currentVariances[b] * voltageVariances[a];
      entryVariances[a * size + b] = ((a === b ? 0.5 : 0.25) * sum) / dataSize;
    }
  let sensitivities: Float64Array | null = null;
  return {
    problem,
    size,
    entryVariances,
    jacobian,
    change(data) {
      requireVector(data, dataSize, 'The data frame');
      const change = data.slice();
      if (offset) for (let i = 0; i < dataSize; i++) change[i] -= offset[i];
      return change;
    },
    relativeMap: (change, noise) => reader.read(completion ? completion.complete(change, noise) : change, 1),
    uncertainty(norm, noise, safetyFactor, share) {
      const ofNoise = (safetyFactor * reader.noiseNorm * noise.norm) / Math.sqrt(dataSize);
      return Math.max(ofNoise, Math.max(share, completion ? predictedShare : 0) * norm);
    },
    sensitivities() {
      if (!sensitivities) {
        sensitivities = reader.read(fullJacobian, unknowns);
        for (let i = 0; i < sensitivities.length; i++) sensitivities[i] = -sensitivities[i];
      }
      return sensitivities;
    },
  };
}
