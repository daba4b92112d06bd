/**
 * Dense kernels on row-major panels. Every entry is a sum over the inner index in ascending order, whatever the blocking, so
 * blocking never changes a bit.
 */

/** Columns of a panel are finished in blocks of this many. */
const columnBlock = 32;

/**
 * target[row i, column j] -= sum_k source[i, k] source[j, k] for the rows `i < rows`, `j < columns` of a descendant's panel,
 * where the row and column in the target follow from `rowIndex[from + i]`.
 * @param source start of the first row, `inner` values a row
 * @param columns the leading rows that are columns of the target supernode, which starts at column `begin`
 */
export function subtractProduct(
  panels: Float64Array, source: number, inner: number, rows: number, columns: number,
  rowIndex: Int32Array, from: number, localRow: Int32Array, begin: number, target: number, width: number,
): void {
  let j = 0;
  for (; j + 3 < columns; j += 4) {
    const c0 = rowIndex[from + j] - begin;
    const c1 = rowIndex[from + j + 1] - begin;
    const c2 = rowIndex[from + j + 2] - begin;
    const c3 = rowIndex[from + j + 3] - begin;
    const b0 = source + j * inner;
    const b1 = b0 + inner;
    const b2 = b1 + inner;
    const b3 = b2 + inner;
    let i = j;
    for (; i + 1 < rows; i += 2) {
      const a0 = source + i * inner;
      const a1 = a0 + inner;
      let s00 = 0, s01 = 0, s02 = 0, s03 = 0, s10 = 0, s11 = 0, s12 = 0, s13 = 0;
      for (let k = 0; k < inner; k++) {
        const p0 = panels[a0 + k];
        const p1 = panels[a1 + k];
        let q = panels[b0 + k];
        s00 += p0 * q;
        s10 += p1 * q;
        q = panels[b1 + k];
        s01 += p0 * q;
        s11 += p1 * q;
        q = panels[b2 + k];
        s02 += p0 * q;
        s12 += p1 * q;
        q = panels[b3 + k];
        s03 += p0 * q;
        s13 += p1 * q;
      }
      const t0 = target + localRow[rowIndex[from + i]] * width;
      const t1 = target + localRow[rowIndex[from + i + 1]] * width;
      panels[t0 + c0] -= s00;
      panels[t0 + c1] -= s01;
      panels[t0 + c2] -= s02;
      panels[t0 + c3] -= s03;
      panels[t1 + c0] -= s10;
      panels[t1 + c1] -= s11;
      panels[t1 + c2] -= s12;
      panels[t1 + c3] -= s13;
    }
    for (; i < rows; i++) {
      const a0 = source + i * inner;
      let s0 = 0, s1 = 0, s2 = 0, s3 = 0;
      for (let k = 0; k < inner; k++) {
        const p = panels[a0 + k];
        s0 += p * panels[b0 + k];
        s1 += p * panels[b1 + k];
        s2 += p * panels[b2 + k];
        s3 += p * panels[b3 + k];
      }
      const t = target + localRow[rowIndex[from + i]] * width;
      panels[t + c0] -= s0;
      panels[t + c1] -= s1;
      panels[t + c2] -= s2;
      panels[t + c3] -= s3;
    }
  }
  for (; j < columns; j++) {
    const c = rowIndex[from + j] - begin;
    const b = source + j * inner;
    for (let i = j; i < rows; i++) {
      const a = source + i * inner;
      let s = 0;
      for (let k = 0; k < inner; k++) s += panels[a + k] * panels[b + k];
      panels[target + localRow[rowIndex[from + i]] * width + c] -= s;
    }
  }
}

/**
 * Cholesky factorisation of a panel in place: the leading `width` rows are the diagonal block (lower triangle), the rest are
 * the rows below it.
 * @returns the first column whose pivot is not positive, or -1
 */
export function factorDiagonalRows(panels: Float64Array, start: number, width: number, height: number): number {
  for (let block = 0; block < width; block += columnBlock) {
    const end = Math.min(block + columnBlock, width);
    if (block > 0) subtractEarlierColumns(panels, start, width, height, block, end);
    for (let j = block; j < end; j++) {
      const rowJ = start + j * width;
      let pivot = panels[rowJ + j];
      for (let k = block; k < j; k++) pivot -= panels[rowJ + k] * panels[rowJ + k];
      if (!(pivot > 0) || pivot === Infinity) return j;
      const root = Math.sqrt(pivot);
      panels[rowJ + j] = root;
      for (let i = j + 1; i < end; i++) {
        const rowI = start + i * width;
        let value = panels[rowI + j];
        for (let k = block; k < j; k++) value -= panels[rowI + k] * panels[rowJ + k];
        panels[rowI + j] = value / root;
      }
    }
    solveBelow(panels, start, width, height, block, end);
  }
  return -1;
}

