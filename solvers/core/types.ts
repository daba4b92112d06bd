/**
 * The contracts of the numerical library.
 *
 * Arrays are `Float64Array`, row-major, last index fastest. Nothing here reads a clock, a random source of the engine or
 * a file; the same input gives the same bits on every engine.
 */
import type { z } from 'zod';
import type { Body } from '../../shared/domain/body';
import type { FamilyKey } from '../../shared/domain/families';
import type { DataKind, Geometry } from '../../shared/domain/phantom-definition';

/** A linear map from `cols` unknowns to `rows` data. */
export interface LinearOperator {
  readonly rows: number;
  readonly cols: number;
  /** y = A x. `out` (length `rows`) is overwritten, never aliases `x`, never retained. */
  apply(x: Float64Array, out: Float64Array): void;
  /** x = A^T y. `out` (length `cols`) is overwritten, never aliases `y`, never retained. */
  applyAdjoint(y: Float64Array, out: Float64Array): void;
}

/** A linear map with its explicit matrix: `values[i * cols + j]`, row-major. */
export interface MatrixOperator extends LinearOperator {
  readonly values: Float64Array;
}

/** A derivative: by its action, and explicitly or sparsely where the problem has it so. */
export interface Derivative extends LinearOperator {
  /** Row-major, rows x cols. */
  readonly values?: Float64Array;
  readonly sparse?: SparseMatrix;
}

/** Compressed sparse rows: row `i` holds `values[k]` at column `columns[k]` for `rowStart[i] <= k < rowStart[i + 1]`. */
export interface SparseMatrix {
  readonly rows: number;
  readonly cols: number;
  readonly rowStart: Int32Array;
  readonly columns: Int32Array;
  readonly values: Float64Array;
}

/** Pixels over a rectangle and the body in it; lengths in metres. */
export interface GridExtent {
  readonly nx: number;
  readonly ny: number;
  readonly xMin: number;
  readonly xMax: number;
  readonly yMin: number;
  readonly yMax: number;
  /** A disc and a star are centred at the middle of the rectangle, a rectangle fills it; an interval has ny = 1 and unit height. */
  readonly body: Body;
}

/**
 * The grid on which every error is measured: `ny` rows by `nx` columns of equal pixels over a rectangle, row 0 at the
 * lowest y. `mask[i] = 1` where the pixel centre lies inside the body; the metrics read those pixels only.
 */
export interface EvaluationGrid extends GridExtent {
  readonly mask: Uint8Array;
  /** Indices of the masked pixels, ascending; images are stored on these, length `inside.length`. */
  readonly inside: Int32Array;
  /** Body radius in metres (half the larger extent where the body is no disc). */
  readonly bodyRadius: number;
}

/** A penalty operator on the unknowns, scaled so that ||L x||^2 approximates an integral over the body. */
export type PenaltyKey = 'identity' | 'gradient' | 'laplacian';

/** A forward model on the *inversion* discretisation. It never produces the data that it inverts. */
export interface ForwardProblem {
  readonly family: FamilyKey;
  readonly geometry: Geometry;
  readonly dataKind: DataKind;
  /** Number of data values of one frame. */
  readonly dataSize: number;
  /** Number of unknowns (cells). */
  readonly unknowns: number;
  /** Measure of each cell (m^2 in two dimensions), the weights of the inner product of unknowns. */
  readonly unknownWeights: Float64Array;
  readonly grid: EvaluationGrid;
  /** Unit of the unknown, e.g. S/m. */
  readonly unit: string;
  /** The known background, constant or not, on the unknowns. */
  background(): Float64Array;
  /**
   * Data of `x` on the inversion discretisation, in the phantom's data kind: for 'absolute' F(x), for 'difference'
   * F(x) - F(background).
   */
  evaluate(x: Float64Array): Float64Array;
  /** True where `evaluate` is affine, so that one derivative serves every point. */
  readonly linear: boolean;
  /**
   * Derivative of `evaluate` at `x`, dataSize x unknowns: explicit (`values`), sparse (`sparse`) or by its action alone. `denseMatrix`
   * makes it explicit where that is affordable.
   */
  linearise(x: Float64Array): Derivative;
  /**
   * Orthonormal rows, fewer than `dataSize`, whose span holds every column of every derivative (voltages that reciprocity makes equal):
   * decompositions work in it. Absent where the data have no such structure.
   */
  readonly dataBasis?: SparseMatrix;
  /** Values of `x` on the pixels `grid.inside` (cell averages), length `grid.inside.length`. */
  toImage(x: Float64Array, out: Float64Array): void;
  /**
   * Sparse penalty on the unknowns. 'gradient' has one row per interior interface of two cells: (edge length / centroid
   * distance)^(1/2) times the jump; 'identity' the square roots of the measures; 'laplacian' is G^T G scaled by the measures.
   */
  penalty(kind: PenaltyKey): SparseMatrix;
  /**
   * Rows for a total-variation penalty: one row per interior interface holding +1 and -1, with the interface length in
   * `lengths`: TV(x) = sum lengths[i] |(D x)_i| (anisotropic in the mesh's directions).
   */
  jumps(): { matrix: SparseMatrix; lengths: Float64Array };
  /** Lowest value an unknown may take (S/m for conductivity), used by nonlinear methods. */
  readonly lowerBound: number;
}

