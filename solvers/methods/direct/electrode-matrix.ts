import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { cos, sin } from '../../core/math';
import { sumOfSquares } from '../../core/vector';
import { denseCholesky } from '../../linear-algebra/dense-cholesky';
import { matmul, matmulTransposed, transpose } from '../../linear-algebra/matrix-product';
import { symmetricEigen } from '../../linear-algebra/symmetric-eigen';
import { channels, currentPatterns, patternCount } from '../../problems/electrical-impedance/patterns';

/**
 * Orthonormal currents that sum to zero, (L - 1) x L, row-major: cos(k theta), sin(k theta) for k = 1, 2, ... one after the other, for an
 * even L last the alternating current; theta_l = 2 pi l / L in the order of the numbering (Isaacson 1986).
 */
export function trigonometricBasis(L: number): Float64Array {
  const n = L - 1;
  const basis = new Float64Array(n * L);
  for (let a = 0; a < n; a++) {
    const k = Math.floor(a / 2) + 1;
    const scale = 2 * k === L ? Math.sqrt(1 / L) : Math.sqrt(2 / L);
    for (let l = 0; l < L; l++) {
      const theta = (2 * Math.PI * ((k * l) % L)) / L;
      basis[a * L + l] = scale * (a % 2 === 0 ? cos(theta) : sin(theta));
    }
  }
  return basis;
}

/** The matrix of the Neumann-to-Dirichlet map between electrodes, read from frames whose patterns measure the same channels. */
export interface ElectrodeMatrixReader {
  readonly electrodes: number;
  /** L - 1, the size of the matrix in the trigonometric basis. */
  readonly size: number;
  /** Values of a frame. */
  readonly frameSize: number;
  /**
   * Symmetric matrices R, V per A/m, of frames: least squares over all measurements and patterns, then the symmetric part (the map
   * is symmetric by reciprocity).
   * @param frames frameSize x count, row-major
   * @returns size x size x count, row-major
   */
  read(frames: Float64Array, count: number): Float64Array;
  /**
   * Expected spectral norm of the matrix of independent errors of standard deviation 1 V in every value: 2 ||sum B_i^2||^{1/2} over the
   * matrices B_i of the single values, the edge of the spectrum of such random matrices.
   */
  readonly noiseNorm: number;
  /**
   * Expected squares of the entries (a, b) of the matrix of such errors before its symmetric part is taken: the product of entry a of the
   * first and entry b of the second (V per A/m per V, squared). Exact where the patterns turn into each other, as on equal spacing.
   */
  readonly currentVariances: Float64Array;
  readonly voltageVariances: Float64Array;
}

/** Share of the largest eigenvalue below which currents or measurements count as missing. */
const smallestShare = 1e-9;

/** (A^T A)^{-1} A^T, cols x rows; null where the columns of A are not independent. */
function leftInverse(a: Float64Array, rows: number, cols: number): Float64Array | null {
  const at = transpose(a, rows, cols);
  const gram = matmulTransposed(at, at, cols, rows, cols);
  const { values } = symmetricEigen(gram, cols);
  if (!(values[0] > smallestShare * values[cols - 1])) return null;
  const inverse = a.slice();
  denseCholesky(gram, cols).solveMany(inverse, rows);
  return transpose(inverse, rows, cols);
}

/** Currents in the trigonometric basis, patterns x (L - 1). */
function currentCoefficients(geometry: EitGeometry, basis: Float64Array): Float64Array {
  const L = geometry.electrodes;
  return matmulTransposed(currentPatterns(geometry), basis, patternCount(geometry), L, L - 1);
}

/** Number of independent currents among the patterns. */
export function currentRank(geometry: EitGeometry): number {
  const n = geometry.electrodes - 1;
  const patterns = patternCount(geometry);
  const c = transpose(currentCoefficients(geometry, trigonometricBasis(n + 1)), patterns, n);
  const { values } = symmetricEigen(matmulTransposed(c, c, n, patterns, n), n);
  return values.reduce((count, value) => count + (value > smallestShare * values[n - 1] ? 1 : 0), 0);
}

