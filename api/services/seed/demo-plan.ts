import type { z } from 'zod';
import type { Configuration } from '../../../shared/contracts/solvers';
import type { AxisSetting } from '../../../shared/domain/axes';
import { defaultDraws, defaultLadder } from '../../../shared/domain/ladder';
import type { GroupRole } from '../../../shared/domain/permissions';
import type { Verdict } from '../../../shared/domain/states';
import type { commentCreateSchema } from '../../../shared/contracts/runs';

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
  /** Keys of solvers, in the order they are entered: linear ones first. `version` is the newest unless given. */
  readonly entries: readonly { readonly solver: string; readonly by: Handle; readonly version?: number }[];
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

const published = (reason: string, by: Handle = 'reviewer-demo') => ({ published: { by, reason } });

const groups: readonly GroupPlan[] = [
  {
    slug: 'tarn-soil-physics', name: 'Tarn Soil Physics', owner: 'owner-demo',
    description: 'Water in soil columns, seen by electrodes around them. Keeps the phantoms with 16 electrodes.',
    members: [{ handle: 'curator-demo', roles: ['curator'] }, { handle: 'observer-demo', roles: ['observer'] }],
  },
  {
    slug: 'holm-reference-methods', name: 'Holm Reference Methods', owner: 'owner-demo',
    description: 'Plain implementations of published methods, with the parameters their sources recommend, for others to be compared with.',
    members: [{ handle: 'developer-demo', roles: ['developer'] }],
  },
  {
    slug: 'northlight-process-imaging', name: 'Northlight Process Imaging', owner: 'developer-demo',
    description: 'Sharp interfaces in pipes and mixers.',
    members: [{ handle: 'observer-demo', roles: ['observer'] }],
  },
  {
    slug: 'quarry-point-geophysics', name: 'Quarry Point Geophysics', owner: 'curator-demo',
    description: 'Nonlinear inversion, and the phantoms with 32 electrodes.',
    members: [{ handle: 'developer-demo', roles: ['developer'] }, { handle: 'second-reviewer-demo', roles: ['observer'] }],
  },
];

const phantoms: readonly PhantomPlan[] = [
  { folder: 'two-lobes', group: 'tarn-soil-physics', curator: 'curator-demo', ...published('Checks pass, the description says what the two signs are for.') },
  { folder: 'deep-core', group: 'tarn-soil-physics', curator: 'curator-demo', ...published('The formula in the description agrees with its source. Checks pass.') },
  { folder: 'rim-pair-and-bar', group: 'tarn-soil-physics', curator: 'curator-demo', sealedForDays: 180, ...published('Looked at the truth under seal: shapes lie inside the disc, checks pass.') },
  { folder: 'warm-and-cold-spots', group: 'tarn-soil-physics', curator: 'curator-demo', ...published('The expression is smooth and close to the background at the rim. Checks pass.', 'second-reviewer-demo') },
  { folder: 'crescent-and-hook', group: 'tarn-soil-physics', curator: 'curator-demo', ...published('Extent and grey scale are stated, the array is oriented as the description says.', 'second-reviewer-demo') },
  { folder: 'four-compass-points', group: 'quarry-point-geophysics', curator: 'curator-demo', ...published('North is up and first electrode at the top. Noise is relative to the voltages, and the page says so.') },
  { folder: 'ring-with-a-core', group: 'quarry-point-geophysics', curator: 'curator-demo', ...published('The ring is no target, as intended. Checks pass.') },
  { folder: 'wedge-and-bump', group: 'quarry-point-geophysics', curator: 'curator-demo', ...published('Corner and bump lie clear of the electrodes. Checks pass.') },
  { folder: 'split-bar', group: 'tarn-soil-physics', curator: 'curator-demo' },
];

const tikhonov = (penalty: string, rule: Configuration['rule']): Configuration => ({ method: 'tikhonov', parameters: { penalty, smallestAlpha: 1e-5 }, rule });

