import { gaussRule } from './legendre';
import { panelNodes, type Nodes } from './nodes';
import type { SmoothCurve } from './smooth-curve';

/**
 * Least sum of the distances from a foreign point to the two ends of a panel, over the length A of the panel. Points with one sum
 * lie on an ellipse about the ends: with sources outside it polynomials of degree n follow a field up to rho^-n and n Gauss points
 * integrate it up to rho^-2n, rho = A + sqrt(A^2 - 1) = 2.6 (Trefethen 2013, Approximation Theory and Approximation Practice,
 * chapters 8 and 19). Most foreign charges are images far behind the curve, so densities are smoother than that.
 */
const clearance = 1.5;
/** The same for a point across the middle, as panels are not straight: its distance over the length. */
const middleClearance = 0.5 * Math.sqrt(clearance * clearance - 1);
/** A panel turns by at most this, rad. */
const largestTurn = 1.3;
/** Largest of the last two Legendre coefficients of the speed, as a share of it, and of the turn per panel, rad. */
const shapeTail = 1e-9;
/** Of the sampling that decides on the splits. */
const sampleOrder = 16;
/** A part of the same curve is foreign where the straight way is shorter than this share of the way along the curve. */
const foldShare = 0.5;

/** Two curves closer than about this, in radii (or this share of a small curve), are taken to touch; and the most panels of all curves. */
const shortestPanel = 1e-4;
const shortestShare = 0.01;
const mostPanels = 180;

export class PanelError extends RangeError {}

interface Sampled {
  breaks: number[];
  nodes: Nodes;
  /** Ends of panels (one more than panels) and their middles: x, y pairs. */
  ends: Float64Array;
  middles: Float64Array;
  /** Length from the start to the end of each panel, and to every node. */
  along: Float64Array;
  nodeAlong: Float64Array;
}

/**
 * Panels of every curve so that a panel is short against its distance to other curves and to parts of its own curve that
 * fold back, and resolves the shape of its curve.
 * @returns breaks of the parameter, ascending over one period, both ends listed
 * @throws PanelError where curves touch, cross or come too close
 */
export function choosePanels(curves: readonly SmoothCurve[]): number[][] {
  const sampled = curves.map((curve) => sample(curve, [0, 1, 2, 3, 4, 5].map((k) => (k / 5) * curve.period)));
  for (;;) {
    const splits = sampled.map((_, c) => panelsToSplit(sampled, c));
    if (splits.every((list) => list.length === 0)) return sampled.map(({ breaks }) => breaks);
    splits.forEach((list, c) => {
      if (list.length === 0) return;
      const { breaks } = sampled[c];
      const refined = [breaks[0]];
      let next = 0;
      for (let p = 0; p + 1 < breaks.length; p++) {
        if (list[next] === p) {
          refined.push(0.5 * (breaks[p] + breaks[p + 1]));
          next++;
        }
        refined.push(breaks[p + 1]);
      }
      sampled[c] = sample(curves[c], refined);
    });
    if (sampled.reduce((sum, { breaks }) => sum + breaks.length, 0) > mostPanels) throw new PanelError('Outlines lie too close together or to the boundary, or bend too sharply, for panels on them.');
  }
}

function sample(curve: SmoothCurve, breaks: number[]): Sampled {
  const nodes = panelNodes(curve, breaks, sampleOrder);
  const panels = breaks.length - 1;
  const ends = new Float64Array(2 * breaks.length);
  const middles = new Float64Array(2 * panels);
  const point = new Float64Array(6);
  for (let k = 0; k <= panels; k++) {
    curve.at(breaks[k], point);
    ends[2 * k] = point[0];
    ends[2 * k + 1] = point[1];
    if (k === panels) break;
    curve.at(0.5 * (breaks[k] + breaks[k + 1]), point);
    middles[2 * k] = point[0];
    middles[2 * k + 1] = point[1];
  }
  const along = new Float64Array(breaks.length);
  const nodeAlong = new Float64Array(nodes.x.length);
  for (let p = 0; p < panels; p++) {
    let length = 0;
    for (let j = 0; j < sampleOrder; j++) {
      const i = p * sampleOrder + j;
      nodeAlong[i] = along[p] + length + 0.5 * nodes.weight[i];
      length += nodes.weight[i];
    }
    along[p + 1] = along[p] + length;
  }
  return { breaks, nodes, ends, middles, along, nodeAlong };
}

