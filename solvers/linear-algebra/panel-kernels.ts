/**
 * The TypeScript twins of the compiled Cholesky kernels (../kernels/cholesky.as): the same sums in the same order.
 *
 * A panel is column-major; a column has `paddedHeight(height)` values, those past the height being zero. Every product that a
 * descendant or an earlier block of columns takes away is first summed from zero over the inner index in ascending order;
 * inside a block of columns the products are subtracted one by one.
 */

/** Columns of a panel are finished in blocks of this many. */
const columnBlock = 16;

/** Values of a column of a panel: compiled kernels work on four rows at a time. */
export const paddedHeight = (height: number): number => (height + 3) & ~3;

/** What the products of one column are summed in. */
let sums = new Float64Array(1024);
function clearedSums(length: number): Float64Array {
  if (sums.length < length) sums = new Float64Array(2 * length);
  else sums.fill(0, 0, length);
  return sums;
}

/** sums[i] = sum over k < inner of panels[at + i + k stride] panels[right + k stride], for i < count. */
function columnOfProducts(panels: Float64Array, at: number, count: number, right: number, stride: number, inner: number): Float64Array {
  const column = clearedSums(count);
  for (let k = 0; k < inner; k++) {
    const q = panels[right + k * stride];
    const from = at + k * stride;
    for (let i = 0; i < count; i++) column[i] += q * panels[from + i];
  }
  return column;
}

/**
 * target[places[i], places[j]] -= sum_k source[i, k] source[j, k] for the rows i < rows and columns j < columns, i >= j.
 * @param source first of the rows, column 0, of a panel of `inner` columns and `stride` values a column
 */
export function subtractDescendant(
  panels: Float64Array, source: number, stride: number, inner: number, rows: number, columns: number, places: Int32Array, target: number, targetStride: number,
): void {
  for (let j = 0; j < columns; j++) {
    const column = columnOfProducts(panels, source + j, rows - j, source + j, stride, inner);
    const into = target + places[j] * targetStride;
    for (let i = j; i < rows; i++) panels[into + places[i]] -= column[i - j];
  }
}

/**
 * Cholesky factorisation of a panel in place: its leading `width` rows are the diagonal block, of which the upper triangle
 * is not defined afterwards.
 * @returns the first column whose pivot is not positive, or -1
 */
export function factorPanel(panels: Float64Array, start: number, width: number, height: number): number {
  const stride = paddedHeight(height);
  for (let block = 0; block < width; block += columnBlock) {
    const end = Math.min(block + columnBlock, width);
    if (block > 0)
      for (let j = block; j < end; j++) {
        const column = columnOfProducts(panels, start + j, height - j, start + j, stride, block);
        const into = start + j * stride + j;
        for (let i = 0; i < height - j; i++) panels[into + i] -= column[i];
      }
    for (let j = block; j < end; j++) {
      const own = start + j * stride;
      for (let k = block; k < j; k++) {
        const at = start + k * stride;
        const q = panels[at + j];
        for (let i = j; i < height; i++) panels[own + i] -= q * panels[at + i];
      }
      const pivot = panels[own + j];
      if (!(pivot > 0) || pivot === Infinity) return j;
      const root = Math.sqrt(pivot);
      const inverse = 1 / root;
      panels[own + j] = root;
      for (let i = j + 1; i < height; i++) panels[own + i] *= inverse;
    }
  }
  return -1;
}
