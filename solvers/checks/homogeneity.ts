import type { ForwardProblem, Method, NoiseInfo, Reconstructor } from '../core/types';
import { norm2 } from '../core/vector';
import { judge, notApplicable, type Check } from './check';

export interface HomogeneityInput {
  readonly problem: ForwardProblem;
  readonly method: Method;
  readonly reconstructor: Reconstructor;
  /** One frame of noisy data and what is known of its noise. */
  readonly data: Float64Array;
  readonly noise: NoiseInfo;
}

const factor = 2;

/** Doubled data (with doubled noise) give a doubled change from the background. */
export const homogeneityCheck: Check<HomogeneityInput> = {
  key: 'homogeneity',
  name: 'Homogeneity',
  unit: '',
  bound: 1e-8,
  comparison: 'at-most',
  formula: '\\lVert R(2 d) - 2 R(d)\\rVert \\,/\\, \\lVert 2 R(d)\\rVert',
  summary: 'A linear method doubles its reconstruction, as a change from the background, when data and noise are doubled.',
  source: { short: 'common practice', full: 'Definition of a homogeneous map. Common practice, no source.' },
  evaluate({ problem, method, reconstructor, data, noise }) {
    if (!method.capabilities.linear) return notApplicable(this, `${method.name} is not linear.`);
    const background = problem.background();
    // Absolute data of the background are the origin of the linearised problem; difference data have it at zero.
    const origin = problem.evaluate(background);
    const doubled = data.map((value, i) => origin[i] + factor * (value - origin[i]));
    const once = reconstructor.reconstruct(data, noise).x;
    const twice = reconstructor.reconstruct(doubled, { norm: factor * noise.norm, level: noise.level }).x;
    const expected = once.map((value, i) => factor * (value - background[i]));
    const size = norm2(expected);
    const gap = norm2(twice.map((value, i) => value - background[i] - expected[i]));
    return judge(this, size > 0 ? gap / size : gap, 'Relative gap between the reconstruction of doubled data and the doubled reconstruction.');
  },
};
