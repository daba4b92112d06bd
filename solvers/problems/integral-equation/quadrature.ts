/**
 * Composite Gauss-Legendre quadrature with eight nodes a panel (Abramowitz and Stegun 1964, 25.4.30), for functions that are
 * smooth between the ends of panels.
 */
const abscissae = Float64Array.of(
  -0.9602898564975363, -0.7966664774136267, -0.525532409916329, -0.1834346424956498,
  0.1834346424956498, 0.525532409916329, 0.7966664774136267, 0.9602898564975363,
);
const weights = Float64Array.of(
  0.1012285362903763, 0.2223810344533745, 0.3137066458778873, 0.362683783378362,
  0.362683783378362, 0.3137066458778873, 0.2223810344533745, 0.1012285362903763,
);
export const nodesPerPanel = abscissae.length;

type Integrand = (t: number) => number;

/** Panels fitted to a function, with its values at their nodes. */
export interface PanelRule {
  /** Ascending ends, one more than panels. */
  readonly edges: Float64Array;
  readonly nodes: Float64Array;
  /** Weight times the value of the function. */
  readonly weighted: Float64Array;
  readonly f: Integrand;
}

function gauss(f: Integrand, a: number, b: number): number {
  const half = 0.5 * (b - a);
  const middle = 0.5 * (a + b);
  let sum = 0;
  for (let q = 0; q < nodesPerPanel; q++) sum += weights[q] * f(middle + half * abscissae[q]);
  return half * sum;
}

/** Where the values of a panel are looked at next to its ends, beyond its outermost nodes; and what the nodes extrapolate to there. */
const nearEnd = 1 - 2e-6;
const atUpperEnd = extrapolation(nearEnd);
const atLowerEnd = extrapolation(-nearEnd);

/** Values at the place z of the polynomials that are 1 at one node and 0 at the others. */
function extrapolation(z: number): Float64Array {
  return abscissae.map((node, q) => {
    let product = 1;
    for (let r = 0; r < nodesPerPanel; r++) if (r !== q) product *= (z - abscissae[r]) / (node - abscissae[r]);
    return product;
  });
}

/** Whether the polynomial through the nodes goes on to the ends: a jump may hide between the last node and the end. */
function reachesEnds(f: Integrand, a: number, b: number, allowed: number): boolean {
  const half = 0.5 * (b - a);
  const middle = 0.5 * (a + b);
  let low = f(middle - half * nearEnd);
  let high = f(middle + half * nearEnd);
  for (let q = 0; q < nodesPerPanel; q++) {
    const value = f(middle + half * abscissae[q]);
    low -= atLowerEnd[q] * value;
    high -= atUpperEnd[q] * value;
  }
  return Math.abs(low) <= allowed && Math.abs(high) <= allowed;
}

/** Share of (largest value times length) that halving a panel may still change, and of the largest value that its ends may be off by. */
const tolerance = 1e-12;
const endTolerance = 1e-8;
const deepest = 36;
/** More panels than this are refused: the function varies faster than these quadratures are made for. */
export const mostPanels = 20_000;

/**
 * Panels for a function: `count` equal ones, halved where its integral over a panel changes by that or its nodes miss something at the ends, so that jumps and corners are
 * enclosed in panels of no weight.
 * @throws RangeError where that takes more than `mostPanels`
 */
export function fitPanels(f: Integrand, from: number, to: number, count: number): PanelRule {
  let largest = 0;
  for (let i = 0; i < 4 * count; i++) largest = Math.max(largest, Math.abs(f(from + ((i + 0.5) / (4 * count)) * (to - from))));
  const allowed = tolerance * largest * (to - from);
  const edges: number[] = [from];
  const split = (a: number, b: number, whole: number, depth: number): void => {
    if (edges.length > mostPanels) throw new RangeError(`The function varies too fast: more than ${mostPanels} panels are needed to integrate it.`);
    const middle = 0.5 * (a + b);
    if (depth < deepest && middle > a && middle < b) {
      const left = gauss(f, a, middle);
      const right = gauss(f, middle, b);
      if (Math.abs(left + right - whole) > allowed || !reachesEnds(f, a, b, endTolerance * largest)) {
        split(a, middle, left, depth + 1);
        split(middle, b, right, depth + 1);
        return;
      }
    }
    edges.push(b);
  };
  for (let i = 0; i < count; i++) {
    const a = from + (i / count) * (to - from);
    const b = i + 1 === count ? to : from + ((i + 1) / count) * (to - from);
    split(a, b, gauss(f, a, b), 0);
  }
  return ruleOf(Float64Array.from(edges), f);
}

/** The rule of given panels. */
export function ruleOf(edges: Float64Array, f: Integrand): PanelRule {
  const nodes = new Float64Array((edges.length - 1) * nodesPerPanel);
  const weighted = new Float64Array(nodes.length);
  for (let p = 0; p + 1 < edges.length; p++) {
    const half = 0.5 * (edges[p + 1] - edges[p]);
    const middle = 0.5 * (edges[p] + edges[p + 1]);
    for (let q = 0; q < nodesPerPanel; q++) {
      const t = middle + half * abscissae[q];
      nodes[p * nodesPerPanel + q] = t;
      weighted[p * nodesPerPanel + q] = half * weights[q] * f(t);
    }
  }
  return { edges, nodes, weighted, f };
}

/**
 * Integral of kernel(t) f(t) over the panels of f; a panel that holds breaks of the kernel is split there.
 * Sums run in ascending t.
 */
export function integrate({ edges, nodes, weighted, f }: PanelRule, kernel: Integrand, breaks: readonly number[]): number {
  const ends = breaks.length > 1 ? [...breaks].sort((a, b) => a - b) : breaks;
  const product: Integrand = (t) => kernel(t) * f(t);
  let next = 0;
  let sum = 0;
  for (let p = 0; p + 1 < edges.length; p++) {
    const a = edges[p];
    const b = edges[p + 1];
    while (next < ends.length && ends[next] <= a) next++;
    if (next < ends.length && ends[next] < b) {
      let left = a;
      for (; next < ends.length && ends[next] < b; next++) {
        if (ends[next] === left) continue;
        sum += gauss(product, left, ends[next]);
        left = ends[next];
      }
      sum += gauss(product, left, b);
      continue;
    }
    let panel = 0;
    for (let k = p * nodesPerPanel; k < (p + 1) * nodesPerPanel; k++) panel += weighted[k] * kernel(nodes[k]);
    sum += panel;
  }
  return sum;
}
