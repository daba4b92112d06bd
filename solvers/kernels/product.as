import { accumulate, clearTile, tile } from './tile';

/** Inner indices and rows of a packed block of the left factor: it stays in the second-level cache. */
const innerBlock = 256;
const rowBlock = 96;

/** Bytes that `multiply` needs at `pack` for a right factor of `cols` columns. */
export function packedBytes(cols: i32): i32 {
  return (innerBlock * rowBlock + innerBlock * ((cols + 3) & ~3)) * 8;
}

/** Groups of four rows (lane apart) side by side: out[(group * count + k) * 4 + i]; what is missing of the last group is zero. */
function packFours(from: usize, lane: usize, step: usize, lanes: i32, count: i32, out: usize): void {
  for (let i = 0; i < lanes; i += 4) {
    let at = from + <usize>i * lane;
    const present = min(4, lanes - i);
    if (present == 4)
      for (let k = 0; k < count; k++) {
        f64.store(out, f64.load(at));
        f64.store(out, f64.load(at + lane), 8);
        f64.store(out, f64.load(at + 2 * lane), 16);
        f64.store(out, f64.load(at + 3 * lane), 24);
        at += step;
        out += 32;
      }
    else
      for (let k = 0; k < count; k++) {
        for (let p = 0; p < 4; p++) f64.store(out + (p << 3), p < present ? f64.load(at + <usize>p * lane) : 0);
        at += step;
        out += 32;
      }
  }
}

/**
 * C = A B, or C += A B where `keep` is not zero: then every sum starts from the entry of C.
 * A is read at a + i rowA + k stepA, B at b + k stepB + j colB (bytes); C is row-major with `rowC` bytes a row.
 */
export function multiply(
  a: usize, rowA: usize, stepA: usize, b: usize, stepB: usize, colB: usize, c: usize, rowC: usize,
  rows: i32, inner: i32, cols: i32, pack: usize, keep: i32,
): void {
  const packB = pack + innerBlock * rowBlock * 8;
  for (let from = 0; from < inner; from += innerBlock) {
    const count = min(innerBlock, inner - from);
    packFours(b + <usize>from * stepB, colB, stepB, cols, count, packB);
    for (let top = 0; top < rows; top += rowBlock) {
      const height = min(rowBlock, rows - top);
      packFours(a + <usize>top * rowA + <usize>from * stepA, rowA, stepA, height, count, pack);
      for (let j = 0; j < cols; j += 4) {
        const right = packB + <usize>(j * count) * 8;
        for (let i = 0; i < height; i += 4) {
          const at = c + <usize>(top + i) * rowC + (<usize>j << 3);
          if (i + 4 <= height && j + 4 <= cols) {
            if (from == 0 && !keep) clearTile();
            else
              for (let r: usize = 0; r < 4; r++) {
                v128.store(tile + (r << 5), v128.load(at + r * rowC));
                v128.store(tile + (r << 5), v128.load(at + r * rowC, 16), 16);
              }
            accumulate(pack + <usize>(i * count) * 8, 8, 32, right, 32, count);
            for (let r: usize = 0; r < 4; r++) {
              v128.store(at + r * rowC, v128.load(tile + (r << 5)));
              v128.store(at + r * rowC, v128.load(tile + (r << 5), 16), 16);
            }
          } else {
            const deep = <usize>min(4, height - i);
            const wide = <usize>min(4, cols - j);
            clearTile();
            if (from > 0 || keep) for (let r: usize = 0; r < deep; r++) for (let s: usize = 0; s < wide; s++) f64.store(tile + (r << 5) + (s << 3), f64.load(at + r * rowC + (s << 3)));
            accumulate(pack + <usize>(i * count) * 8, 8, 32, right, 32, count);
            for (let r: usize = 0; r < deep; r++) for (let s: usize = 0; s < wide; s++) f64.store(at + r * rowC + (s << 3), f64.load(tile + (r << 5) + (s << 3)));
          }
        }
      }
    }
  }
}
