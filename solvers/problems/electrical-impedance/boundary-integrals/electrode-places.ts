import { ln } from '../../../core/math';
import { electrodeResponse, responseDetail, type ElectrodePieces, type ResponseDetail } from './electrode-response';
import { gaussRule } from './legendre';
import { emptyNodes, placeNode, type Nodes } from './nodes';
import type { SmoothCurve } from './smooth-curve';

/** An electrode as a stretch of the boundary, lengths in radii along the curve from t = 0, counter-clockwise; zeta = z sigma / R. */
export interface ElectrodeArc {
  readonly from: number;
  readonly to: number;
  readonly zeta: number;
}

/** An electrode with the places where fields from elsewhere are taken. */
export interface ElectrodePlace {
  readonly half: number;
  readonly pieces: ElectrodePieces;
  /** -1 .. 1 along the electrode. */
  readonly local: Float64Array;
  readonly nodes: Nodes;
  /** n x n, row-major. */
  readonly response: Float64Array;
}

/** The outer boundary as the electrodes need it. */
export interface OuterBoundary {
  readonly curve: SmoothCurve;
  /** Perimeter, in radii. */
  readonly length: number;
  /** Parameter at a length along the curve, and the inverse. */
  readonly parameterAt: (along: number) => number;
  /** Breaks of its panels, as lengths along the curve. */
  readonly breaks: readonly number[];
}

const fewestPoints = 8;
const mostPoints = 32;
const shortestPiece = 1e-4;

/**
 * Cuts every electrode into pieces on which the fields of all other sources are polynomials to `tolerance`, and finds its answer.
 * @param foreign places of other sources: points of the interfaces
 */
export function placeElectrodes(arcs: readonly ElectrodeArc[], outer: OuterBoundary, foreign: readonly Nodes[], tolerance: number, detail: ResponseDetail = responseDetail): ElectrodePlace[] {
  const rim = arcs.map(({ from, to }) => electrodeNodes(outer, { breaks: [-1, -0.5, 0, 0.5, 1], orders: [8, 8, 8, 8] }, from, to).nodes);
  const responses = new Map<string, Float64Array>();
  return arcs.map(({ from, to, zeta }, l) => {
    const sources = [...foreign, ...rim.filter((_, other) => other !== l)];
    const pieces = cut(outer, from, to, sources, tolerance);
    const half = 0.5 * (to - from);
    const key = JSON.stringify([pieces, zeta / half]);
    const response = responses.get(key) ?? electrodeResponse(pieces, zeta / half, detail);
    responses.set(key, response);
    return { half, pieces, response, ...electrodeNodes(outer, pieces, from, to) };
  });
}

function cut(outer: OuterBoundary, from: number, to: number, sources: readonly Nodes[], tolerance: number): ElectrodePieces {
  const breaks = [-1];
  const orders: number[] = [];
  const middle = 0.5 * (from + to);
  const half = 0.5 * (to - from);
  const point = new Float64Array(6);
  const visit = (a: number, b: number): void => {
    outer.curve.at(outer.parameterAt(middle + half * a), point);
    const [ax, ay] = point;
    outer.curve.at(outer.parameterAt(middle + half * b), point);
    const [bx, by] = point;
    const order = pointsFor(sources, ax, ay, bx, by, tolerance);
    const length = half * (b - a);
    if ((order > mostPoints || length > shortestPanelOver(outer, middle + half * a, middle + half * b)) && length > shortestPiece) {
      visit(a, 0.5 * (a + b));
      visit(0.5 * (a + b), b);
    } else {
      breaks.push(b);
      orders.push(Math.min(order, mostPoints));
    }
  };
  visit(-1, 1);
  return { breaks, orders };
}

/** Gauss points that follow fields of these sources on a straight piece, even, at least `fewestPoints`. */
function pointsFor(sources: readonly Nodes[], ax: number, ay: number, bx: number, by: number, tolerance: number): number {
  const length = Math.sqrt((ax - bx) * (ax - bx) + (ay - by) * (ay - by));
  let nearest = Infinity;
  for (const { x, y } of sources) {
    for (let i = 0; i < x.length; i++) {
      const sum = Math.sqrt((x[i] - ax) * (x[i] - ax) + (y[i] - ay) * (y[i] - ay)) + Math.sqrt((x[i] - bx) * (x[i] - bx) + (y[i] - by) * (y[i] - by));
      nearest = Math.min(nearest, sum / length);
    }
  }
  if (!(nearest > 1)) return Infinity;
  const rho = nearest + Math.sqrt(nearest * nearest - 1);
  return Math.max(fewestPoints, 2 * Math.ceil((-0.5 * ln(tolerance)) / ln(rho)));
}

/** Length of the shortest panel of the boundary that a stretch meets: the panels follow its shape. */
function shortestPanelOver({ breaks, length }: OuterBoundary, from: number, to: number): number {
  let shortest = Infinity;
  for (let p = 0; p + 1 < breaks.length; p++) {
    // Compared modulo the perimeter: the middle of the stretch is brought within half a turn of the middle of the panel.
    const centre = 0.5 * (breaks[p] + breaks[p + 1]);
    const apart = 0.5 * (from + to) - centre;
    const gap = Math.abs(apart - length * Math.round(apart / length));
    if (gap < 0.5 * (to - from + breaks[p + 1] - breaks[p]) - 1e-12) shortest = Math.min(shortest, breaks[p + 1] - breaks[p]);
  }
  return shortest;
}

function electrodeNodes(outer: OuterBoundary, { breaks, orders }: ElectrodePieces, from: number, to: number): { local: Float64Array; nodes: Nodes } {
  const count = orders.reduce((a, b) => a + b, 0);
  const local = new Float64Array(count);
  const nodes = emptyNodes(count);
  let i = 0;
  orders.forEach((order, p) => {
    const rule = gaussRule(order);
    for (let j = 0; j < order; j++, i++) {
      local[i] = 0.5 * (breaks[p] + breaks[p + 1]) + 0.5 * (breaks[p + 1] - breaks[p]) * rule.points[j];
      placeNode(nodes, i, outer.curve, outer.parameterAt(0.5 * (from + to) + 0.5 * (to - from) * local[i]), 0);
    }
  });
  return { local, nodes };
}