/** Columns block..end of all rows from `block` on lose the products of the finished columns. */
function subtractEarlierColumns(panels: Float64Array, start: number, width: number, height: number, block: number, end: number): void {
  let j = block;
  for (; j + 3 < end; j += 4) {
    const b0 = start + j * width;
    const b1 = b0 + width;
    const b2 = b1 + width;
    const b3 = b2 + width;
    let i = j;
    for (; i + 1 < height; i += 2) {
      const a0 = start + i * width;
      const a1 = a0 + width;
      let s00 = 0, s01 = 0, s02 = 0, s03 = 0, s10 = 0, s11 = 0, s12 = 0, s13 = 0;
      for (let k = 0; k < block; k++) {
        const p0 = panels[a0 + k];
        const p1 = panels[a1 + k];
        let q = panels[b0 + k];
        s00 += p0 * q;
        s10 += p1 * q;
        q = panels[b1 + k];
        s01 += p0 * q;
        s11 += p1 * q;
        q = panels[b2 + k];
        s02 += p0 * q;
        s12 += p1 * q;
        q = panels[b3 + k];
        s03 += p0 * q;
        s13 += p1 * q;
      }
      panels[a0 + j] -= s00;
      panels[a0 + j + 1] -= s01;
      panels[a0 + j + 2] -= s02;
      panels[a0 + j + 3] -= s03;
      panels[a1 + j] -= s10;
      panels[a1 + j + 1] -= s11;
      panels[a1 + j + 2] -= s12;
      panels[a1 + j + 3] -= s13;
    }
    for (; i < height; i++) {
      const a = start + i * width;
      let s0 = 0, s1 = 0, s2 = 0, s3 = 0;
      for (let k = 0; k < block; k++) {
        const p = panels[a + k];
        s0 += p * panels[b0 + k];
        s1 += p * panels[b1 + k];
        s2 += p * panels[b2 + k];
        s3 += p * panels[b3 + k];
      }
      panels[a + j] -= s0;
      panels[a + j + 1] -= s1;
      panels[a + j + 2] -= s2;
      panels[a + j + 3] -= s3;
    }
  }
  for (; j < end; j++) {
    const b = start + j * width;
    for (let i = j; i < height; i++) {
      const a = start + i * width;
      let s = 0;
      for (let k = 0; k < block; k++) s += panels[a + k] * panels[b + k];
      panels[a + j] -= s;
    }
  }
}

/** Rows below the diagonal block of this column block: forward substitution, four rows at a time. */
function solveBelow(panels: Float64Array, start: number, width: number, height: number, block: number, end: number): void {
  let i = end;
  for (; i + 3 < height; i += 4) {
    const a0 = start + i * width;
    const a1 = a0 + width;
    const a2 = a1 + width;
    const a3 = a2 + width;
    for (let j = block; j < end; j++) {
      const b = start + j * width;
      let v0 = panels[a0 + j];
      let v1 = panels[a1 + j];
      let v2 = panels[a2 + j];
      let v3 = panels[a3 + j];
      for (let k = block; k < j; k++) {
        const q = panels[b + k];
        v0 -= panels[a0 + k] * q;
        v1 -= panels[a1 + k] * q;
        v2 -= panels[a2 + k] * q;
        v3 -= panels[a3 + k] * q;
      }
      const pivot = panels[b + j];
      panels[a0 + j] = v0 / pivot;
      panels[a1 + j] = v1 / pivot;
      panels[a2 + j] = v2 / pivot;
      panels[a3 + j] = v3 / pivot;
    }
  }
  for (; i < height; i++) {
    const a = start + i * width;
    for (let j = block; j < end; j++) {
      const b = start + j * width;
      let v = panels[a + j];
      for (let k = block; k < j; k++) v -= panels[a + k] * panels[b + k];
      panels[a + j] = v / panels[b + j];
    }
  }
}
