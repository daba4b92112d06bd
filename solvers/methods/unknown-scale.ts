import type { ForwardProblem } from '../core/types';

const cache = new WeakMap<ForwardProblem, number>();

/** Mean absolute background, the scale of shares of the unknown; 1 (in its unit) where the background is zero. */
export function unknownScale(problem: ForwardProblem): number {
  let scale = cache.get(problem);
  if (scale === undefined) {
    const background = problem.background();
    let sum = 0;
    for (let j = 0; j < background.length; j++) sum += Math.abs(background[j]);
    scale = sum > 0 ? sum / background.length : 1;
    cache.set(problem, scale);
  }
  return scale;
}
