/**
 * Fill-reducing ordering of a symmetric sparse matrix by nested dissection (George 1973): a small vertex separator is
 * numbered last, the two sides are ordered the same way, leaves by minimum degree with their halo (Tinney and Walker 1967).
 * With coordinates the cut is geometric (the best of four directions through the median); without, it follows the levels of
 * a breadth-first search. The separator is a minimum vertex cover of the cut edges (Koenig's theorem).
 */

/** Undirected graph without loops: the neighbours of `i` are `neighbours[start[i] .. start[i + 1])`. */
export interface Graph {
  readonly n: number;
  readonly start: Int32Array;
  readonly neighbours: Int32Array;
}

/** Nodes in a leaf: below this, minimum degree fills less than a further cut. */
const leafSize = 96;
const sampleSize = 511;
const halfRoot = 0.7071067811865476;
const directions = [1, 0, 0, 1, halfRoot, halfRoot, halfRoot, -halfRoot];

/** Graph of a symmetric pattern given by its lower triangle, column by column. */
export function graphOfPattern(n: number, colStart: Int32Array, rows: Int32Array): Graph {
  const start = new Int32Array(n + 1);
  for (let j = 0; j < n; j++)
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      const i = rows[k];
      if (i !== j) {
        start[i + 1]++;
        start[j + 1]++;
      }
    }
  for (let i = 0; i < n; i++) start[i + 1] += start[i];
  const next = start.slice(0, n);
  const neighbours = new Int32Array(start[n]);
  for (let j = 0; j < n; j++)
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      const i = rows[k];
      if (i !== j) {
        neighbours[next[i]++] = j;
        neighbours[next[j]++] = i;
      }
    }
  return { n, start, neighbours };
}

/**
 * Elimination order of the nodes of `graph`.
 * @param coordinates x, y per node (2 n values), or undefined for the graph-based cut
 * @returns `order[k]` = node eliminated at step k
 */
export function nestedDissection(graph: Graph, coordinates?: Float64Array): Int32Array {
  const { n } = graph;
  const nodes = new Int32Array(n);
  for (let i = 0; i < n; i++) nodes[i] = i;
  // A node belongs to the piece whose mark it carries; separators and finished leaves carry marks never used again.
  const piece = new Int32Array(n);
  const side = new Uint8Array(n);
  const key = new Float64Array(n);
  const scratch = new Int32Array(n);
  const matcher = new SeparatorFinder(graph, piece, side);
  const leaf = new LeafOrderer(graph, piece);
  const stack: number[] = [0, n, 0];
  let marks = 0;
  while (stack.length > 0) {
    const mark = stack.pop() as number;
    const high = stack.pop() as number;
    const low = stack.pop() as number;
    if (high - low <= leafSize) {
      leaf.order(nodes, low, high, mark);
      continue;
    }
    if (coordinates) splitByDirection(graph, nodes, low, high, mark, coordinates, piece, side, key);
    else splitByLevels(graph, nodes, low, high, mark, piece, side, key, scratch);
    const separators = matcher.find(nodes, low, high, mark);
    // Stable partition: left, right, separator.
    const leftMark = ++marks;
    const rightMark = ++marks;
    let write = low;
    for (let pass = 0; pass < 3; pass++)
      for (let k = low; k < high; k++) if (side[nodes[k]] === pass) scratch[write++] = nodes[k];
    let left = 0;
    let right = 0;
    for (let k = low; k < high; k++) {
      const node = scratch[k];
      nodes[k] = node;
      if (side[node] === 0) {
        piece[node] = leftMark;
        left++;
      } else if (side[node] === 1) {
        piece[node] = rightMark;
        right++;
      } else piece[node] = -1;
    }
    if (separators === 0 && (left === 0 || right === 0)) {
      // No cut was found (all keys equal): a single piece, ordered as it stands.
      continue;
    }
    if (right > 0) stack.push(low + left, low + left + right, rightMark);
    if (left > 0) stack.push(low, low + left, leftMark);
  }
  return nodes;
}

