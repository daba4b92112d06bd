import { accumulate, clearTile, tile } from './tile';

/**
 * Integrals of grad f_j . grad f_k over each cell (see ../problems/electrical-impedance/sensitivity.ts).
 * @param stiffness lower triangles of the 6 x 6 element matrices, 21 values an element
 * @param fields node-major, `fieldCount` values a node
 * @param f scratch: the fields of the nodes of one cell's elements, padded with zeros to a multiple of four; from `g` on the
 *   element matrices times them
 * @param out cells x fieldCount x fieldCount
 */
export function pairSensitivities(
  elements: usize, stiffness: usize, start: usize, list: usize, cells: i32, fields: usize, fieldCount: i32, f: usize, g: usize, matrix: usize, out: usize,
): void {
  const row = <usize>fieldCount << 3;
  const padded = <usize>((fieldCount + 3) & ~3) << 3;
  for (let c = 0; c < cells; c++) {
    const from = i32.load(start + (<usize>c << 2));
    const count = i32.load(start + (<usize>c << 2), 4) - from;
    for (let e = 0; e < count; e++) {
      const t = <usize>i32.load(list + (<usize>(from + e) << 2));
      let entry = stiffness + t * 168;
      for (let i: usize = 0; i < 6; i++)
        for (let j: usize = 0; j <= i; j++, entry += 8) {
          const value = f64.load(entry);
          f64.store(matrix + (6 * i + j) * 8, value);
          f64.store(matrix + (6 * j + i) * 8, value);
        }
      const here = f + <usize>(6 * e) * padded;
      for (let i: usize = 0; i < 6; i++) {
        const node = fields + <usize>i32.load(elements + (6 * t + i) * 4) * row;
        const into = here + i * padded;
        let j: usize = 0;
        for (; j + 16 <= row; j += 16) v128.store(into + j, v128.load(node + j));
        for (; j < padded; j += 8) f64.store(into + j, j < row ? f64.load(node + j) : 0);
      }
      for (let i: usize = 0; i < 6; i++) {
        const m = matrix + 48 * i;
        const into = g + (<usize>(6 * e) + i) * padded;
        const m0 = v128.load_splat<f64>(m), m1 = v128.load_splat<f64>(m, 8), m2 = v128.load_splat<f64>(m, 16);
        const m3 = v128.load_splat<f64>(m, 24), m4 = v128.load_splat<f64>(m, 32), m5 = v128.load_splat<f64>(m, 40);
        for (let j: usize = 0; j < padded; j += 16) {
          const at = here + j;
          let sum = f64x2.add(f64x2.mul(m0, v128.load(at)), f64x2.mul(m1, v128.load(at + padded)));
          sum = f64x2.add(sum, f64x2.mul(m2, v128.load(at + 2 * padded)));
          sum = f64x2.add(sum, f64x2.mul(m3, v128.load(at + 3 * padded)));
          sum = f64x2.add(sum, f64x2.mul(m4, v128.load(at + 4 * padded)));
          sum = f64x2.add(sum, f64x2.mul(m5, v128.load(at + 5 * padded)));
          v128.store(into + j, sum);
        }
      }
    }
    const base = out + <usize>c * <usize>fieldCount * row;
    for (let j = 0; j < fieldCount; j += 4)
      for (let k = j; k < fieldCount; k += 4) {
        clearTile();
        accumulate(f + (<usize>j << 3), 8, padded, g + (<usize>k << 3), padded, 6 * count);
        const deep = min(4, fieldCount - j);
        for (let r = 0; r < deep; r++) {
          const at = base + <usize>(j + r) * row + (<usize>k << 3);
          const sums = tile + (<usize>r << 5);
          if (k + 4 <= fieldCount) {
            v128.store(at, v128.load(sums));
            v128.store(at, v128.load(sums, 16), 16);
          } else for (let s = 0; s < fieldCount - k; s++) f64.store(at + (<usize>s << 3), f64.load(sums + (<usize>s << 3)));
        }
      }
    for (let j = 1; j < fieldCount; j++)
      for (let k = 0; k < j; k++) f64.store(base + <usize>j * row + (<usize>k << 3), f64.load(base + <usize>k * row + (<usize>j << 3)));
  }
}