function panelsToSplit(sampled: readonly Sampled[], c: number): number[] {
  const own = sampled[c];
  const list: number[] = [];
  const total = own.along[own.along.length - 1];
  for (let p = 0; p + 1 < own.breaks.length; p++) {
    if (!resolvesShape(own.nodes, p) || foldsBack(own, p)) list.push(p);
    else if (sampled.some((other, o) => o !== c && nearer(other.nodes, own, p))) {
      if (own.along[p + 1] - own.along[p] < Math.min(shortestPanel, shortestShare * total)) throw new PanelError('Outlines touch or cross each other or the boundary of the body.');
      list.push(p);
    }
  }
  return list;
}

const distance = (ax: number, ay: number, bx: number, by: number): number => Math.sqrt((ax - bx) * (ax - bx) + (ay - by) * (ay - by));

function nearer(nodes: Nodes, { ends, middles }: Sampled, p: number): boolean {
  const [ax, ay, bx, by] = ends.subarray(2 * p, 2 * p + 4);
  const length = distance(ax, ay, bx, by);
  for (let i = 0; i < nodes.x.length; i++) {
    const x = nodes.x[i];
    const y = nodes.y[i];
    if (distance(x, y, ax, ay) + distance(x, y, bx, by) < clearance * length || distance(x, y, middles[2 * p], middles[2 * p + 1]) < middleClearance * length) return true;
  }
  return false;
}

function foldsBack({ nodes, ends, along, nodeAlong }: Sampled, p: number): boolean {
  const total = along[along.length - 1];
  const reach = clearance * distance(ends[2 * p], ends[2 * p + 1], ends[2 * p + 2], ends[2 * p + 3]);
  const gap = (i: number, end: number): number => {
    const d = Math.abs(nodeAlong[i] - along[end]);
    return Math.min(d, total - d);
  };
  for (let i = 0; i < nodes.x.length; i++) {
    if (nodeAlong[i] > along[p] && nodeAlong[i] < along[p + 1]) continue;
    const d0 = distance(nodes.x[i], nodes.y[i], ends[2 * p], ends[2 * p + 1]);
    const d1 = distance(nodes.x[i], nodes.y[i], ends[2 * p + 2], ends[2 * p + 3]);
    if (d0 + d1 < reach && d0 < foldShare * gap(i, p) && d1 < foldShare * gap(i, p + 1)) return true;
  }
  return false;
}

function resolvesShape(nodes: Nodes, p: number): boolean {
  const { toCoefficients } = gaussRule(sampleOrder);
  let turn = 0;
  for (let j = 0; j < sampleOrder; j++) turn += Math.abs(nodes.curvature[p * sampleOrder + j]) * nodes.weight[p * sampleOrder + j];
  if (turn > largestTurn) return false;
  const tailOf = (value: (i: number) => number): [tail: number, largest: number] => {
    let largest = 0;
    let tail = 0;
    for (let k = 0; k < sampleOrder; k++) {
      let sum = 0;
      for (let j = 0; j < sampleOrder; j++) sum += toCoefficients[k * sampleOrder + j] * value(p * sampleOrder + j);
      largest = Math.max(largest, Math.abs(sum));
      if (k >= sampleOrder - 2) tail = Math.max(tail, Math.abs(sum));
    }
    return [tail, largest];
  };
  const [speedTail, speed] = tailOf((i) => nodes.speed[i]);
  const half = nodes.weight[p * sampleOrder] / (nodes.speed[p * sampleOrder] * gaussRule(sampleOrder).weights[0]);
  const [turnTail] = tailOf((i) => nodes.curvature[i] * nodes.speed[i] * half);
  return speedTail <= shapeTail * speed && turnTail <= shapeTail;
}
