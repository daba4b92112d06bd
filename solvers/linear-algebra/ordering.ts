import type { Graph } from './graph';
import { LeafOrderer } from './minimum-degree';
import { SeparatorFinder } from './vertex-separator';

/**
 * Fill-reducing ordering of a symmetric sparse matrix by nested dissection (George 1973): a small vertex separator is
 * numbered last, the two sides are ordered the same way, leaves by minimum degree with their halo (Tinney and Walker 1967).
 * With coordinates the cut is geometric (the best of four directions through the median); without, it follows the levels of
 * a breadth-first search. The separator is a minimum vertex cover of the cut edges (Koenig's theorem).
 */

/** Nodes in a leaf: below this, minimum degree fills less than a further cut. */
const leafSize = 96;
const sampleSize = 255;
/** Pieces above this try all directions and count the nodes at each cut; below, the axis along which the piece is longer is cut. */
const carefulSize = 2000;
const halfRoot = 0.7071067811865476;
const directions = [1, 0, 0, 1, halfRoot, halfRoot, halfRoot, -halfRoot];

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

/**
 * Sets `side` to 0 or 1 by the best of the directions: in a large piece the count of boundary nodes, weighted by balance, decides, in
 * a small one its length.
 */
function splitByDirection(
  graph: Graph, nodes: Int32Array, low: number, high: number, mark: number,
  coordinates: Float64Array, piece: Int32Array, side: Uint8Array, key: Float64Array,
): void {
  if (high - low <= carefulSize && splitAcross(nodes, low, high, coordinates, side, key)) return;
  const { start, neighbours } = graph;
  let bestScore = Infinity;
  let bestDirection = 0;
  let bestMedian = 0;
  for (let d = 0; d < directions.length; d += 2) {
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

/** Cuts the longer side of the rectangle around a piece at the median; false where that leaves one side nearly empty. */
function splitAcross(nodes: Int32Array, low: number, high: number, coordinates: Float64Array, side: Uint8Array, key: Float64Array): boolean {
  let left = Infinity, right = -Infinity, bottom = Infinity, top = -Infinity;
  for (let k = low; k < high; k++) {
    const x = coordinates[2 * nodes[k]];
    const y = coordinates[2 * nodes[k] + 1];
    if (x < left) left = x;
    if (x > right) right = x;
    if (y < bottom) bottom = y;
    if (y > top) top = y;
  }
  const axis = right - left >= top - bottom ? 0 : 1;
  for (let k = low; k < high; k++) key[nodes[k]] = coordinates[2 * nodes[k] + axis];
  const median = medianOfSample(key, nodes, low, high);
  let below = 0;
  for (let k = low; k < high; k++) {
    const isLeft = key[nodes[k]] < median;
    side[nodes[k]] = isLeft ? 0 : 1;
    if (isLeft) below++;
  }
  return Math.min(below, high - low - below) >= 0.2 * (high - low);
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