/** @throws RangeError where the frame does not determine the matrix */
export function electrodeMatrixReader(geometry: EitGeometry): ElectrodeMatrixReader {
  const L = geometry.electrodes;
  const n = L - 1;
  const basis = trigonometricBasis(L);
  const patterns = patternCount(geometry);
  const list = channels(geometry);
  const perPattern = list.length / patterns;
  const inverseCurrents = leftInverse(currentCoefficients(geometry, basis), patterns, n);
  const rows = new Float64Array(perPattern * L);
  for (let i = 0; i < list.length; i++) {
    const { plus, minus } = list[i];
    const same = list[i % perPattern];
    if (same.plus !== plus || same.minus !== minus) throw new RangeError('The patterns measure different channels.');
    if (i >= perPattern) continue;
    rows[i * L + plus] += 1;
    if (minus !== null) rows[i * L + minus] -= 1;
  }
  const inverseVoltages = leftInverse(matmulTransposed(rows, basis, perPattern, L, n), perPattern, n);
  if (!inverseCurrents || !inverseVoltages) throw new RangeError('The frame does not determine the map from currents to voltages.');
  return {
    electrodes: L,
    size: n,
    frameSize: list.length,
    read(frames, count) {
      if (frames.length !== list.length * count) throw new RangeError(`The frames have ${frames.length} values, not ${list.length} x ${count}.`);
      const voltages = new Float64Array(patterns * n * count);
      const length = perPattern * count;
      for (let p = 0; p < patterns; p++)
        matmul(inverseVoltages, frames.subarray(p * length, (p + 1) * length), n, perPattern, count, voltages.subarray(p * n * count, (p + 1) * n * count));
      const out = matmul(inverseCurrents, voltages, n, patterns, n * count);
      for (let a = 0; a < n; a++) {
        for (let b = 0; b < a; b++) {
          for (let k = 0; k < count; k++) {
            const mean = 0.5 * (out[(a * n + b) * count + k] + out[(b * n + a) * count + k]);
            out[(a * n + b) * count + k] = mean;
            out[(b * n + a) * count + k] = mean;
          }
        }
      }
      return out;
    },
    currentVariances: rowSquares(inverseCurrents, n, patterns),
    voltageVariances: rowSquares(inverseVoltages, n, perPattern),
    noiseNorm: noiseNorm(inverseCurrents, inverseVoltages, patterns, perPattern, n),
  };
}

function rowSquares(a: Float64Array, rows: number, cols: number): Float64Array {
  return Float64Array.from({ length: rows }, (_, i) => sumOfSquares(a.subarray(i * cols, (i + 1) * cols)));
}

/**
 * B = (c m^T + m c^T) / 2 for the value of pattern p and channel q with columns c of the inverse of the currents and m of that of the
 * voltages; B^2 = (|m|^2 c c^T + |c|^2 m m^T + (c.m)(c m^T + m c^T)) / 4.
 */
function noiseNorm(inverseCurrents: Float64Array, inverseVoltages: Float64Array, patterns: number, perPattern: number, n: number): number {
  const c = transpose(inverseCurrents, n, patterns);
  const m = transpose(inverseVoltages, n, perPattern);
  const square = new Float64Array(n * n);
  for (let p = 0; p < patterns; p++) {
    for (let q = 0; q < perPattern; q++) {
      let cc = 0, mm = 0, cm = 0;
      for (let a = 0; a < n; a++) {
        cc += c[p * n + a] * c[p * n + a];
        mm += m[q * n + a] * m[q * n + a];
        cm += c[p * n + a] * m[q * n + a];
      }
      for (let a = 0; a < n; a++) {
        const ca = c[p * n + a];
        const ma = m[q * n + a];
        const toC = 0.25 * (mm * ca + cm * ma);
        const toM = 0.25 * (cc * ma + cm * ca);
        for (let b = 0; b < n; b++) square[a * n + b] += toC * c[p * n + b] + toM * m[q * n + b];
      }
    }
  }
  return 2 * Math.sqrt(symmetricEigen(square, n).values[n - 1]);
}
