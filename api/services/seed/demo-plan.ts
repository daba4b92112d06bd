import type { z } from 'zod';
import type { Configuration } from '../../../shared/contracts/solvers';
import type { AxisSetting } from '../../../shared/domain/axes';
import type { GroupRole } from '../../../shared/domain/permissions';
import type { Verdict } from '../../../shared/domain/states';
import type { commentCreateSchema } from '../../../shared/contracts/runs';
import { benches } from './demo-benches.ts';
import { groups, phantoms } from './demo-phantoms.ts';
import { reviews } from './demo-reviews.ts';
import { solvers } from './demo-solvers.ts';

/** Handles of demonstration accounts. */
type Handle = string;

export interface GroupPlan {
  readonly slug: string;
  readonly name: string;
  readonly description: string;
  readonly owner: Handle;
  readonly members: readonly { readonly handle: Handle; readonly roles: readonly GroupRole[] }[];
}
/** A stock phantom of `phantoms/<folder>`. */
export interface PhantomPlan {
  readonly folder: string;
  readonly group: string;
  readonly curator: Handle;
  /** Days from the seeding until the ground truth opens. */
  readonly sealedForDays?: number;
  /** Absent: it stays submitted and waits for a reviewer. */
  readonly published?: { readonly by: Handle; readonly reason: string };
}
export interface SolverPlan {
  readonly key: string;
  readonly group: string;
  readonly developer: Handle;
  readonly name: string;
  readonly description: string;
  readonly configuration: Configuration;
  readonly versions?: readonly { readonly configuration: Configuration; readonly whatChanged: string }[];
}
export interface BenchPlan {
  readonly key: string;
  readonly group: string;
  readonly curator: Handle;
  readonly title: string;
  readonly question: string;
  readonly description: string;
  readonly phantoms: readonly string[];
  /** The noise where absent. */
  readonly axis?: AxisSetting;
  /** The Gaussian one of exact level where absent. */
  readonly noiseModel?: string;
  readonly ladder: readonly number[];
  readonly draws: number;
  readonly seed: number;
  /** Keys of solvers, in the order they are entered: quick ones first. `version` is the newest unless given. */
  readonly entries: readonly { readonly solver: string; readonly by: Handle; readonly version?: number; /** Entered after all benches are open: its runs take long. */ readonly last?: boolean }[];
}
/** What reviewers and developers say once the run has finished. */
export interface ReviewPlan {
  readonly bench: string;
  readonly solver: string;
  readonly phantom: string;
  readonly taken?: Handle;
  readonly comments?: readonly ({ readonly by: Handle } & z.input<typeof commentCreateSchema>)[];
  readonly verdict?: { readonly by: Handle; readonly verdict: Verdict; readonly reason: string };
  /** The run is expected to fail: then the developer stops the other runs of the entry and says why. */
  readonly giveUp?: { readonly by: Handle };
}
export interface DemoPlan {
  readonly groups: readonly GroupPlan[];
  readonly phantoms: readonly PhantomPlan[];
  readonly solvers: readonly SolverPlan[];
  readonly benches: readonly BenchPlan[];
  readonly reviews: readonly ReviewPlan[];
}

/** Everything here is invented. Runs are computed, never written by hand. */
export const demoPlan: DemoPlan = { groups, phantoms, solvers, benches, reviews };