function medianOfSample(key: Float64Array, nodes: Int32Array, low: number, high: number): number {
  const size = Math.min(sampleSize, high - low);
  const sample = new Float64Array(size);
  for (let k = 0; k < size; k++) sample[k] = key[nodes[low + Math.floor((k * (high - low)) / size)]];
  sample.sort();
  return sample[size >> 1];
}

/** Sets `side` to 0 or 1 by the best of the directions; the count of boundary nodes, weighted by balance, decides. */
function splitByDirection(
  graph: Graph, nodes: Int32Array, low: number, high: number, mark: number,
  coordinates: Float64Array, piece: Int32Array, side: Uint8Array, key: Float64Array,
): void {
  const { start, neighbours } = graph;
  let bestScore = Infinity;
  let bestDirection = 0;
  let bestMedian = 0;
  // Diagonal cuts save fill near the root; below, they only cost time.
  const tried = high - low > 2000 ? directions.length : 4;
  for (let d = 0; d < tried; d += 2) {
    const cx = directions[d];
    const cy = directions[d + 1];
    for (let k = low; k < high; k++) {
      const node = nodes[k];
      key[node] = cx * coordinates[2 * node] + cy * coordinates[2 * node + 1];
    }
    const median = medianOfSample(key, nodes, low, high);
    let left = 0;
    let leftBoundary = 0;
    let rightBoundary = 0;
    for (let k = low; k < high; k++) {
      const node = nodes[k];
      const isLeft = key[node] < median;
      if (isLeft) left++;
      for (let e = start[node]; e < start[node + 1]; e++) {
        const other = neighbours[e];
        if (piece[other] === mark && key[other] < median !== isLeft) {
          if (isLeft) leftBoundary++;
          else rightBoundary++;
          break;
        }
      }
    }
    const right = high - low - left;
    const share = Math.min(left, right) / (high - low);
    const score = share < 0.2 ? Infinity : Math.min(leftBoundary, rightBoundary) / share;
    if (score < bestScore) {
      bestScore = score;
      bestDirection = d;
      bestMedian = median;
    }
  }
  if (bestScore === Infinity) {
    const middle = (low + high) >> 1;
    for (let k = low; k < high; k++) side[nodes[k]] = k < middle ? 0 : 1;
    return;
  }
  const cx = directions[bestDirection];
  const cy = directions[bestDirection + 1];
  for (let k = low; k < high; k++) {
    const node = nodes[k];
    side[node] = cx * coordinates[2 * node] + cy * coordinates[2 * node + 1] < bestMedian ? 0 : 1;
  }
}

/** Sets `side` by the median level of a breadth-first search from a node at the rim of the piece. */
function splitByLevels(
  graph: Graph, nodes: Int32Array, low: number, high: number, mark: number,
  piece: Int32Array, side: Uint8Array, key: Float64Array, queue: Int32Array,
): void {
  const { start, neighbours } = graph;
  let root = nodes[low];
  // Two searches: the last node reached by the first is near the rim (George and Liu 1979).
  for (let round = 0; round < 2; round++) {
    for (let k = low; k < high; k++) key[nodes[k]] = -1;
    let tail = 0;
    let head = 0;
    let seed = low;
    let level = 0;
    queue[tail++] = root;
    key[root] = 0;
    while (tail < high - low || head < tail) {
      if (head === tail) {
        while (key[nodes[seed]] >= 0) seed++;
        key[nodes[seed]] = level + 1;
        queue[tail++] = nodes[seed];
      }
      const node = queue[head++];
      level = key[node];
      for (let e = start[node]; e < start[node + 1]; e++) {
        const other = neighbours[e];
        if (piece[other] === mark && key[other] < 0) {
          key[other] = level + 1;
          queue[tail++] = other;
        }
      }
    }
    if (round === 0) root = queue[tail - 1];
    else {
      // The search order itself is cut at the middle, so that equal levels still split.
      const middle = (high - low) >> 1;
      const cutLevel = key[queue[middle]];
      let below = 0;
      while (key[queue[below]] < cutLevel) below++;
      const cut = below * 4 >= high - low ? below : middle;
      for (let k = 0; k < tail; k++) side[queue[k]] = k < cut ? 0 : 1;
    }
  }
}

