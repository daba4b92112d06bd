import type { SemidefiniteFactors } from './semidefinite-factors';
import type { MapPart } from './signed-parts';

/** Rows of all factors in the part's eigenvectors: one row a factor's row. */
function rotate(part: MapPart, factors: SemidefiniteFactors): Float64Array {
  const { size, vectors } = part;
  const rows = factors.rows.length / size;
  const out = new Float64Array(rows * size);
  for (let r = 0; r < rows; r++) {
    for (let k = 0; k < size; k++) {
      let sum = 0;
      for (let a = 0; a < size; a++) sum += factors.rows[r * size + a] * vectors[k * size + a];
      out[r * size + k] = sum;
    }
  }
  return out;
}

/**
 * Picard ratio of each point: the sum of <g, v_k>^2 over that of <g, v_k>^2 / (lambda_k + floor), for the dipole functions g of the
 * point, in units of the eigenvalues. The range of the root of the map holds g exactly where the series of <g, v_k>^2 / lambda_k
 * converges, that is inside the change (Bruehl and Hanke 2000): there the ratio is large, outside it sinks to the floor.
 * @param dipoles rows g of each point
 */
export function picardRatios(part: MapPart, dipoles: SemidefiniteFactors): Float64Array {
  const { size, values, floor } = part;
  const rotated = rotate(part, dipoles);
  const out = new Float64Array(dipoles.count);
  for (let c = 0; c < dipoles.count; c++) {
    let top = 0;
    let bottom = 0;
    for (let r = dipoles.starts[c]; r < dipoles.starts[c + 1]; r++) {
      for (let k = 0; k < size; k++) {
        const square = rotated[r * size + k] * rotated[r * size + k];
        top += square;
        bottom += square / (values[k] + floor);
      }
    }
    out[c] = bottom > 0 ? top / bottom : 0;
  }
  return out;
}

/** Halvings of the bracket of a largest test value, which spans at most the size of the matrix: five digits of 64. */
const halvings = 22;

/**
 * The largest beta with beta S <= V + floor I for each test matrix S, V the part; bounded above by beta = `largest`.
 * With S = F F^T and M = V + floor I this is 1 over the largest eigenvalue of F^T M^{-1} F.
 */
export function largestTestValues(part: MapPart, tests: SemidefiniteFactors, largest: number): Float64Array {
  const out = new Float64Array(tests.count);
  forEachGram(part, tests, (c, gram, n) => {
    let high = 0;
    for (let i = 0; i < n; i++) high += gram[i * n + i];
    // The largest eigenvalue lies between the mean and the sum of all.
    let low = high / n;
    if (!(high > 0)) {
      out[c] = largest;
      return;
    }
    for (let step = 0; step < halvings; step++) {
      const middle = 0.5 * (low + high);
      if (dominates(gram, n, 1 / middle)) high = middle;
      else low = middle;
    }
    out[c] = Math.min(largest, 1 / high);
  });
  return out;
}

/** 1 where beta S <= V + floor I, 0 elsewhere. */
export function passedTests(part: MapPart, tests: SemidefiniteFactors, beta: number): Float64Array {
  const out = new Float64Array(tests.count);
  forEachGram(part, tests, (c, gram, n) => {
    out[c] = dominates(gram, n, beta) ? 1 : 0;
  });
  return out;
}

/** Calls back with F^T (V + floor I)^{-1} F of each test, n x n for its n rows; the array is used again. */
function forEachGram(part: MapPart, tests: SemidefiniteFactors, use: (c: number, gram: Float64Array, n: number) => void): void {
  const { size, values, floor } = part;
  const rotated = rotate(part, tests);
  const gram = new Float64Array(size * size);
  for (let k = 0; k < size; k++) {
    const scale = 1 / Math.sqrt(values[k] + floor);
    for (let at = k; at < rotated.length; at += size) rotated[at] *= scale;
  }
  for (let c = 0; c < tests.count; c++) {
    const from = tests.starts[c];
    const n = tests.starts[c + 1] - from;
    for (let i = 0; i < n; i++) {
      for (let j = 0; j <= i; j++) {
        let sum = 0;
        for (let k = 0; k < size; k++) sum += rotated[(from + i) * size + k] * rotated[(from + j) * size + k];
        gram[i * n + j] = sum;
      }
    }
    use(c, gram, n);
  }
}

const triangle = new Float64Array(64 * 64);

/** True where 1 - beta G is positive definite (Cholesky; the lower triangle of G is read). */
function dominates(gram: Float64Array, n: number, beta: number): boolean {
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let value = (i === j ? 1 : 0) - beta * gram[i * n + j];
      for (let k = 0; k < j; k++) value -= triangle[i * n + k] * triangle[j * n + k];
      if (i === j) {
        if (!(value > 0)) return false;
        triangle[i * n + i] = Math.sqrt(value);
      } else triangle[i * n + j] = value / triangle[j * n + j];
    }
  }
  return true;
}
