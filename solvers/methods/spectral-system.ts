/**
 * A linearised problem in standard form, J = derivative of the model at the background:
 * min ||J h - y||^2 + alpha^2 ||L h||^2 with L^T L (+ a small mass) = R^T R becomes min ||A z - y||^2 + alpha^2 ||z||^2 with
 * A = J R^{-1} = U S V^T, h = R^{-1} z (Elden 1977). Every method works on the coefficients u_i^T y; one product with the basis
 * R^{-1} V gives the unknowns.
 */
import type { ForwardProblem, PenaltyKey } from '../core/types';
import { denseMatrix } from '../core/matrix-operator';
import { sparseTimesDense, sparseTransposedTimesDense } from '../core/sparse';
import { requireVector } from '../core/vector';
import { thinSvd } from '../linear-algebra/thin-svd';
import type { SpectralData } from '../parameter-choice/spectral-data';
import { addExpansion } from './data-term';
import { factorPenalty } from './penalty';

/** 'none' leaves the unknowns as they are (R = I, no weights). */
export type StandardForm = PenaltyKey | 'none';

export interface SpectralSystem {
  readonly dataSize: number;
  readonly unknowns: number;
  /** Numerical rank r: singular values above max(m, n) 2^-52 sigma_1. */
  readonly rank: number;
  /** Descending, length r. */
  readonly singularValues: Float64Array;
  /** U, dataSize x leftColumns, row-major. */
  readonly left: Float64Array;
  readonly leftColumns: number;
  /** Row k is R^{-1} v_k, rank x unknowns, row-major. */
  readonly basis: Float64Array;
  readonly background: Float64Array;
  /** Model of the background in the data kind; zero for difference data. */
  readonly offset: Float64Array;
}

/** R of a penalty R^T R, by its half solves on `count` right-hand sides one after another: 'forward' is R^{-T} b, 'backward' R^{-1} b. */
export interface StandardFactor {
  halfSolveMany(b: Float64Array, count: number, half: 'forward' | 'backward'): void;
}

const cache = new WeakMap<ForwardProblem, Map<string, SpectralSystem>>();

/**
 * The system of a problem, computed once a problem object and form.
 * Cost: one derivative, one sparse factorisation, m half solves, one SVD of m x n, m the data or the rows of their basis; memory (m + r) n doubles.
 * @throws RangeError where the derivative is zero or not finite, or shapes do not fit
 */
export function spectralSystem(problem: ForwardProblem, form: StandardForm): SpectralSystem {
  return spectralSystemOf(problem, form, () => (form === 'none' ? null : factorPenalty(problem, form)));
}

/**
 * The same with any penalty; `makeFactor` gets the derivative at the background (dataSize x unknowns, row-major, not to be changed).
 * @param form names the penalty with all it depends on: one computation a problem object and name
 */
export function spectralSystemOf(problem: ForwardProblem, form: string, makeFactor: (jacobian: Float64Array) => StandardFactor | null): SpectralSystem {
  let forms = cache.get(problem);
  if (!forms) cache.set(problem, (forms = new Map()));
  let system = forms.get(form);
  if (!system) forms.set(form, (system = computeSystem(problem, makeFactor)));
  return system;
}

