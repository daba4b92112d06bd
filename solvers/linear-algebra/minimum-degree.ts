import type { Graph } from './graph';

/** Minimum degree on a leaf; the halo (numbered later) counts in the degrees but is never eliminated. */
export class LeafOrderer {
  private readonly local: Int32Array;
  constructor(
    private readonly graph: Graph,
    private readonly piece: Int32Array,
  ) {
    this.local = new Int32Array(graph.n).fill(-1);
  }

  order(nodes: Int32Array, low: number, high: number, mark: number): void {
    const { graph, piece, local } = this;
    const { start, neighbours } = graph;
    const inner = high - low;
    if (inner <= 1) return;
    const members: number[] = [];
    for (let k = low; k < high; k++) {
      local[nodes[k]] = k - low;
      members.push(nodes[k]);
    }
    for (let k = low; k < high; k++)
      for (let e = start[nodes[k]]; e < start[nodes[k] + 1]; e++) {
        const other = neighbours[e];
        if (piece[other] !== mark && local[other] < 0) {
          local[other] = members.length;
          members.push(other);
        }
      }
    const words = (members.length + 31) >> 5;
    const rows = new Int32Array(words * members.length);
    for (let k = 0; k < inner; k++)
      for (let e = start[members[k]]; e < start[members[k] + 1]; e++) {
        const other = local[neighbours[e]];
        rows[k * words + (other >> 5)] |= 1 << (other & 31);
        rows[other * words + (k >> 5)] |= 1 << (k & 31);
      }
    const degree = new Int32Array(inner);
    const alive = new Uint8Array(inner).fill(1);
    for (let k = 0; k < inner; k++) degree[k] = countBits(rows, k * words, words);
    for (let step = 0; step < inner; step++) {
      let pivot = -1;
      for (let k = 0; k < inner; k++) if (alive[k] && (pivot < 0 || degree[k] < degree[pivot])) pivot = k;
      alive[pivot] = 0;
      nodes[low + step] = members[pivot];
      const from = pivot * words;
      for (let k = 0; k < inner; k++) {
        if (!alive[k] || (rows[from + (k >> 5)] & (1 << (k & 31))) === 0) continue;
        const at = k * words;
        for (let w = 0; w < words; w++) rows[at + w] |= rows[from + w];
        rows[at + (k >> 5)] &= ~(1 << (k & 31));
        rows[at + (pivot >> 5)] &= ~(1 << (pivot & 31));
        degree[k] = countBits(rows, at, words);
      }
    }
    for (let k = 0; k < members.length; k++) local[members[k]] = -1;
  }
}

function countBits(words: Int32Array, from: number, count: number): number {
  let total = 0;
  for (let k = from; k < from + count; k++) {
    let v = words[k];
    v -= (v >>> 1) & 0x55555555;
    v = (v & 0x33333333) + ((v >>> 2) & 0x33333333);
    total += Math.imul((v + (v >>> 4)) & 0x0f0f0f0f, 0x01010101) >>> 24;
  }
  return total;
}