const solvers: readonly SolverPlan[] = [
  {
    key: 'tikhonov-gradient', group: 'holm-reference-methods', developer: 'developer-demo', name: 'Tikhonov, gradient penalty',
    description: `One step of a linearised inversion at the constant background, penalised by the size of the gradient:

$$ \\hat x = x_b + (J^{\\mathsf T} J + \\alpha^2 L^{\\mathsf T} L)^{-1} J^{\\mathsf T} (y - F(x_b)). $$

$\\alpha$ comes from the discrepancy principle at each frame: the residual is brought to $1.05$ times the norm of the noise (Morozov 1966).`,
    configuration: tikhonov('gradient', { key: 'discrepancy', safetyFactor: 1.5 }),
    versions: [{ configuration: tikhonov('gradient', { key: 'discrepancy', safetyFactor: 1.05 }), whatChanged: 'Safety factor 1.05 instead of 1.5' }],
  },
  {
    key: 'tikhonov-identity', group: 'holm-reference-methods', developer: 'developer-demo', name: 'Tikhonov, identity penalty',
    description: `The same linear step with $L = I$, and $\\alpha$ by generalised cross-validation (Golub, Heath, Wahba 1979). The rule is not told the noise.`,
    configuration: tikhonov('identity', { key: 'gcv' }),
  },
  {
    key: 'tikhonov-laplacian', group: 'holm-reference-methods', developer: 'developer-demo', name: 'Tikhonov, Laplacian penalty',
    description: `The same linear step, penalised by the Laplacian, with $\\alpha$ at the corner of the L-curve (Hansen 1992).`,
    configuration: tikhonov('laplacian', { key: 'l-curve' }),
  },
  {
    key: 'truncated-svd', group: 'holm-reference-methods', developer: 'developer-demo', name: 'Truncated SVD, cross-validated',
    description: `Keeps the $k$ best determined components, with $k$ by generalised cross-validation:

$$ \\hat x = x_b + \\sum_{i=1}^{k} \\frac{u_i^{\\mathsf T} (y - F(x_b))}{\\sigma_i}\\, v_i. $$`,
    configuration: { method: 'truncated-svd', parameters: { largestIndex: 80 }, rule: { key: 'gcv' } },
  },
  {
    key: 'cgls', group: 'quarry-point-geophysics', developer: 'developer-demo', name: 'CGLS, early stopping',
    description: `Conjugate gradients on the normal equations, stopped when the residual reaches the norm of the noise. The number of steps is the regularisation.`,
    configuration: { method: 'cgls', parameters: { penalty: 'identity', largestIteration: 60 }, rule: { key: 'discrepancy', safetyFactor: 1.05 } },
  },
  {
    key: 'total-variation', group: 'northlight-process-imaging', developer: 'developer-demo', name: 'Total variation, primal-dual',
    description: `Flat regions with sharp edges on the linearised problem, by the primal-dual iteration of Chambolle and Pock (2011):

$$ \\min_h\\; \\tfrac12 \\lVert J h - (y - F(x_b)) \\rVert^2 + \\lambda \\sum_i \\ell_i\\, \\lvert [h]_i \\rvert. $$`,
    configuration: { method: 'total-variation', parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.05 } },
  },
  {
    key: 'gauss-newton', group: 'quarry-point-geophysics', developer: 'developer-demo', name: 'Gauss-Newton, regularised',
    description: `The nonlinear problem, linearised anew at every step, with a penalty that decays geometrically (Bakushinskii 1992) and the discrepancy as its end.`,
    configuration: { method: 'gauss-newton', parameters: { penalty: 'gradient', firstAlpha: 0.3, decay: 0.25, largestIteration: 6 }, rule: { key: 'discrepancy', safetyFactor: 1.1 } },
  },
  {
    key: 'gauss-newton-bare', group: 'quarry-point-geophysics', developer: 'developer-demo', name: 'Gauss-Newton, hardly regularised',
    description: `The same iteration with a first weight of $10^{-6}\\,\\sigma_1$ that falls to a twentieth at every step: how little penalty does the problem bear?`,
    configuration: { method: 'gauss-newton', parameters: { penalty: 'gradient', firstAlpha: 1e-6, decay: 0.05, largestIteration: 12 }, rule: { key: 'discrepancy', safetyFactor: 1 } },
  },
];

const buried = 'buried-inclusions';
const trigonometric = 'trigonometric';

const benches: readonly BenchPlan[] = [
  {
    key: buried, group: 'tarn-soil-physics', curator: 'curator-demo', title: 'Buried inclusions, 16 electrodes',
    question: 'Which method recovers buried inclusions best when the electrode voltages are noisy?',
    description: `Sixteen electrodes, adjacent drive and adjacent measurement without the driven electrodes: 208 values, half of them independent by reciprocity.
Data are the difference of two frames, and the noise level $\\delta$ is relative to that difference, $\\lVert e \\rVert = \\delta\\, \\lVert y \\rVert$.

Parameters stay fixed across the ladder unless the configuration's own rule changes them. A configuration must not be tuned on these phantoms.`,
    phantoms: ['two-lobes', 'deep-core', 'rim-pair-and-bar', 'warm-and-cold-spots', 'crescent-and-hook'],
    ladder: defaultLadder, draws: defaultDraws, seed: 20261130,
    entries: [
      { solver: 'tikhonov-gradient', by: 'developer-demo' }, { solver: 'tikhonov-identity', by: 'developer-demo' }, { solver: 'tikhonov-laplacian', by: 'developer-demo' },
      { solver: 'truncated-svd', by: 'developer-demo' }, { solver: 'cgls', by: 'developer-demo' },
      { solver: 'total-variation', by: 'developer-demo' },
      // Its weight falls below what rounding bears, and the first matrix after that cannot be factorised: the run fails at once.
      { solver: 'gauss-newton-bare', by: 'developer-demo' },
      { solver: 'gauss-newton', by: 'developer-demo' },
    ],
  },
  {
    key: trigonometric, group: 'quarry-point-geophysics', curator: 'curator-demo', title: 'Full patterns, 32 electrodes',
    question: 'What do 32 electrodes and trigonometric patterns buy when the noise is relative to the voltages?',
    description: `Thirty-two electrodes with all 31 trigonometric patterns (Isaacson 1986), every electrode voltage measured.
The noise level is relative to the raw voltages, $\\lVert e \\rVert = \\delta\\, \\lVert V \\rVert$: much harder at the same $\\delta$ than a level relative to the difference.`,
    phantoms: ['four-compass-points', 'ring-with-a-core', 'wedge-and-bump'],
    ladder: defaultLadder, draws: defaultDraws, seed: 4711,
    entries: [
      { solver: 'tikhonov-gradient', by: 'developer-demo' }, { solver: 'tikhonov-identity', by: 'developer-demo' },
      { solver: 'truncated-svd', by: 'developer-demo' }, { solver: 'cgls', by: 'developer-demo' }, { solver: 'total-variation', by: 'developer-demo' },
    ],
  },
];