/** Turns the cut edges of a two-sided piece into a minimum vertex separator (side 2). */
class SeparatorFinder {
  private readonly match: Int32Array;
  private readonly visited: Int32Array;
  private readonly edgeAt: Int32Array;
  private stamp = 0;
  constructor(
    private readonly graph: Graph,
    private readonly piece: Int32Array,
    private readonly side: Uint8Array,
  ) {
    this.match = new Int32Array(graph.n).fill(-1);
    this.visited = new Int32Array(graph.n);
    this.edgeAt = new Int32Array(graph.n);
  }

  find(nodes: Int32Array, low: number, high: number, mark: number): number {
    const { graph, piece, side, match } = this;
    const { start, neighbours } = graph;
    const leftBoundary: number[] = [];
    const rightBoundary: number[] = [];
    for (let k = low; k < high; k++) {
      const node = nodes[k];
      for (let e = start[node]; e < start[node + 1]; e++) {
        const other = neighbours[e];
        if (piece[other] === mark && side[other] !== side[node]) {
          (side[node] === 0 ? leftBoundary : rightBoundary).push(node);
          break;
        }
      }
    }
    for (const node of leftBoundary)
      for (let e = start[node]; e < start[node + 1]; e++) {
        const other = neighbours[e];
        if (piece[other] === mark && side[other] === 1 && match[other] < 0) {
          match[other] = node;
          match[node] = other;
          break;
        }
      }
    for (const node of leftBoundary) if (match[node] < 0) this.augment(node, mark);
    // Koenig: left nodes not reached, and right nodes reached, by alternating paths from unmatched left nodes.
    const { visited } = this;
    const stamp = ++this.stamp;
    const stack: number[] = [];
    for (const node of leftBoundary)
      if (match[node] < 0) {
        visited[node] = stamp;
        stack.push(node);
      }
    while (stack.length > 0) {
      const node = stack.pop() as number;
      for (let e = start[node]; e < start[node + 1]; e++) {
        const other = neighbours[e];
        if (piece[other] !== mark || side[other] !== 1 || visited[other] === stamp) continue;
        visited[other] = stamp;
        const partner = match[other];
        if (partner >= 0 && visited[partner] !== stamp) {
          visited[partner] = stamp;
          stack.push(partner);
        }
      }
    }
    let count = 0;
    for (const node of leftBoundary) {
      match[node] = -1;
      if (visited[node] !== stamp) {
        side[node] = 2;
        count++;
      }
    }
    for (const node of rightBoundary) {
      match[node] = -1;
      if (visited[node] === stamp) {
        side[node] = 2;
        count++;
      }
    }
    return count;
  }

  /** One augmenting path from an unmatched left node, depth first without recursion. */
  private augment(root: number, mark: number): void {
    const { graph, piece, side, match, visited, edgeAt } = this;
    const { start, neighbours } = graph;
    const stamp = ++this.stamp;
    const path: number[] = [root];
    edgeAt[root] = start[root];
    visited[root] = stamp;
    while (path.length > 0) {
      const node = path[path.length - 1];
      if (edgeAt[node] >= start[node + 1]) {
        path.pop();
        continue;
      }
      const other = neighbours[edgeAt[node]++];
      if (piece[other] !== mark || side[other] !== 1 || visited[other] === stamp) continue;
      visited[other] = stamp;
      const partner = match[other];
      if (partner < 0) {
        let free = other;
        for (let k = path.length - 1; k >= 0; k--) {
          const left = path[k];
          const previous = match[left];
          match[left] = free;
          match[free] = left;
          free = previous;
        }
        return;
      }
      if (visited[partner] !== stamp) {
        visited[partner] = stamp;
        edgeAt[partner] = start[partner];
        path.push(partner);
      }
    }
  }
}

/** Minimum degree on a leaf; the halo (numbered later) counts in the degrees but is never eliminated. */
class LeafOrderer {
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