/** What is known of the noise when a draw is reconstructed. */
export interface NoiseInfo {
  /** Euclidean norm of the noise really drawn (the level told to rules that use it). */
  readonly norm: number;
  /** Relative level, a fraction (0.01 = 1 %). */
  readonly level: number;
}

export type StopReason = 'direct' | 'converged' | 'discrepancy' | 'maxIterations' | 'diverged';

/** One reconstruction. */
export interface Reconstruction {
  /** The unknowns (full values, background included), length `problem.unknowns`. */
  readonly x: Float64Array;
  /** Regularisation parameter or truncation index chosen; null where the method has none. */
  readonly parameter: number | null;
  readonly iterations: number;
  readonly forwardSolves: number;
  readonly stop: StopReason;
  /**
   * Euclidean norm of (data - model(x)): the linearised model for linear methods (computed in coefficients), the full model
   * for nonlinear ones.
   */
  readonly residualNorm: number;
  /** Equally likely unknowns after the data (a thinned chain, the members of an ensemble), from methods that give a distribution. */
  readonly samples?: readonly Float64Array[];
}

export interface ReconstructContext {
  /** True once the caller wants the work to stop; iterative methods look at it between iterations. */
  readonly aborted?: () => boolean;
}

/** A method prepared for one problem and one set of parameters. */
export interface Reconstructor {
  reconstruct(data: Float64Array, noise: NoiseInfo, context?: ReconstructContext): Reconstruction;
  /** The same for a batch, with exactly the bits of the single calls. */
  reconstructMany(data: readonly Float64Array[], noise: readonly NoiseInfo[], context?: ReconstructContext): Reconstruction[];
  /**
   * Singular values and left singular vectors of the linearised problem, when the method computed them: the page draws
   * the Picard view and the error against the parameter from these.
   */
  readonly spectrum?: Float64Array;
}

/** A published source, printed on the reference page. */
export interface Source {
  /** Author and year as the trade writes it, e.g. 'Morozov 1966'. */
  readonly short: string;
  /** Full reference. */
  readonly full: string;
  /** Set when the reference was written from memory and not checked against the original. */
  readonly fromMemory?: boolean;
}

export interface MethodCapabilities {
  readonly linear: boolean;
  readonly nonlinear: boolean;
  readonly direct: boolean;
  readonly statistical: boolean;
  readonly families: readonly FamilyKey[];
  readonly dataKinds: readonly DataKind[];
  /** Parameter-choice rules the method accepts; empty for a method without a regularisation parameter. */
  readonly rules: readonly RuleKey[];
}

/** What a method may look at to say whether it serves a problem. */
export interface ProblemFacts {
  readonly family: FamilyKey;
  readonly dataKind: DataKind;
  readonly geometry: Geometry;
  readonly dataSize: number;
  readonly unknowns: number;
}

/** Group under which the form lists a method. */
export type MethodClass = 'baseline' | 'spectral' | 'iterative' | 'variational' | 'nonlinear' | 'direct' | 'statistical';

export type RuleKey = 'fixed' | 'discrepancy' | 'gcv' | 'l-curve' | 'quasi-optimality' | 'cumulative-periodogram';

