import { defaultLadder } from '../../../shared/domain/ladder';
import type { BenchPlan } from './demo-plan.ts';

/** Keys of the benches that the reviews name. */
export const buried = 'buried-inclusions';
export const trigonometric = 'trigonometric';
export const uneven = 'uneven-bodies';
export const fewViews = 'few-views';
export const equations = 'seven-equations';
export const blurred = 'blurred-pictures';

const enter = (...keys: string[]): BenchPlan['entries'] => keys.map((solver) => ({ solver, by: 'developer-demo' }));
const last = (...keys: string[]): BenchPlan['entries'] => keys.map((solver) => ({ solver, by: 'developer-demo', last: true }));

export const benches: readonly BenchPlan[] = [
  {
    key: buried, group: 'tarn-soil-physics', curator: 'curator-demo', title: 'Buried inclusions, 16 electrodes',
    question: 'Which method recovers buried inclusions best when the electrode voltages are noisy?',
    description: `Sixteen electrodes, adjacent drive and adjacent measurement without the driven electrodes: 208 values, half of them independent by reciprocity.
Data are the difference of two frames, and the noise level $\\delta$ is relative to that difference, $\\lVert e \\rVert = \\delta\\, \\lVert y \\rVert$.

A configuration must not be tuned on these phantoms.`,
    phantoms: ['two-lobes', 'deep-core', 'rim-pair-and-bar', 'warm-and-cold-spots', 'crescent-and-hook'],
    ladder: defaultLadder, draws: 8, seed: 20261130,
    entries: [
      ...enter('tikhonov-gradient', 'tikhonov-identity', 'tikhonov-laplacian', 'truncated-svd', 'cgls', 'calderon'),
      // Its weight falls below what rounding bears, and the first matrix after that cannot be factorised: the run fails at once.
      ...enter('gauss-newton-bare'),
      ...enter('total-variation'),
      ...last('d-bar', 'gauss-newton'),
    ],
  },
  {
    key: equations, group: 'ember-lane-optics', curator: 'curator-demo', title: 'Seven integral equations',
    question: 'Which regularisation holds over mildly and severely ill-posed equations of the first kind?',
    description: `Seven Fredholm and Volterra equations of the first kind with known solutions, 200 data and 200 cells each. Their singular values fall from a power law to faster than an exponential.
Data are the closed forms (or sums of closed forms), never the matrix that inverts them; noise is relative to the data.`,
    phantoms: ['two-lights-behind-a-slit', 'bump-behind-a-window', 'half-wave-under-an-exponential', 'straight-line-under-a-root', 'uneven-seam', 'rising-load-on-a-string', 'warm-spell-at-the-surface'],
    ladder: [3e-4, 1e-3, 3e-3, 0.01, 0.03, 0.1, 0.3], draws: 12, seed: 1962,
    entries: [...enter('truncated-svd', 'tikhonov-identity', 'tikhonov-gradient', 'nu-method', 'smoothness-prior'), ...last('crank-nicolson')],
  },
  {
    key: fewViews, group: 'lantern-bay-tomography', curator: 'curator-demo', title: 'Few views, few angles',
    question: 'What recovers a slice from few X-ray views, and what from a third of the angles missing?',
    description: `Parallel and fan beams with 18 to 60 views of 60 or 64 cells, one of them over 120 degrees only. Line integrals are exact for every shape; the inversion has 40 cells across and its own projector.

The cells cannot follow the outlines of the shapes, which alone moves the data by up to some per cent: noise below that is marked as lying below the model-error floor, and ranks begin above it.`,
    phantoms: ['shepp-logan', 'shepp-logan-raised-contrast', 'slabs-over-a-third-of-a-turn', 'cased-core-in-a-fan', 'soft-hills-few-views'],
    ladder: [0.01, 0.03, 0.07, 0.1, 0.15, 0.2, 0.4], draws: 6, seed: 1917,
    entries: [...enter('filtered-back-projection', 'back-projection', 'sart', 'cgls-gradient'), ...last('sirt', 'total-variation')],
  },
  {
    key: blurred, group: 'ember-lane-optics', curator: 'curator-demo', title: 'Three ways to blur',
    question: 'How much of a blurred picture comes back, and when does the noise come back instead?',
    description: `A Gaussian, a lens out of focus and a motion, on pictures of 32 pixels a side. The data are integrals of the true picture over the exact point-spread function, cells and edges included; the inversion knows the blur but has only its pixels.

Edges that run through pixels move the data by one to three per cent: noise below that is marked as lying below the model-error floor, and ranks begin above it.`,
    phantoms: ['lamps-in-the-dark', 'pans-out-of-focus', 'signs-in-passing'],
    ladder: [0.003, 0.01, 0.03, 0.06, 0.1, 0.3], draws: 8, seed: 1984,
    entries: [...enter('tikhonov-identity', 'tikhonov-gradient', 'cgls', 'smoothness-prior'), ...last('total-variation', 'wavelet-sparsity', 'bounded-tikhonov')],
  },
  {
    key: 'contrast', group: 'quarry-point-geophysics', curator: 'curator-demo', title: 'How strong a contrast',
    question: 'Up to which contrast does one linear step do what a nonlinear solver does?',
    description: `The same two phantoms with the logarithm of their conductivity scaled from a quarter to three times, at one noise. A linearised method is exact in the limit of no contrast, and the error relative to the contrast shows where that ends.`,
    phantoms: ['two-lobes', 'deep-core'], axis: { key: 'contrast', noise: 0.005 },
    ladder: [0.25, 0.5, 1, 1.5, 2, 3], draws: 6, seed: 26,
    entries: [...enter('tikhonov-gradient', 'total-variation', 'calderon'), ...last('d-bar', 'gauss-newton')],
  },
  {
    key: 'misplaced', group: 'tarn-soil-physics', curator: 'curator-demo', title: 'Electrodes a little out of place',
    question: 'How exactly must electrodes sit before the image is about their places?',
    description: `The experiment has every electrode moved along the rim by a random share of the spacing; the inversion is not told. The difference of two frames takes away most of what the places do to the voltages, but not what they do to the change.`,
    phantoms: ['two-lobes', 'crescent-and-hook'], axis: { key: 'electrode-displacement', noise: 0.005 },
    ladder: [0.002, 0.005, 0.01, 0.02, 0.05, 0.1], draws: 6, seed: 815,
    entries: enter('tikhonov-gradient', 'truncated-svd', 'trained-linear', 'total-variation'),
  },
  {
    key: uneven, group: 'tarn-soil-physics', curator: 'curator-demo', title: 'Bays and uneven belts',
    question: 'Do methods keep their order where the body is no disc and the electrodes are not evenly spaced?',
    description: `A body with a bay, and a belt of 24 electrodes put on by hand with two bad contacts. Outline, places and contacts are known to the solver. Methods that need a disc are refused here.`,
    phantoms: ['kidney-with-two-seeds', 'uneven-belt'],
    ladder: [0.001, 0.003, 0.01, 0.03, 0.1, 0.3], draws: 6, seed: 1407,
    entries: [...enter('tikhonov-gradient', 'trained-linear', 'factorisation', 'total-variation'), ...last('crank-nicolson', 'gauss-newton-total-variation')],
  },
  {
    key: trigonometric, group: 'quarry-point-geophysics', curator: 'curator-demo', title: 'Full patterns, 32 electrodes',
    question: 'What do 32 electrodes and trigonometric patterns buy when the noise is relative to the voltages?',
    description: `Thirty-two electrodes with all 31 trigonometric patterns (Isaacson 1986), every electrode voltage measured.
The noise level is relative to the raw voltages, $\\lVert e \\rVert = \\delta\\, \\lVert V \\rVert$: much harder at the same $\\delta$ than a level relative to the difference.`,
    phantoms: ['four-compass-points', 'ring-with-a-core', 'wedge-and-bump'],
    ladder: [1e-4, 3e-4, 1e-3, 2e-3, 5e-3, 0.01, 0.02, 0.05], draws: 8, seed: 4711,
    entries: [...enter('tikhonov-gradient', 'tikhonov-identity', 'truncated-svd', 'cgls', 'factorisation'), ...last('total-variation')],
  },
];
