import type { Graph } from './graph';

/** Turns the cut edges of a two-sided piece into a minimum vertex separator (side 2). */
export class SeparatorFinder {
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
