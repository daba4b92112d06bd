// SHA-256 (FIPS 180-4), block by block.

/** @param constants the 64 round constants; @param w scratch for 64 words */
export function sha256Blocks(data: usize, blocks: i32, state: usize, constants: usize, w: usize): void {
  for (let block = 0; block < blocks; block++) {
    for (let i: usize = 0; i < 64; i += 4) i32.store(w + i, bswap<i32>(i32.load(data + i)));
    for (let i: usize = 64; i < 256; i += 4) {
      const x = i32.load(w + i - 60);
      const y = i32.load(w + i - 8);
      const s0 = rotr(x, 7) ^ rotr(x, 18) ^ (x >>> 3);
      const s1 = rotr(y, 17) ^ rotr(y, 19) ^ (y >>> 10);
      i32.store(w + i, i32.load(w + i - 64) + i32.load(w + i - 28) + s0 + s1);
    }
    let a = i32.load(state), b = i32.load(state, 4), c = i32.load(state, 8), d = i32.load(state, 12);
    let e = i32.load(state, 16), f = i32.load(state, 20), g = i32.load(state, 24), h = i32.load(state, 28);
    for (let i: usize = 0; i < 256; i += 4) {
      const s1 = rotr(e, 6) ^ rotr(e, 11) ^ rotr(e, 25);
      const t1 = h + s1 + ((e & f) ^ (~e & g)) + i32.load(constants + i) + i32.load(w + i);
      const s0 = rotr(a, 2) ^ rotr(a, 13) ^ rotr(a, 22);
      const t2 = s0 + ((a & b) ^ (a & c) ^ (b & c));
      h = g;
      g = f;
      f = e;
      e = d + t1;
      d = c;
      c = b;
      b = a;
      a = t1 + t2;
    }
    i32.store(state, i32.load(state) + a);
    i32.store(state, i32.load(state, 4) + b, 4);
    i32.store(state, i32.load(state, 8) + c, 8);
    i32.store(state, i32.load(state, 12) + d, 12);
    i32.store(state, i32.load(state, 16) + e, 16);
    i32.store(state, i32.load(state, 20) + f, 20);
    i32.store(state, i32.load(state, 24) + g, 24);
    i32.store(state, i32.load(state, 28) + h, 28);
    data += 64;
  }
}
