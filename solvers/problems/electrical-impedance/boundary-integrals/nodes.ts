import { gaussRule, type GaussRule } from './legendre';
import type { SmoothCurve } from './smooth-curve';

/** Places on curves, with the weights of the integral over the length. Structure of arrays, all of one length. */
export interface Nodes {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Unit normal, to the right of the counter-clockwise direction: outward. */
  readonly normalX: Float64Array;
  readonly normalY: Float64Array;
  /** Positive on a circle, one over the radius. */
  readonly curvature: Float64Array;
  /** Parameter and |dx/dt|. */
  readonly t: Float64Array;
  readonly speed: Float64Array;
  readonly weight: Float64Array;
}

export function emptyNodes(count: number): Nodes {
  const array = (): Float64Array => new Float64Array(count);
  return { x: array(), y: array(), normalX: array(), normalY: array(), curvature: array(), t: array(), speed: array(), weight: array() };
}

const point = new Float64Array(6);

/** Fills place i with the point of the curve at t. */
export function placeNode(nodes: Nodes, i: number, curve: SmoothCurve, t: number, weightByParameter: number): void {
  curve.at(t, point);
  const [x, y, dx, dy, ddx, ddy] = point;
  const speed = Math.sqrt(dx * dx + dy * dy);
  nodes.x[i] = x;
  nodes.y[i] = y;
  nodes.normalX[i] = dy / speed;
  nodes.normalY[i] = -dx / speed;
  nodes.curvature[i] = (dx * ddy - dy * ddx) / (speed * speed * speed);
  nodes.t[i] = t;
  nodes.speed[i] = speed;
  nodes.weight[i] = weightByParameter * speed;
}

/** Gauss points of every panel of a curve, panel after panel. @param breaks ascending, over one period, both ends listed */
export function panelNodes(curve: SmoothCurve, breaks: readonly number[], order: number): Nodes {
  const rule: GaussRule = gaussRule(order);
  const nodes = emptyNodes((breaks.length - 1) * order);
  for (let p = 0; p + 1 < breaks.length; p++) {
    const half = 0.5 * (breaks[p + 1] - breaks[p]);
    const middle = 0.5 * (breaks[p + 1] + breaks[p]);
    for (let j = 0; j < order; j++) placeNode(nodes, p * order + j, curve, middle + half * rule.points[j], half * rule.weights[j]);
  }
  return nodes;
}
