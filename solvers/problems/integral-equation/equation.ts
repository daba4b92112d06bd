import type { IntegralEquationGeometry } from '../../../shared/domain/geometry/integral-equation';
import type { Source } from '../../core/types';

/** g(s) = integral over [from, to] of K(s, t) f(t) dt for s in [dataFrom, dataTo]. All are pure numbers. */
export interface IntegralEquation {
  readonly key: IntegralEquationGeometry['equation'];
  /** 'Shaw 1972'. */
  readonly name: string;
  /** What the equation models, on one line. */
  readonly line: string;
  readonly from: number;
  readonly to: number;
  readonly dataFrom: number;
  readonly dataTo: number;
  kernel(s: number, t: number): number;
  /** Places in t where K(s, .) is not smooth or varies fast: quadratures put panel ends there. May lie outside the interval. */
  breaks(s: number): readonly number[];
  solution(t: number): number;
  /** The right-hand side of the solution, where it has a closed form. */
  readonly data?: (s: number) => number;
  /** LaTeX. */
  readonly kernelFormula: string;
  readonly solutionFormula: string;
  readonly dataFormula: string | null;
  readonly sources: readonly Source[];
}

/** An equation with the numbers of a geometry. */
export type EquationFactory = (geometry: Pick<IntegralEquationGeometry, 'depth' | 'diffusivity'>) => IntegralEquation;

export const noBreaks = (): readonly number[] => [];
