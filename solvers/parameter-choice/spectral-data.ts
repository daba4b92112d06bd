/**
 * What a parameter-choice rule sees of a linear problem in standard form: min ||A z - y||^2 + alpha^2 ||z||^2 with
 * A = U S V^T.
 */
export interface SpectralData {
  /** Singular values, descending, positive, length r (the numerical rank). */
  readonly singularValues: Float64Array;
  /** u_i^T y, length at least r; entries beyond r are ignored (they belong to `outside`). */
  readonly coefficients: Float64Array;
  /** Squared norm of the part of y outside the span of u_1 ... u_r. */
  readonly outside: number;
  /** Number of data m. */
  readonly dataSize: number;
}

/** Outcome for a continuous parameter. `alpha` is null where the zero solution already satisfies the rule. */
export interface AlphaChoice {
  readonly alpha: number | null;
  /** False where the rule found nothing in its range and the end of the range is given. */
  readonly attained: boolean;
}

/** Outcome for a truncation index; 0 is the zero solution. */
export interface IndexChoice {
  readonly index: number;
  readonly attained: boolean;
}

/** Squared residual ||A z_alpha - y||^2. */
export function tikhonovResidual(data: SpectralData, alpha: number): number {
  const { singularValues: s, coefficients: c } = data;
  const a = alpha * alpha;
  let sum = 0;
  for (let i = 0; i < s.length; i++) {
    const r = (a / (s[i] * s[i] + a)) * c[i];
    sum += r * r;
  }
  return sum + data.outside;
}

/** Range of alpha that GCV and the L-curve search: from max(sigma_r, 1e-9 sigma_1) to sigma_1. */
export function searchRange(data: SpectralData): { low: number; high: number } {
  const s = data.singularValues;
  return { low: Math.max(s[s.length - 1], 1e-9 * s[0]), high: s[0] };
}

/** Squared residuals of truncated SVD for k = 0 ... limit, length limit + 1. Summed from the small end. */
export function truncationResiduals(data: SpectralData, limit: number): Float64Array {
  const { singularValues: s, coefficients: c } = data;
  const out = new Float64Array(limit + 1);
  let sum = data.outside;
  for (let i = s.length - 1; i >= 0; i--) {
    if (i < limit) out[i + 1] = sum;
    sum += c[i] * c[i];
  }
  out[0] = sum;
  return out;
}