/** The rule that chooses the regularisation parameter, with its own settings. */
export type RuleSetting =
  | { readonly key: 'fixed'; readonly value: number }
  | { readonly key: 'discrepancy'; readonly safetyFactor: number }
  | { readonly key: 'gcv' }
  | { readonly key: 'l-curve' }
  | { readonly key: 'quasi-optimality' }
  | { readonly key: 'cumulative-periodogram' };

/** One field of a method's parameters, as forms and the reference page show it. */
export interface ParameterField {
  readonly name: string;
  readonly label: string;
  readonly symbol?: string;
  /** Unit as printed; '' for a pure number. */
  readonly unit: string;
  readonly help: string;
  readonly kind: 'number' | 'integer' | 'choice' | 'text';
  readonly default: number | string;
  readonly minimum?: number;
  readonly maximum?: number;
  readonly scale?: 'linear' | 'log';
  readonly choices?: readonly { readonly value: string; readonly label: string }[];
}

/** An algorithm. One file in `solvers/methods`, one line in its registry. */
export interface Method<P = Record<string, number | string>> {
  readonly key: string;
  readonly name: string;
  readonly class: MethodClass;
  /** One sentence. */
  readonly summary: string;
  /** LaTeX. */
  readonly formula: string;
  readonly sources: readonly Source[];
  readonly parameters: z.ZodType<P>;
  /** The same parameters as fields, in the order of the form. */
  readonly fields: readonly ParameterField[];
  readonly capabilities: MethodCapabilities;
  readonly defaultRule: RuleSetting | null;
  /** What the value of the rule 'fixed' means for this method (alpha over sigma_1, an index, a count); null without rules. */
  readonly fixedValue: ParameterField | null;
  /** Why the method does not serve a problem of a family that it lists (its size, its electrodes), for a reader; null where it does. */
  readonly unfit?: (facts: ProblemFacts) => string | null;
  /** Pays once for factorisations. Throws `RangeError` naming both shapes, or what does not fit. */
  prepare(problem: ForwardProblem, parameters: P, rule: RuleSetting | null): Reconstructor;
}

/** One value of a metric; `null` with a reason where it is not defined (a zero truth, no declared target). */
export interface MetricValue {
  readonly value: number | null;
  readonly reason?: string;
  /** Place in metres where the value is attained (sup norm). */
  readonly at?: readonly [number, number];
}

export interface MetricInput {
  /** Truth on `grid.inside` (anti-aliased). */
  readonly truth: Float64Array;
  /** Background on `grid.inside`. */
  readonly background: Float64Array;
  /** Reconstruction on `grid.inside`. */
  readonly estimate: Float64Array;
  readonly grid: EvaluationGrid;
  readonly targets: readonly Target[];
  /** Euclidean norm of (data - model(estimate)) where the caller computed it, and of the noise drawn. */
  readonly residualNorm: number | null;
  readonly noiseNorm: number;
  /** Ends of the pointwise credible interval on `grid.inside`, from methods that give a distribution. */
  readonly interval?: { readonly low: Float64Array; readonly high: Float64Array; readonly probability: number };
}

/** A declared target: centroid in metres, area in m^2, contrast to the background in the unit of the unknown. */
export interface Target {
  readonly label: string;
  readonly x: number;
  readonly y: number;
  readonly area: number;
  readonly contrast: number;
}

/** A figure of one reconstruction. One file in `solvers/metrics`, one line in its registry. */
export interface Metric {
  /** `...Error` is better low, `...Score` better high. */
  readonly key: string;
  readonly name: string;
  /** Short name for a table head. */
  readonly short: string;
  /** Printed unit; '' for a pure number. */
  readonly unit: string;
  readonly better: 'lower' | 'higher' | 'one' | 'zero';
  /** LaTeX. */
  readonly formula: string;
  readonly summary: string;
  readonly sources: readonly Source[];
  /** Numbered traps for the definition page. */
  readonly traps: readonly string[];
  evaluate(input: MetricInput): MetricValue;
}

/** The outcome of a check: a figure against a bound. */
export interface CheckResult {
  readonly key: string;
  readonly name: string;
  readonly state: 'pass' | 'warning' | 'fail' | 'not-applicable';
  /** The figure measured, null where the check does not apply. */
  readonly figure: number | null;
  readonly bound: number | null;
  readonly comparison: 'at-most' | 'at-least' | 'equal' | null;
  readonly unit: string;
  /** One line for a reader. */
  readonly meaning: string;
  readonly source: string;
}
