import { sha256Hex } from '../core/hash';
import type { MetricValue, StopReason, Target } from '../core/types';

/** What the independent simulation hands over for one phantom version. */
export interface SimulatedPhantom {
  /** Clean data in the phantom's data kind, length `problem.dataSize`. */
  readonly clean: Float64Array;
  /** Norm that noise levels are relative to: of the raw voltages or of the difference signal. */
  readonly noiseScale: number;
  /** Truth and background on `grid.inside`. */
  readonly truthImage: Float64Array;
  readonly backgroundImage: Float64Array;
  readonly targets: readonly Target[];
}

/** Names the noise of one level of a run. */
export interface LevelSeed {
  readonly benchSeed: string | number;
  readonly phantomHash: string;
  readonly levelIndex: number;
  /** Relative level, a fraction. */
  readonly level: number;
}

/** One draw of a run. */
export interface Trial {
  readonly levelIndex: number;
  readonly drawIndex: number;
  readonly noiseNorm: number;
  readonly parameter: number | null;
  readonly iterations: number;
  readonly forwardSolves: number;
  readonly stop: StopReason;
  readonly metrics: Record<string, MetricValue>;
  /** Reconstruction on `grid.inside`. */
  readonly image: Float64Array;
  /** SHA-256 of the little-endian bytes of `image`. */
  readonly imageHash: string;
  /** Share of the batch's time, null without a clock. Not part of any hash. */
  readonly seconds: number | null;
}

/** Hash of a run: SHA-256 over its image hashes, one a line, by level and then by draw. */
export function runHash(imageHashes: readonly string[]): string {
  return sha256Hex(imageHashes.join('\n'));
}
