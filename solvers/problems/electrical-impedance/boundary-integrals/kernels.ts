import { ln } from '../../../core/math';
import { gaussRule, logarithmWeights, nearLimit } from './legendre';
import type { Nodes } from './nodes';
import type { SmoothCurve } from './smooth-curve';

/**
 * The potential of a charge is -(1/(2 pi)) ln(r / largest). Any length will do, because the total charge is zero; one beyond the
 * capacity of the body keeps single layers positive definite on the way.
 */
const lnLargest = ln(4);
const overTwoPi = 0.5 / Math.PI;
/**
 * On one curve, closer than these the kernels are taken from curvature and speed at the two places: errors are of second order in the
 * distance there, while differences of coordinates lose 1e-16 over the distance, or over its square. In radii, and for the flux in radii of
 * curvature where those are less.
 */
const closePotential = 1e-5;
const closeFlux = 1e-4;

/** Potential at (x, y) of a unit charge at (u, v). */
export function potential(x: number, y: number, u: number, v: number): number {
  const dx = x - u;
  const dy = y - v;
  return overTwoPi * (lnLargest - 0.5 * ln(dx * dx + dy * dy));
}

/** Potential of a unit charge less -(1/(2 pi)) ln|t - s|, for two places of one electrode of half length `half`. */
export function curvedPotential(nodes: Nodes, local: Float64Array, half: number, i: number, k: number): number {
  const dx = nodes.x[i] - nodes.x[k];
  const dy = nodes.y[i] - nodes.y[k];
  const square = dx * dx + dy * dy;
  if (i === k) return overTwoPi * (lnLargest - ln(half));
  return overTwoPi * (lnLargest - 0.5 * ln(square) + ln(Math.abs(local[i] - local[k])));
}

/**
 * Normal derivative at place i of `at` of the potential of a unit charge at place k of `from`.
 * @param own both lie on one smooth curve: the kernel is bounded, -curvature / (4 pi) where they coincide
 */
export function flux(at: Nodes, i: number, from: Nodes, k: number, own: boolean): number {
  const dx = at.x[i] - from.x[k];
  const dy = at.y[i] - from.y[k];
  const square = dx * dx + dy * dy;
  if (own) {
    const bend = Math.max(1, Math.abs(at.curvature[i]));
    if (square * bend * bend < closeFlux * closeFlux) return (-overTwoPi * (2 * at.curvature[i] + from.curvature[k])) / 6;
  }
  return (-overTwoPi * (at.normalX[i] * dx + at.normalY[i] * dy)) / square;
}

/** Panels of a curve with a density given at their Gauss points. */
export interface PanelledCurve {
  readonly curve: SmoothCurve;
  readonly breaks: readonly number[];
  readonly order: number;
  readonly nodes: Nodes;
}

/**
 * Adds the weights that take the density at the nodes of a curve to its potential at a place of the same curve. The logarithm of
 * the distance of parameters is integrated against the polynomial through the density exactly, the rest is smooth.
 * @param out as long as the curve has nodes
 */
export function addOwnPotential({ curve, breaks, order, nodes }: PanelledCurve, place: Nodes, i: number, out: Float64Array): void {
  const rule = gaussRule(order);
  const near = new Float64Array(order);
  const t = place.t[i];
  const x = place.x[i];
  const y = place.y[i];
  for (let p = 0; p + 1 < breaks.length; p++) {
    const half = 0.5 * (breaks[p + 1] - breaks[p]);
    const apart = t - 0.5 * (breaks[p + 1] + breaks[p]);
    const local = (apart - curve.period * Math.round(apart / curve.period)) / half;
    const at = p * order;
    if (Math.abs(local) > nearLimit) {
      for (let j = 0; j < order; j++) out[at + j] += nodes.weight[at + j] * potential(x, y, nodes.x[at + j], nodes.y[at + j]);
      continue;
    }
    logarithmWeights(rule, local, near);
    for (let j = 0; j < order; j++) {
      const k = at + j;
      const dx = x - nodes.x[k];
      const dy = y - nodes.y[k];
      const square = dx * dx + dy * dy;
      const smooth = square < closePotential * closePotential ? ln(0.5 * half * (nodes.speed[k] + place.speed[i])) : 0.5 * ln(square) - ln(Math.abs(local - rule.points[j]));
      out[k] += overTwoPi * (nodes.weight[k] * (lnLargest - smooth) - half * nodes.speed[k] * near[j]);
    }
  }
}
