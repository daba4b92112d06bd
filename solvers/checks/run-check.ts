import type { PreparedRun } from '../campaign/run';
import type { SimulatedPhantom } from '../campaign/trial';

/** A finished run as the checks see it. */
export interface RunCheckContext {
  readonly prepared: PreparedRun;
  readonly simulated: SimulatedPhantom;
  readonly benchSeed: string | number;
  readonly phantomHash: string;
  readonly ladder: readonly number[];
  /** Draws a level. */
  readonly draws: number;
  /** Relative L2 errors at the lowest level by draw, as stored. */
  readonly lowestErrors: readonly (number | null)[];
  /** Stored image hashes to recompute, any few of the run. */
  readonly stored: readonly { readonly levelIndex: number; readonly drawIndex: number; readonly imageHash: string }[];
}