function computeSystem(problem: ForwardProblem, makeFactor: (jacobian: Float64Array) => StandardFactor | null): SpectralSystem {
  const { dataSize, unknowns } = problem;
  const background = problem.background();
  requireVector(background, unknowns, 'The background');
  const jacobian = problem.linearise(background);
  if (jacobian.rows !== dataSize || jacobian.cols !== unknowns)
    throw new RangeError(`The derivative is ${jacobian.rows} x ${jacobian.cols}, the problem ${dataSize} x ${unknowns}.`);
  const values = denseMatrix(jacobian);
  requireVector(values, dataSize * unknowns, 'The derivative');
  const factor = makeFactor(values);
  // In a basis B of all data the problem can give, J = B^T (B J): the singular vectors of B J, brought back, are those of J.
  const { dataBasis } = problem;
  const rows = dataBasis ? dataBasis.rows : dataSize;
  const matrix = dataBasis ? sparseTimesDense(dataBasis, values, unknowns) : Float64Array.from(values);
  // The rows of the matrix are the right-hand sides of R^{-T}.
  factor?.halfSolveMany(matrix, rows, 'forward');
  const { u, s, v } = thinSvd(matrix, rows, unknowns);
  const leftColumns = s.length;
  const floor = Math.max(dataSize, unknowns) * 2.220446049250313e-16 * s[0];
  let rank = 0;
  while (rank < leftColumns && s[rank] > floor) rank++;
  if (rank === 0) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');
  const basis = new Float64Array(rank * unknowns);
  for (let k = 0; k < rank; k++) for (let j = 0; j < unknowns; j++) basis[k * unknowns + j] = v[j * leftColumns + k];
  factor?.halfSolveMany(basis, rank, 'backward');
  const offset = problem.dataKind === 'difference' ? new Float64Array(dataSize) : problem.evaluate(background);
  return { dataSize, unknowns, rank, singularValues: s.slice(0, rank), left: dataBasis ? sparseTransposedTimesDense(dataBasis, u, leftColumns) : u, leftColumns, basis, background, offset };
}

/**
 * Coefficients of one frame: u_i^T (data - offset) and the squared norm outside the first r of them.
 * @throws RangeError for a wrong length or a value that is not finite
 */
export function frameSpectrum(system: SpectralSystem, data: Float64Array): SpectralData {
  const { dataSize, left, leftColumns, offset, rank } = system;
  requireFrame(system, data);
  const c = new Float64Array(leftColumns);
  const centred = new Float64Array(dataSize);
  for (let i = 0; i < dataSize; i++) {
    const y = data[i] - offset[i];
    const row = i * leftColumns;
    centred[i] = y;
    for (let k = 0; k < leftColumns; k++) c[k] += left[row + k] * y;
  }
  let fitted: Float64Array | null = null;
  if (leftColumns < dataSize) {
    fitted = new Float64Array(dataSize);
    for (let i = 0; i < dataSize; i++) {
      let sum = 0;
      const row = i * leftColumns;
      for (let k = 0; k < leftColumns; k++) sum += left[row + k] * c[k];
      fitted[i] = sum;
    }
  }
  return { singularValues: system.singularValues, coefficients: c, outside: outsideOf(c, rank, centred, fitted), dataSize };
}

/** @throws RangeError for a wrong length or a value that is not finite */
export function requireFrame(system: SpectralSystem, data: Float64Array): void {
  requireVector(data, system.dataSize, 'The data frame');
}

/**
 * Squared norm of a frame outside the first r coefficients. What U does not span is found entry by entry, without cancellation
 * of two large norms.
 * @param fitted U c, null where U spans all data
 */
export function outsideOf(c: Float64Array, rank: number, centred: Float64Array, fitted: Float64Array | null): number {
  let outside = 0;
  for (let k = rank; k < c.length; k++) outside += c[k] * c[k];
  if (fitted)
    for (let i = 0; i < centred.length; i++) {
      const r = centred[i] - fitted[i];
      outside += r * r;
    }
  return outside;
}

/** True where the frame equals the background's: there is nothing to reconstruct. */
export function isZeroFrame(frame: SpectralData): boolean {
  if (frame.outside !== 0) return false;
  for (let k = 0; k < frame.singularValues.length; k++) if (frame.coefficients[k] !== 0) return false;
  return true;
}

/** background + sum over k < count of d_k R^{-1} v_k; each entry is summed in ascending k. Cost: count * n multiply-adds. */
export function expandCoefficients(system: SpectralSystem, d: Float64Array, count: number): Float64Array {
  const { unknowns: n, basis, background } = system;
  const x = new Float64Array(n);
  addExpansion(basis, n, d, count, x);
  for (let j = 0; j < n; j++) x[j] += background[j];
  return x;
}
