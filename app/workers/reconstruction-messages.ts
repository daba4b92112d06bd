import type { Replay } from '../../shared/contracts/runs';
import type { ProblemDescriptor } from '../../shared/domain/phantom-definition';
import type { RuleSetting, StopReason, Target } from '../../solvers/core/types';

/** The inversion problem; prepared once for each family, geometry, background and data kind. */
export type ProblemSpec = ProblemDescriptor;
export interface ConfigurationSpec {
  readonly method: string;
  readonly parameters: Readonly<Record<string, number | string>>;
  readonly rule: RuleSetting | null;
}
/** What the independent simulation gives of one phantom version; `truth` null while it is sealed. */
export interface PhantomData {
  readonly contentHash: string;
  /** Clean data in the phantom's data kind. */
  readonly clean: Float64Array;
  readonly noiseScale: number;
  /** On the inside pixels, in the unit of the unknown. */
  readonly truth: Float64Array | null;
  readonly targets: readonly Target[];
}
export interface DrawSpec {
  readonly seed: number;
  readonly levelIndex: number;
  readonly level: number;
  readonly drawIndex: number;
}
export interface JobBase {
  readonly problem: ProblemSpec;
  readonly configuration: ConfigurationSpec;
}

export type Job =
  /** Builds the problem and factorises, so that what follows is quick. */
  | ({ readonly kind: 'prepare' } & JobBase)
  /** One draw. */
  | ({ readonly kind: 'reconstruct'; readonly phantom: PhantomData; readonly draw: DrawSpec } & JobBase)
  /** Median relative L2 over `draws` draws of each level; progress after every level. */
  | ({ readonly kind: 'error-against-noise'; readonly phantom: PhantomData; readonly seed: number; readonly levels: readonly number[]; readonly draws: number } & JobBase)
  /** Relative L2 of one draw against the regularisation parameter. */
  | ({ readonly kind: 'error-against-parameter'; readonly phantom: PhantomData; readonly draw: DrawSpec } & JobBase)
  /** A finished run, draw by draw, for its hashes. */
  | { readonly kind: 'recompute'; readonly replay: Replay };
export type JobKind = Job['kind'];

export interface PreparedAnswer {
  readonly unknowns: number;
  readonly dataSize: number;
  readonly seconds: number;
}
export interface ReconstructionAnswer {
  /** On the inside pixels, in the unit of the unknown. */
  readonly image: Float64Array;
  readonly imageHash: string;
  /** By metric key; empty while the truth is sealed. */
  readonly metrics: Readonly<Record<string, number | null>>;
  readonly parameter: number | null;
  readonly iterations: number;
  readonly stop: StopReason;
  readonly seconds: number | null;
}
export interface NoiseAnswer {
  readonly points: readonly { readonly level: number; readonly error: number | null }[];
}
export interface ParameterAnswer {
  readonly parameterName: string;
  readonly curve: readonly { readonly parameter: number; readonly error: number }[];
  readonly choice: { readonly parameter: number; readonly error: number | null } | null;
  readonly oracle: { readonly parameter: number; readonly error: number };
}
export interface RecomputeAnswer {
  readonly resultHash: string;
  readonly trials: readonly { readonly level: number; readonly draw: number; readonly imageHash: string }[];
  /** Trials whose hash equals the stored one. */
  readonly equal: number;
  readonly firstDifference: { readonly level: number; readonly draw: number } | null;
  readonly seconds: number;
}

export interface Answers {
  'prepare': PreparedAnswer;
  'reconstruct': ReconstructionAnswer;
  'error-against-noise': NoiseAnswer;
  /** Null for a method without a parameter, or a nonlinear one. */
  'error-against-parameter': ParameterAnswer | null;
  'recompute': RecomputeAnswer;
}
export interface JobProgress {
  readonly done: number;
  readonly total: number;
  /** Points finished so far, of 'error-against-noise'. */
  readonly points?: NoiseAnswer['points'];
}

/** To the worker. */
export type Request = { readonly id: number; readonly job: Job } | { readonly id: number; readonly cancel: true };
/** From the worker. */
export type Response =
  | { readonly id: number; readonly state: 'done'; readonly answer: Answers[JobKind] }
  | { readonly id: number; readonly state: 'progress'; readonly progress: JobProgress }
  /** `refusal`: the method or its parameters do not fit; the message is for the reader. */
  | { readonly id: number; readonly state: 'failed'; readonly message: string; readonly refusal: boolean }
  | { readonly id: number; readonly state: 'cancelled' };
