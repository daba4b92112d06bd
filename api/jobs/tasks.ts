/** What the server asks of a worker thread, and what comes back: plain data that can be cloned or transferred. */
import type { AxisKey, AxisSetting } from '../../shared/domain/axes';
import type { CheckResultWire } from '../../shared/contracts/common';
import type { Sensitivity } from '../../shared/contracts/runs';
import type { Configuration } from '../../shared/contracts/solvers';
import type { PhantomDefinition } from '../../shared/domain/phantom-definition';
import type { Target } from '../../solvers/core/types';
import type { VerificationOutcome } from '../../solvers/verification/check';
import type { SimulationSummary } from '../entities/simulation.ts';

/** A phantom as a worker needs it. */
export interface PhantomInput {
  readonly definition: PhantomDefinition;
  /** Values of the uploaded array, where the ground truth is one. */
  readonly arrayValues: Float64Array | null;
}

/** A fault of the content, for the reader to correct. Faults of the server are thrown. */
export interface Refusal {
  readonly ok: false;
  readonly message: string;
  readonly path: readonly (string | number)[];
}
export type Answer<T> = ({ readonly ok: true } & T) | Refusal;

export interface SimulateTask extends PhantomInput {
  readonly checks: boolean;
}
export interface SimulationOutput {
  readonly summary: SimulationSummary;
  readonly frame: Float64Array;
  readonly reference: Float64Array;
  readonly clean: Float64Array;
  readonly truthImage: Float64Array;
  readonly checks: CheckResultWire[] | null;
  readonly seconds: number;
}

/** Everything that decides the result of a run. The ground truth enters as an image only: the inversion does not know it. */
export interface RunInput {
  /** Names the preparation in a worker's cache. */
  readonly key: string;
  readonly definition: PhantomDefinition;
  readonly phantomHash: string;
  readonly configuration: Configuration;
  readonly noiseModel: string;
  readonly axis: AxisSetting;
  /** On another axis than the noise: the data of each level. */
  readonly cases: readonly CaseInput[] | null;
  readonly ladder: readonly number[];
  readonly draws: number;
  readonly seed: number;
  readonly noiseScale: number;
  readonly clean: Float64Array;
  readonly truthImage: Float64Array;
  readonly targets: readonly Target[];
  readonly modelErrorFloor: number;
}

/** One level of another axis than the noise. */
export interface CaseInput {
  readonly clean: Float64Array;
  readonly truthImage: Float64Array;
  readonly noiseScale: number;
  /** Indices of the data that are left; null for all. */
  readonly rows: Int32Array | null;
  /** With the contrast of the level. */
  readonly targets: readonly Target[];
}
export interface CaseTask extends PhantomInput {
  readonly axis: AxisKey;
  readonly level: number;
}

export interface SliceTask {
  readonly run: RunInput;
  readonly level: number;
  readonly draws: readonly number[];
}
export interface TrialOutput {
  readonly level: number;
  readonly draw: number;
  readonly metrics: Record<string, number | null>;
  readonly reasons: Record<string, string> | null;
  readonly supAt: [number, number] | null;
  readonly parameter: number | null;
  readonly iterations: number;
  readonly forwardSolves: number;
  readonly stop: string;
  readonly noiseNorm: number;
  readonly imageHash: string;
  readonly image: Float64Array;
}
export interface SliceOutput {
  readonly trials: readonly TrialOutput[];
  /** Seconds of work in this slice, preparation left out. */
  readonly seconds: number;
  readonly prepareSeconds: number;
}

export interface RunChecksTask {
  readonly run: RunInput;
  /** Relative L2 errors at the lowest level by draw, as stored. */
  readonly lowestErrors: readonly (number | null)[];
  /** Hashes of stored trials, to recompute. */
  readonly stored: readonly { readonly level: number; readonly draw: number; readonly imageHash: string }[];
}
export interface RunChecksOutput {
  readonly checks: CheckResultWire[];
  /** Figures of the background alone, by metric key. */
  readonly trivial: Record<string, number | null>;
  readonly secondsPerReconstruction: number | null;
  /** Over truncated SVD timed in the same worker. */
  readonly timeRatio: number | null;
}

export interface SensitivityTask {
  readonly run: RunInput;
  readonly level: number;
  readonly draw: number;
}
/** Error against the regularisation parameter at one draw. */
export interface SensitivityOutput {
  readonly parameterName: string;
  readonly parameters: number[];
  readonly errors: number[];
  readonly oracle: Sensitivity['oracle'];
  readonly picard: Sensitivity['picard'];
}

export interface VerifyTask {
  /** Of a check in the verification registry. */
  readonly key: string;
}
export interface VerifyOutput {
  readonly outcome: VerificationOutcome;
  readonly seconds: number;
}
