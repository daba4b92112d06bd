import type { ProblemFamily } from '../problem-family';

const refuse = (): never => {
  throw new RangeError('This family is being built.');
};
export const integralEquationFamily: ProblemFamily<'integral-equation'> = { create: refuse, simulate: refuse, layout: refuse, grid: refuse, unknowns: refuse, line: refuse };
