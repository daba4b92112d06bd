import { blurred, buried, equations, fewViews, trigonometric, uneven } from './demo-benches.ts';
import type { ReviewPlan } from './demo-plan.ts';

const signedOff = (bench: string, solver: string, phantom: string, reason: string, by = 'reviewer-demo'): ReviewPlan => ({
  bench, solver, phantom, verdict: { by, verdict: 'signed-off', reason },
});
const plain = 'Table, worst draws, checks and provenance inspected. The figures are what this configuration gives.';
const fitsLinearisation =
  'At low noise the rule fits the error of the linearisation as if it were signal, and the images are worse than the background alone. Read this configuration only where its curve lies below the trivial line.';

export const reviews: readonly ReviewPlan[] = [
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
  ...['two-lights-behind-a-slit', 'bump-behind-a-window', 'uneven-seam'].map((phantom) => signedOff(equations, 'truncated-svd', phantom, plain)),
  ...['two-lights-behind-a-slit', 'uneven-seam'].map((phantom) => signedOff(equations, 'smoothness-prior', phantom, plain, 'second-reviewer-demo')),
  ...['shepp-logan', 'cased-core-in-a-fan'].map((phantom) => signedOff(fewViews, 'filtered-back-projection', phantom, plain)),
  {
    bench: fewViews, solver: 'filtered-back-projection', phantom: 'slabs-over-a-third-of-a-turn',
    verdict: {
      by: 'second-reviewer-demo', verdict: 'signed-off-with-reservation',
      reason: 'A third of the angles is missing, and this method counts them as zero. The streaks at the long faces of the plate belong to the method, not to the noise.',
    },
  },
  ...['lamps-in-the-dark', 'pans-out-of-focus'].map((phantom) => signedOff(blurred, 'tikhonov-identity', phantom, plain)),
  signedOff(uneven, 'tikhonov-gradient', 'kidney-with-two-seeds', plain),
  {
    bench: buried, solver: 'gauss-newton-bare', phantom: 'two-lobes', giveUp: { by: 'developer-demo' },
    comments: [{ by: 'developer-demo', text: 'The weight falls below 1e-8 of the largest singular value, where rounding leaves a matrix that is not positive definite. The other runs of this entry are stopped; a version with a larger first weight follows.', anchor: '' }],
  },
];