const signedOff = (bench: string, solver: string, phantom: string, reason: string, by: Handle = 'reviewer-demo'): ReviewPlan => ({
  bench, solver, phantom, verdict: { by, verdict: 'signed-off', reason },
});
const plain = 'Table, worst draws, checks and provenance inspected. The figures are what this configuration gives.';
const fitsLinearisation =
  'At low noise the rule fits the error of the linearisation as if it were signal, and the images are worse than the background alone. Read this configuration only where its curve lies below the trivial line.';

const reviews: readonly ReviewPlan[] = [
  ...['two-lobes', 'deep-core', 'rim-pair-and-bar', 'warm-and-cold-spots', 'crescent-and-hook'].map((phantom) => signedOff(buried, 'truncated-svd', phantom, plain, 'second-reviewer-demo')),
  ...['deep-core', 'rim-pair-and-bar', 'crescent-and-hook'].map((phantom) => signedOff(buried, 'tikhonov-gradient', phantom, plain)),
  ...['two-lobes', 'warm-and-cold-spots'].map((phantom): ReviewPlan => ({
    bench: buried, solver: 'tikhonov-gradient', phantom, verdict: { by: 'reviewer-demo', verdict: 'signed-off-with-reservation', reason: fitsLinearisation },
  })),
  ...['two-lobes', 'deep-core', 'rim-pair-and-bar'].map((phantom) => signedOff(buried, 'cgls', phantom, plain)),
  ...['two-lobes', 'deep-core', 'crescent-and-hook'].map((phantom) => signedOff(buried, 'total-variation', phantom, plain, 'second-reviewer-demo')),
  {
    bench: buried, solver: 'total-variation', phantom: 'warm-and-cold-spots',
    comments: [
      { by: 'reviewer-demo', text: 'The truth is smooth here and the images have steps. Do they come from the data or from the penalty?', anchor: 'images', question: true },
      { by: 'developer-demo', text: 'From the penalty: total variation prefers steps. The position of the steps changes from draw to draw, the two spots do not.', anchor: 'images' },
    ],
    verdict: {
      by: 'reviewer-demo', verdict: 'signed-off-with-reservation',
      reason: 'The truth of this phantom is smooth. Steps in these images come from the penalty, not from the data.',
    },
  },
  {
    bench: buried, solver: 'tikhonov-identity', phantom: 'deep-core',
    comments: [{ by: 'reviewer-demo', text: 'Cross-validation is not told the noise. Does the choice of alpha scatter much between draws at the lowest levels?', anchor: 'table', question: true }],
    taken: 'reviewer-demo',
  },
  {
    bench: buried, solver: 'tikhonov-laplacian', phantom: 'two-lobes',
    verdict: { by: 'reviewer-demo', verdict: 'returned', reason: 'An L-curve can have several corners. Say in the description which one is taken and why, then enter the next version.' },
  },
  ...['four-compass-points', 'wedge-and-bump'].map((phantom) => signedOff(trigonometric, 'tikhonov-gradient', phantom, plain)),
  signedOff(trigonometric, 'truncated-svd', 'four-compass-points', plain),
  {
    bench: buried, solver: 'gauss-newton-bare', phantom: 'two-lobes', giveUp: { by: 'developer-demo' },
    comments: [{ by: 'developer-demo', text: 'The weight falls below 1e-8 of the largest singular value, where rounding leaves a matrix that is not positive definite. The other runs of this entry are stopped; a version with a larger first weight follows.', anchor: '' }],
  },
];

/** Everything here is invented. Runs are computed, never written by hand. */
export const demoPlan: DemoPlan = { groups, phantoms, solvers, benches, reviews };
