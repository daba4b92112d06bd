import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { TruthField, TruthInterface } from '../../../truth/truth-field';
import { bodyCurve, type BodyCurve } from '../body-curve';
import { choosePanels, PanelError } from './panels';
import { outerCurve, outlineCurve, type SmoothCurve } from './smooth-curve';

/** Points of an outline at which its two sides are compared. */
const samples = 48;
/** Step to either side, in radii, and the distance below which two outlines are one. */
const step = 1e-6;
const same = 1e-9;

/** An outline that can be seen in the data, with the conductivity on its two sides, S/m. */
export interface Outline {
  readonly curve: SmoothCurve;
  readonly inside: number;
  readonly outside: number;
}

export interface SmoothScene {
  readonly body: BodyCurve;
  readonly outer: SmoothCurve;
  readonly outlines: readonly Outline[];
  /** Breaks of the panels of the boundary, then of every outline. */
  readonly panels: readonly (readonly number[])[];
}

/** The smooth curves of a truth in a body, or the reason why boundary integrals do not serve it. */
export function smoothScene(truth: TruthField, geometry: Pick<EitGeometry, 'body'>): SmoothScene | string {
  if (!truth.piecewiseConstant) return 'The conductivity varies between outlines.';
  const body = bodyCurve(geometry);
  const outlines: Outline[] = [];
  const kept: TruthInterface[] = [];
  for (const outline of truth.interfaces) {
    const sides = sidesOf(truth, outline, body.radius);
    if (sides === 'hidden') continue;
    if (sides === 'mixed') return 'Outlines touch or cross each other.';
    if (kept.some((earlier) => coincide(earlier, outline, body.radius))) continue;
    const curve = outlineCurve(outline, body.radius);
    if (!curve) return 'An outline has corners.';
    const point = new Float64Array(6);
    curve.at(0, point);
    if (!body.inside(point[0] * body.radius, point[1] * body.radius)) return 'An outline leaves the body.';
    kept.push(outline);
    outlines.push({ curve, ...sides });
  }
  const start = body.point(0);
  if (truth.valueAt(start.x * (1 - step), start.y * (1 - step)) !== truth.background) return 'The conductivity at the boundary is not that of the background.';
  const outer = outerCurve(body);
  try {
    return { body, outer, outlines, panels: choosePanels([outer, ...outlines.map(({ curve }) => curve)]) };
  } catch (error) {
    if (error instanceof PanelError) return error.message;
    throw error;
  }
}

/** Conductivity inside and outside an outline; 'hidden' where a later shape covers it, 'mixed' where it changes along it. */
function sidesOf(truth: TruthField, outline: TruthInterface, radius: number): { inside: number; outside: number } | 'hidden' | 'mixed' {
  const steps = outline.curveAt ? curveSteps(outline.curveAt, radius) : chordSteps(outline, radius);
  const seen = steps.map(([x, y, nx, ny]) => ({ inside: truth.valueAt(x - nx, y - ny), outside: truth.valueAt(x + nx, y + ny) }));
  if (seen.every(({ inside, outside }) => inside === outside)) return 'hidden';
  const [first] = seen;
  return seen.every(({ inside, outside }) => inside === first.inside && outside === first.outside) ? first : 'mixed';
}

/** A place on an outline and a small step outward from it, m. */
type Step = readonly [x: number, y: number, outwardX: number, outwardY: number];

function curveSteps(curveAt: (t: number, out: Float64Array) => void, radius: number): Step[] {
  const point = new Float64Array(6);
  return Array.from({ length: samples }, (_, i) => {
    curveAt((i + 0.5) / samples, point);
    const [x, y, dx, dy] = point;
    const speed = Math.sqrt(dx * dx + dy * dy);
    const offset = Math.min(step * radius, (1e-3 * speed) / samples) / speed;
    return [x, y, offset * dy, -offset * dx] as const;
  });
}

/** Middles of chords brought onto the outline; the chord gives the direction. */
function chordSteps(outline: TruthInterface, radius: number): Step[] {
  const points = samplePoints(outline);
  const n = points.length / 2;
  return Array.from({ length: n }, (_, i) => {
    const next = (i + 1) % n;
    const tx = points[2 * next] - points[2 * i];
    const ty = points[2 * next + 1] - points[2 * i + 1];
    const length = Math.sqrt(tx * tx + ty * ty);
    const [x, y] = outline.project(0.5 * (points[2 * i] + points[2 * next]), 0.5 * (points[2 * i + 1] + points[2 * next + 1]));
    const offset = Math.min(step * radius, 1e-3 * length) / length;
    return [x, y, offset * ty, -offset * tx] as const;
  });
}

function samplePoints(outline: TruthInterface): Float64Array {
  const coarse = outline.points(() => 1e6);
  let length = 0;
  for (let i = 0; i < coarse.length; i += 2) {
    const j = (i + 2) % coarse.length;
    length += Math.sqrt((coarse[j] - coarse[i]) * (coarse[j] - coarse[i]) + (coarse[j + 1] - coarse[i + 1]) * (coarse[j + 1] - coarse[i + 1]));
  }
  return outline.points(() => length / samples);
}

function coincide(a: TruthInterface, b: TruthInterface, radius: number): boolean {
  const points = samplePoints(b);
  for (let i = 0; i < points.length; i += 2) {
    const [x, y] = a.project(points[i], points[i + 1]);
    const d = Math.sqrt((x - points[i]) * (x - points[i]) + (y - points[i + 1]) * (y - points[i + 1]));
    if (d > same * radius) return false;
  }
  return true;
}
